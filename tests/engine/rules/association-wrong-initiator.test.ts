import { associationWrongInitiator } from '#engine/rules/association-wrong-initiator.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'as-s0-s1';
const roomy = { segments: { a: { mtu: 1380 } } };

testRule(associationWrongInitiator, {
  accepted: {
    'ends that can both be reached': pairDesign(),
    'an end behind NAT that starts': changed(pairDesign(), roomy, { links: { 'ld-s0-coast': { nat: {} } } }),
    'an end behind NAT that starts on first traffic': changed(pairDesign(), roomy, {
      links: { 'ld-s1-coast': { nat: {} } },
      associations: { [id]: { b: { start: 'on-traffic' } } },
    }),
    'an answering end whose NAT forwards': changed(pairDesign(), roomy, {
      links: { 'ld-s1-coast': { nat: { forwarded: true } } },
    }),
  },
  rejected: {
    'an end behind NAT that only answers': {
      design: changed(pairDesign(), roomy, { links: { 'ld-s1-coast': { nat: {} } } }),
      findings: [
        {
          sentence: 'Gullhaven only answers, but NAT lets nobody in to ask',
          words: 'wrong end starts',
          severity: 'blocking',
          elements: [`associations/${id}`, 'links/ld-s1-coast'],
          properties: [`associations/${id}: b.start`, 'links/ld-s1-coast: nat'],
          fixes: ['Let Gullhaven start'],
        },
      ],
    },
    'an end with a changing address that only answers': {
      design: changed(pairDesign(), { links: { 'ld-s1-coast': { dynamic: true } } }),
      findings: [
        {
          sentence: 'Gullhaven only answers, but its address changes',
          properties: [`associations/${id}: b.start`, 'links/ld-s1-coast: dynamic'],
          fixes: ['Let Gullhaven start'],
        },
      ],
    },
  },
});
