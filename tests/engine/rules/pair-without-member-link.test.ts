import type { MergePatch } from '#engine/model/merge-patch.ts';
import { pairWithoutMemberLink } from '#engine/rules/pair-without-member-link.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });
const unplugged: MergePatch = { links: { 'cb-s0-sync1': null, 'cb-s0-sync2': null } };
const port = (number: number) => ({ number, role: 'lan', mode: 'access', vlan: 999 }) as const;
const throughSwitch: MergePatch = {
  devices: { 'sw-s0': { ports: { p8: port(8), p9: port(9) } } },
  links: {
    'cb-x1': {
      kind: 'cable',
      a: { device: 'fw-s0', port: 'sync1', member: 1 },
      b: { device: 'sw-s0', port: 'p8' },
    },
    'cb-x2': {
      kind: 'cable',
      a: { device: 'fw-s0', port: 'sync1', member: 2 },
      b: { device: 'sw-s0', port: 'p9' },
    },
  },
};

testRule(pairWithoutMemberLink, {
  accepted: {
    'two cables between the members': pair,
    'one cable between the members': changed(pair, { links: { 'cb-s0-sync2': null } }),
    'a second way through a switch': changed(pair, { links: { 'cb-s0-sync1': null } }, throughSwitch),
    'a pair that nothing uses yet': changed(pairDesign(), {
      devices: {
        spare: {
          kind: 'ha-pair',
          site: 's0',
          name: 'spare',
          memberNames: { 1: 'spare-1', 2: 'spare-2' },
          ports: {},
        },
      },
    } as MergePatch),
  },
  rejected: {
    'members that nothing joins': {
      design: changed(pair, unplugged),
      findings: [
        {
          sentence: 'No cable joins fw-s0-1 and fw-s0-2',
          words: 'member link missing',
          severity: 'blocking',
          elements: ['devices/fw-s0'],
          mark: {
            kind: 'ghost',
            from: { device: 'fw-s0', port: 'sync1', member: 1 },
            to: { device: 'fw-s0', port: 'sync1', member: 2 },
            label: 'sync1',
          },
          fixes: ['Join them'],
        },
      ],
    },
    'members without a port for it': {
      design: changed(pair, unplugged, { devices: { 'fw-s0': { ports: { sync1: null, sync2: null } } } }),
      findings: [{ sentence: 'No cable joins fw-s0-1 and fw-s0-2', fixes: [] }],
    },
    'members that hear each other through a switch, as a milder fault': {
      design: changed(pair, unplugged, throughSwitch),
      findings: [
        {
          sentence: 'fw-s0-1 and fw-s0-2 watch each other through sw-s0',
          words: 'member link shared',
          severity: 'degrading',
          elements: ['devices/fw-s0', 'links/cb-x1', 'links/cb-x2'],
          fixes: ['Join them'],
        },
      ],
    },
  },
});
