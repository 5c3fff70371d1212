import type { MergePatch } from '#engine/model/merge-patch.ts';
import { aggregateEndsApart } from '#engine/rules/aggregate-ends-apart.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });
const uplinks: MergePatch = {
  devices: { 'sw-s0': { ports: { p1: { aggregation: 'lag1' }, p2: { aggregation: 'lag1' } } } },
};
const port = (number: number) => ({ number, role: 'lan', mode: 'trunk', aggregation: 'lag2' }) as const;
const toHall: MergePatch = {
  devices: {
    'sw-s0': { ports: { p7: port(7), p8: port(8) } },
    'sw-hall': { kind: 'switch', site: 's0', name: 'sw-hall', ports: { p1: port(1), p2: port(2) } },
  },
  links: {
    'cb-x1': { kind: 'cable', a: { device: 'sw-s0', port: 'p7' }, b: { device: 'sw-hall', port: 'p1' } },
    'cb-x2': { kind: 'cable', a: { device: 'sw-s0', port: 'p8' }, b: { device: 'sw-hall', port: 'p2' } },
  },
};
const crossConnected: MergePatch = {
  profiles: { clear: { name: 'clear', reservedGroups: { '02': 'pass' } } },
  devices: { 'fw-s0': { profile: 'clear' } },
  forwarders: { 'br-s0-a': { kind: 'cross-connect' } },
};

testRule(aggregateEndsApart, {
  accepted: {
    'two uplinks that are no aggregate': pair,
    'an aggregate between two switches': changed(pair, toHall),
    'an aggregate to two active members': changed(pair, uplinks, {
      devices: { 'fw-s0': { mode: 'active-active' } },
    }),
    'an aggregate through cross-connects that hand its protocol on': changed(pair, uplinks, crossConnected),
  },
  rejected: {
    'an aggregate to an active and a standby member': {
      design: changed(pair, uplinks),
      findings: [
        {
          sentence: 'lag1 of sw-s0 ends at fw-s0-1 and fw-s0-2',
          words: 'aggregate ends apart',
          severity: 'degrading',
          elements: ['devices/sw-s0/p1', 'devices/sw-s0/p2', 'links/cb-s0-up1', 'links/cb-s0-up2'],
          properties: ['devices/sw-s0/p1: aggregation', 'devices/sw-s0/p2: aggregation'],
          fixes: ['Dissolve lag1'],
        },
      ],
    },
  },
});
