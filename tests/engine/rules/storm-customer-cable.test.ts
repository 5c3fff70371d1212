import { stormCustomerCable } from '#engine/rules/storm-customer-cable.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const port = (number: number) => ({ number, role: 'lan', mode: 'trunk', name: `fibre${number}` }) as const;
const quay = (a: string, b: string, number = 9, name?: string) => ({
  devices: {
    [a]: { ports: { [`p${number}`]: port(number) } },
    [b]: { ports: { [`p${number}`]: port(number) } },
  },
  links: {
    [`cb-quay${number}`]: {
      kind: 'cable',
      ...(name === undefined ? {} : { name }),
      a: { device: a, port: `p${number}` },
      b: { device: b, port: `p${number}` },
    },
  },
});
const closed = changed(pairDesign(), quay('sw-s0', 'sw-s1', 9, 'harbour fibre'));

testRule(stormCustomerCable, {
  accepted: {
    'two sites with the overlay alone': pairDesign(),
    'a cable between the sites that carries another VLAN': changed(closed, {
      devices: { 'sw-s1': { ports: { p9: { allowedVlans: [999] } } } },
    }),
    'a cable instead of the tunnel': changed(closed, {
      forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': null } } },
    }),
    'a mesh of tunnels, which is another rule’s': meshDesign(3),
  },
  rejected: {
    'a fibre of the customer beside the tunnel': {
      design: closed,
      findings: [
        {
          sentence: 'Harbour fibre closes a loop of segment A beside the overlay',
          words: 'broadcast storm',
          severity: 'blocking',
          elements: ['links/cb-quay9', 'tunnels/tn-s0-s1-a', 'links/cb-s0-up1', 'links/cb-s1-up1'],
          fixes: ['Remove harbour fibre', 'Remove tn-s0-s1-a'],
        },
      ],
    },
    'one without a name between two spokes of a hub': {
      design: changed(hubDesign(2), quay('sw-s1', 'sw-s2')),
      findings: [
        {
          sentence: 'A cable Gullhaven – Orrin Point closes a loop of segment A beside the overlay',
          fixes: ['Remove the cable sw-s1 fibre9 – sw-s2 fibre9', 'Remove tn-s0-s2-a'],
        },
      ],
    },
    'two cables between two sites': {
      design: changed(pairDesign(), quay('sw-s0', 'sw-s1'), quay('sw-s0', 'sw-s1', 8)),
      findings: [
        {
          sentence: 'Two cables between sites close a loop of segment A',
          fixes: ['Remove two cables', 'Remove one tunnel and one cable'],
        },
      ],
    },
  },
});
