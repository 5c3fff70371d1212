import { ikeVersionOutdated } from '#engine/rules/ike-version-outdated.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const versions = (a: 1 | 2 | null, b: 1 | 2 | null) =>
  changed(pairDesign(), { associations: { 'as-s0-s1': { a: { ikeVersion: a }, b: { ikeVersion: b } } } });
const found = {
  sentence: 'as-s0-s1 is made by IKEv1',
  words: 'IKEv1 in use',
  severity: 'degrading',
  elements: ['associations/as-s0-s1'],
  fixes: ['IKEv2 at both ends'],
} as const;

testRule(ikeVersionOutdated, {
  accepted: {
    'version 2 at both ends': pairDesign(),
    'versions that are not known': versions(null, null),
    'versions that differ, which another check tells': versions(1, 2),
  },
  rejected: {
    'version 1 at both ends': { design: versions(1, 1), findings: [found] },
    'version 1 beside an end of which nothing is known': {
      design: versions(null, 1),
      findings: [{ ...found, properties: ['associations/as-s0-s1: b.ikeVersion'] }],
    },
  },
});
