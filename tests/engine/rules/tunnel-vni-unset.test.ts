import { tunnelVniUnset } from '#engine/rules/tunnel-vni-unset.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';

testRule(tunnelVniUnset, {
  accepted: { 'a VNI at both ends': pairDesign() },
  rejected: {
    'a tunnel without any VNI': {
      design: changed(hubDesign(2), { tunnels: { [id]: { a: { vni: null }, b: { vni: null } } } }),
      findings: [
        {
          sentence: 'tn-s0-s1-a has no VNI yet',
          words: 'VNI missing',
          severity: 'advisory',
          elements: [`tunnels/${id}`],
          properties: [`tunnels/${id}: a.vni`, `tunnels/${id}: b.vni`],
          fixes: ['Set both ends to 10002'],
        },
      ],
    },
    'an end without a VNI': {
      design: changed(pairDesign(), { tunnels: { [id]: { b: { vni: null } } } }),
      findings: [
        {
          sentence: 'VNI 10000 at Head office, none yet at Gullhaven',
          properties: [`tunnels/${id}: b.vni`],
          fixes: ['Set both ends to 10000'],
        },
      ],
    },
    'no VNI, and has nothing to offer when the pool is used up': {
      design: changed(pairDesign(), { tunnels: { [id]: { a: { vni: null }, b: { vni: null } } } }),
      context: { pools: { vnis: [{ from: 7, to: 8 }] }, otherDesigns: [{ vnis: [7, 8] }] },
      findings: [{ sentence: 'tn-s0-s1-a has no VNI yet', fixes: [] }],
    },
  },
});
