import { integrityTruncationDiffers } from '#engine/rules/integrity-truncation-differs.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const cut = (a: 96 | 128 | null, b: 96 | 128 | null, integrity: string | null = 'hmac-sha2-256-128') => {
  const end = { espProposals: { first: { encryption: 'aes-cbc', integrity } } };
  return changed(pairDesign(), {
    profiles: { old: { name: 'Old box', hmacSha256Bits: a }, new: { name: 'New box', hmacSha256Bits: b } },
    devices: { 'fw-s0': { profile: 'old' }, 'fw-s1': { profile: 'new' } },
    associations: { 'as-s0-s1': { a: end, b: end } },
    segments: { a: { mtu: 1280 } },
  });
};

testRule(integrityTruncationDiffers, {
  accepted: {
    'devices without a profile': pairDesign(),
    'one length at both ends': cut(96, 96),
    'a length that is not known': cut(96, null),
    'another integrity algorithm': cut(96, 128, 'hmac-sha2-512-256'),
  },
  rejected: {
    'two lengths': {
      design: cut(96, 128),
      findings: [
        {
          sentence: 'HMAC-SHA2-256 cut to 96 bits at Head office, 128 at Gullhaven',
          words: 'integrity length differs',
          severity: 'blocking',
          elements: ['associations/as-s0-s1'],
          properties: [
            'associations/as-s0-s1: a.espProposals.first.integrity',
            'associations/as-s0-s1: b.espProposals.first.integrity',
          ],
          fixes: ['AES-GCM at both ends'],
        },
      ],
    },
  },
});
