import { tunnelUdpPortMismatch } from '#engine/rules/tunnel-udp-port-mismatch.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';
const withPorts = (a: number | null, b: number | null) =>
  changed(pairDesign(), { tunnels: { [id]: { a: { udpPort: a }, b: { udpPort: b } } } });

testRule(tunnelUdpPortMismatch, {
  accepted: {
    'the assigned port at both ends': withPorts(4789, 4789),
    'another port at both ends': withPorts(8472, 8472),
    'an end whose port is not known beside the assigned one': withPorts(4789, null),
    'ports of which none is known': withPorts(null, null),
  },
  rejected: {
    'an older port at one end': {
      design: withPorts(8472, 4789),
      findings: [
        {
          sentence: 'UDP port 8472 at Head office, 4789 at Gullhaven',
          words: 'UDP ports differ',
          severity: 'blocking',
          elements: [`tunnels/${id}`],
          properties: [`tunnels/${id}: a.udpPort`, `tunnels/${id}: b.udpPort`],
          mark: { kind: 'cut', tunnel: id },
          fixes: ['Set Head office to 4789', 'Set Gullhaven to 8472'],
        },
      ],
    },
    'two ports of which neither is the assigned one': {
      design: withPorts(8472, 8473),
      findings: [
        {
          sentence: 'UDP port 8472 at Head office, 8473 at Gullhaven',
          fixes: ['Set both ends to 4789', 'Set Gullhaven to 8472', 'Set Head office to 8473'],
        },
      ],
    },
    'another port beside an end of which nothing is known': {
      design: withPorts(null, 8472),
      findings: [
        {
          sentence: 'UDP port 8472 at Gullhaven, not stated at Head office',
          words: 'UDP port unstated',
          severity: 'advisory',
          properties: [`tunnels/${id}: a.udpPort`],
          fixes: ['Set Head office to 8472'],
        },
      ],
    },
    'ports of which one is no cure, because the selectors name the other': {
      design: changed(withPorts(4789, 8472), {
        associations: {
          'as-s0-s1': {
            a: { selectors: { loopbacks: { udpPort: 4789 } } },
            b: { selectors: { loopbacks: { udpPort: 8472 } } },
          },
        },
      }),
      findings: [{ sentence: 'UDP port 4789 at Head office, 8472 at Gullhaven', fixes: [] }],
    },
  },
});
