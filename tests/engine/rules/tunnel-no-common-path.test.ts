import { tunnelNoCommonPath } from '#engine/rules/tunnel-no-common-path.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';
const bare = changed(pairDesign({ join: { protectedBy: false } }), {
  transports: { coast: { trusted: true } },
});

testRule(tunnelNoCommonPath, {
  accepted: {
    'two landings on one transport': bare,
    'a tunnel whose association has no path, which is told there': changed(pairDesign(), {
      devices: { 'fw-s1': { ports: { wan1: { shut: true } } } },
    }),
  },
  rejected: {
    'an end whose WAN port is shut': {
      design: changed(bare, { devices: { 'fw-s1': { ports: { wan1: { shut: true } } } } }),
      findings: [
        {
          sentence: 'No path: every WAN port it may use at Gullhaven is shut',
          words: 'WAN port shut',
          severity: 'blocking',
          elements: [`tunnels/${id}`],
          properties: [`tunnels/${id}: a.via`, `tunnels/${id}: b.via`],
          mark: { kind: 'cut', tunnel: id },
          fixes: ['Open wan1'],
        },
      ],
    },
    'an end that names the landing of another device': {
      design: changed(bare, { tunnels: { [id]: { a: { via: { first: { landing: 'ld-s1-coast' } } } } } }),
      findings: [
        {
          sentence: 'No path: Head office names only WAN ports of other devices',
          fixes: ['Use Coastal access'],
        },
      ],
    },
    'a tunnel from a device to itself': {
      design: changed(bare, { tunnels: { [id]: { b: { endpoint: 'lo-s0' } } } }),
      findings: [{ sentence: 'Both ends of tn-s0-s1-a are on fw-s0', words: 'one device only', fixes: [] }],
    },
  },
});
