import { tunnelVniReserved } from '#engine/rules/tunnel-vni-reserved.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';
const withVnis = (a: number | null, b: number | null) =>
  changed(pairDesign(), { tunnels: { [id]: { a: { vni: a }, b: { vni: b } } } });

testRule(tunnelVniReserved, {
  accepted: {
    'VNI 2 at both ends': withVnis(2, 2),
    'a tunnel without a VNI': withVnis(null, null),
    'ends that differ, which is another fault': withVnis(0, 10_000),
  },
  rejected: {
    'VNI 0': {
      design: withVnis(0, 0),
      findings: [
        {
          sentence: 'tn-s0-s1-a uses VNI 0, whose meaning depends on the equipment',
          words: 'VNI 0 used',
          severity: 'advisory',
          elements: [`tunnels/${id}`],
          properties: [`tunnels/${id}: a.vni`, `tunnels/${id}: b.vni`],
          fixes: ['Set both ends to 10000'],
        },
      ],
    },
    'VNI 1 at the one end that is known': {
      design: withVnis(1, null),
      findings: [
        {
          sentence: 'tn-s0-s1-a uses VNI 1, which may be kept for management',
          properties: [`tunnels/${id}: a.vni`],
          fixes: ['Set both ends to 10000'],
        },
      ],
    },
    'VNI 1, and proposes the pool’s first number that no design has': {
      design: withVnis(1, 1),
      context: { pools: { vnis: [{ from: 500, to: 599 }] }, otherDesigns: [{ vnis: [500, 501] }] },
      findings: [
        {
          sentence: 'tn-s0-s1-a uses VNI 1, which may be kept for management',
          fixes: ['Set both ends to 502'],
        },
      ],
    },
  },
});
