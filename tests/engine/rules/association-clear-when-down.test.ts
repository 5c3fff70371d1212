import { associationClearWhenDown } from '#engine/rules/association-clear-when-down.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const down = (a: string | null, b: string | null, trusted = false) =>
  changed(pairDesign(), {
    associations: { 'as-s0-s1': { a: { whenDown: a }, b: { whenDown: b } } },
    transports: { coast: { trusted } },
  });

testRule(associationClearWhenDown, {
  accepted: {
    'ends that drop': pairDesign(),
    'a transport that is trusted': down('clear', 'clear', true),
    'an association without tunnels': changed(down(null, null), {
      tunnels: { 'tn-s0-s1-a': null },
      forwarders: {
        'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
        'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
      },
    }),
  },
  rejected: {
    'an end that falls back to clear text': {
      design: down(null, 'clear'),
      findings: [
        {
          sentence: 'Tunnels leave Gullhaven in clear while as-s0-s1 is down',
          words: 'falls to clear',
          severity: 'blocking',
          elements: ['associations/as-s0-s1'],
          properties: ['associations/as-s0-s1: b.whenDown'],
          fixes: ['Drop while down'],
        },
      ],
    },
    'an end of which nothing is known': {
      design: down(null, 'drop'),
      findings: [
        {
          sentence: 'Not stated whether as-s0-s1 drops packets while down',
          words: 'drop rule unstated',
          severity: 'advisory',
          properties: ['associations/as-s0-s1: a.whenDown'],
          fixes: ['Drop while down'],
        },
      ],
    },
    'several associations of which nothing is known, once': {
      design: changed(hubDesign(3), {
        associations: {
          'as-s0-s1': { a: { whenDown: null } },
          'as-s0-s2': { a: { whenDown: null } },
          'as-s0-s3': { a: { whenDown: 'clear' }, b: { whenDown: 'clear' } },
        },
      }),
      findings: [
        { sentence: 'Tunnels leave both ends in clear while as-s0-s3 is down', fixes: ['Drop while down'] },
        {
          sentence: 'Not stated whether two associations drop packets while down',
          fixes: ['Drop while down'],
        },
      ],
    },
  },
});
