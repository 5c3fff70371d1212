import type { MergePatch } from '#engine/model/merge-patch.ts';
import { weakAlgorithm } from '#engine/rules/weak-algorithm.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const atBoth = (patch: MergePatch): MergePatch => ({ associations: { [id]: { a: patch, b: patch } } });
const ike = (patch: MergePatch): MergePatch => atBoth({ ikeProposals: { first: patch } });
const esp = (patch: MergePatch): MergePatch => atBoth({ espProposals: { first: patch } });
const roomy = { segments: { a: { mtu: 1300 } } };

testRule(weakAlgorithm, {
  accepted: {
    'AES-GCM with SHA-2 and group 19': pairDesign(),
    'AES-CBC with SHA-2': changed(
      pairDesign(),
      roomy,
      esp({ encryption: 'aes-cbc', integrity: 'hmac-sha2-256-128' }),
    ),
    'algorithms that the standards do not list': changed(
      pairDesign(),
      ike({ prf: 'hmac-sha2-384', group: 31 }),
      esp({ encryption: 'aes-gcm-12' }),
    ),
    'proposals that are not known': changed(pairDesign(), atBoth({ ikeProposals: null, espProposals: null })),
  },
  rejected: {
    'a forbidden encryption at both ends as one fault': {
      design: changed(
        pairDesign(),
        roomy,
        esp({ encryption: 'des-cbc', keyBits: null, integrity: 'hmac-sha2-256-128' }),
      ),
      findings: [
        {
          sentence: 'Forbidden ESP DES-CBC in as-s0-s1 at both ends',
          words: 'forbidden algorithm',
          severity: 'blocking',
          elements: [`associations/${id}`],
          properties: [
            `associations/${id}: a.espProposals.first.encryption`,
            `associations/${id}: b.espProposals.first.encryption`,
          ],
          fixes: ['Replace at both ends'],
        },
      ],
    },
    'a fading encryption and group, and offers to replace all': {
      design: changed(
        pairDesign(),
        roomy,
        esp({ encryption: '3des-cbc', keyBits: 192, integrity: 'hmac-sha2-256-128' }),
        ike({ group: 5 }),
      ),
      findings: [
        {
          sentence: 'Weak ESP 3DES-CBC in as-s0-s1 at both ends',
          words: 'weak algorithm',
          severity: 'degrading',
          fixes: ['Replace all that is weak', 'Replace at both ends'],
        },
        {
          sentence: 'Weak IKE group 5 (1536-bit MODP) in as-s0-s1 at both ends',
          fixes: ['Replace all that is weak', 'Replace at both ends'],
        },
      ],
    },
    'SHA-1, whose level is falling': {
      design: changed(
        pairDesign(),
        roomy,
        esp({ encryption: 'aes-cbc', integrity: 'hmac-sha1-96' }),
        ike({ prf: 'hmac-sha1' }),
      ),
      findings: [
        {
          sentence: 'Weak ESP HMAC-SHA1-96 in as-s0-s1 at both ends',
          fixes: ['Replace all that is weak', 'Replace at both ends'],
        },
        {
          sentence: 'Weak IKE HMAC-SHA1 in as-s0-s1 at both ends',
          fixes: ['Replace all that is weak', 'Replace at both ends'],
        },
      ],
    },
    'encryption without integrity': {
      design: changed(pairDesign(), roomy, esp({ encryption: 'aes-cbc' })),
      findings: [
        {
          sentence: 'Forbidden ESP AES-CBC without integrity in as-s0-s1 at both ends',
          severity: 'blocking',
          properties: [
            `associations/${id}: a.espProposals.first.integrity`,
            `associations/${id}: b.espProposals.first.integrity`,
          ],
          fixes: ['Replace at both ends'],
        },
      ],
    },
    'NULL encryption': {
      design: changed(
        pairDesign(),
        roomy,
        esp({ encryption: 'null', keyBits: null, integrity: 'hmac-sha2-256-128' }),
      ),
      findings: [
        {
          sentence: 'as-s0-s1 may run unencrypted: NULL at both ends',
          words: 'not encrypted',
          severity: 'degrading',
          fixes: ['Replace at both ends'],
        },
      ],
    },
    'a weak proposal that becomes equal to another once it is strong': {
      design: changed(
        pairDesign(),
        atBoth({
          ikeProposals: {
            older: { rank: 'a5', encryption: 'aes-gcm-16', keyBits: 256, prf: 'hmac-sha2-256', group: 2 },
          },
        }),
      ),
      findings: [
        {
          sentence: 'Weak IKE group 2 (1024-bit MODP) in as-s0-s1 at both ends',
          properties: [
            `associations/${id}: a.ikeProposals.older.group`,
            `associations/${id}: b.ikeProposals.older.group`,
          ],
          fixes: ['Replace at both ends'],
        },
      ],
    },
  },
});
