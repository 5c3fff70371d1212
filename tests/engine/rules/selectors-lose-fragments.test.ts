import { selectorsLoseFragments } from '#engine/rules/selectors-lose-fragments.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const fragmenting = (mtu: number, tunnelDf: string | null, udpPort: number | null) => {
  const end = { outerDf: 'clear', selectors: { loopbacks: { udpPort } } };
  return changed(pairDesign(), {
    segments: { a: { mtu } },
    associations: { 'as-s0-s1': { a: end, b: end } },
    tunnels: { 'tn-s0-s1-a': { a: { outerDf: tunnelDf }, b: { outerDf: tunnelDf } } },
  });
};

testRule(selectorsLoseFragments, {
  accepted: {
    'selectors without a port': fragmenting(1500, 'clear', null),
    'packets that fit': fragmenting(1396, 'clear', 4789),
    'tunnel packets that must not be cut': fragmenting(1500, 'set', 4789),
    'tunnel packets of which nothing is known': fragmenting(1500, null, 4789),
  },
  rejected: {
    'fragments before selectors with a port': {
      design: fragmenting(1500, 'clear', 4789),
      findings: [
        {
          sentence: 'Selectors of as-s0-s1 lose fragments at both ends',
          words: 'fragments not selected',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'tunnels/tn-s0-s1-a'],
          properties: ['associations/as-s0-s1: a.selectors', 'associations/as-s0-s1: b.selectors'],
          fixes: ['Select any port'],
        },
      ],
    },
    'a port at one end only': {
      design: changed(fragmenting(1500, 'inherit', 4789), {
        associations: { 'as-s0-s1': { a: { selectors: { loopbacks: { udpPort: null } } } } },
      }),
      findings: [
        {
          sentence: 'Selectors of as-s0-s1 lose fragments at Gullhaven',
          fixes: ['Select any port'],
        },
      ],
    },
  },
});
