import { applyPatch } from '#engine/model/merge-patch.ts';
import { tunnelVniMismatch } from '#engine/rules/tunnel-vni-mismatch.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { testRule } from '../../support/rule-tester.ts';

const pair = pairDesign();
const id = 'tn-s0-s1-a';
const withVnis = (a: number | null, b: number | null) =>
  applyPatch(pair, { tunnels: { [id]: { a: { vni: a }, b: { vni: b } } } });

testRule(tunnelVniMismatch, {
  accepted: {
    'equal VNIs': pair,
    'an end whose VNI is not known yet': withVnis(10_000, null),
  },
  rejected: {
    'differing VNIs': {
      design: withVnis(10_120, 10_210),
      findings: [
        {
          sentence: 'VNI 10120 at Head office, 10210 at Gullhaven',
          words: 'VNIs differ',
          severity: 'blocking',
          elements: [`tunnels/${id}`],
          properties: [`tunnels/${id}: a.vni`, `tunnels/${id}: b.vni`],
          mark: { kind: 'cut', tunnel: id, vnis: { a: 10_120, b: 10_210 } },
          fixes: ['Set Gullhaven to 10120', 'Set Head office to 10210'],
        },
      ],
    },
    'a value that is taken at the other end, and offers only the free one': {
      design: applyPatch(hubDesign(2), { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_001 } } } }),
      findings: [
        {
          sentence: 'VNI 10000 at Head office, 10001 at Gullhaven',
          fixes: ['Set Gullhaven to 10000'],
        },
      ],
    },
    'the pool’s value first': {
      design: withVnis(10_120, 10_210),
      context: { pools: { vnis: [{ from: 10_200, to: 10_299 }] } },
      findings: [
        {
          sentence: 'VNI 10120 at Head office, 10210 at Gullhaven',
          fixes: ['Set Head office to 10210', 'Set Gullhaven to 10120'],
        },
      ],
    },
    'two values that neither suits, and offers a third': {
      design: withVnis(0, 1),
      findings: [
        {
          sentence: 'VNI 0 at Head office, 1 at Gullhaven',
          fixes: ['Set both ends to 10000', 'Set Gullhaven to 0', 'Set Head office to 1'],
        },
      ],
    },
  },
});
