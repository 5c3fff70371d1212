import { associationBothBehindNat } from '#engine/rules/association-both-behind-nat.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const nat = (a: boolean | null, b: boolean | null) =>
  changed(pairDesign(), {
    segments: { a: { mtu: 1380 } },
    links: { 'ld-s0-coast': { nat: { forwarded: a } }, 'ld-s1-coast': { nat: { forwarded: b } } },
  });

testRule(associationBothBehindNat, {
  accepted: {
    'no NAT': pairDesign(),
    'NAT at one end': changed(pairDesign(), {
      links: { 'ld-s0-coast': { nat: {} } },
    }),
    'NAT at both ends of which one forwards': nat(null, true),
  },
  rejected: {
    'NAT at both ends': {
      design: nat(null, false),
      findings: [
        {
          sentence: 'Head office and Gullhaven are both behind NAT that forwards nothing',
          words: 'NAT at both',
          severity: 'blocking',
          elements: ['associations/as-s0-s1', 'links/ld-s0-coast', 'links/ld-s1-coast'],
          properties: ['links/ld-s0-coast: nat', 'links/ld-s1-coast: nat'],
          fixes: ['Forward to Head office', 'Forward to Gullhaven'],
        },
      ],
    },
  },
});
