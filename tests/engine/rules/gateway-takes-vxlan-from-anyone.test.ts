import { gatewayTakesVxlanFromAnyone } from '#engine/rules/gateway-takes-vxlan-from-anyone.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const open = (vxlanFrom: string | null, trusted = false) =>
  changed(pairDesign(), {
    devices: { 'fw-s1': { settings: { vxlanFrom } } },
    transports: { coast: { trusted } },
  });

testRule(gatewayTakesVxlanFromAnyone, {
  accepted: {
    'what is not known': pairDesign(),
    'peers only': open('peers'),
    'nobody outside IPsec': open('nobody'),
    'anyone on a transport that is trusted': open('anyone', true),
  },
  rejected: {
    'anyone on the internet': {
      design: open('anyone'),
      findings: [
        {
          sentence: 'fw-s1 takes VXLAN from anyone on Coastal access',
          words: 'open to anyone',
          severity: 'blocking',
          elements: ['devices/fw-s1', 'transports/coast'],
          properties: ['devices/fw-s1: settings.vxlanFrom'],
          fixes: ['From peers only'],
        },
      ],
    },
  },
});
