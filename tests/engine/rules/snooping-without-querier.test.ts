import type { MergePatch } from '#engine/model/merge-patch.ts';
import { snoopingWithoutQuerier } from '#engine/rules/snooping-without-querier.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const group = changed(pairDesign(), { segments: { a: { protocols: ['ipv4', 'multicast'] } } });
const each = (s0: MergePatch, s1: MergePatch): MergePatch => ({
  forwarders: { 'br-s0-a': s0, 'br-s1-a': s1 },
});
const snoop: MergePatch = { multicast: 'snoop' };
const asks: MergePatch = { multicast: 'snoop', querier: true };
const silent: MergePatch = { multicast: 'snoop', querier: false };
const withAddress = (last: number): MergePatch => ({ gateway: { addresses: [`10.110.0.${last}/16`] } });

testRule(snoopingWithoutQuerier, {
  accepted: {
    'bridges that flood': group,
    'a segment that needs no groups': changed(pairDesign(), each(snoop, snoop)),
    'a querier at each site': changed(group, each(asks, asks)),
    'a querier at the one site that watches': changed(group, each(asks, { multicast: 'flood' })),
    'a multicast router at the site': changed(group, each({ ...snoop, ...withAddress(1) }, {}), {
      devices: { 'fw-s0': { settings: { multicastRouting: true } } },
    }),
  },
  rejected: {
    'bridges that watch, of which nobody says who asks': {
      design: changed(group, each(snoop, snoop)),
      findings: [
        {
          sentence: 'Nobody asks for group members on segment A',
          words: 'no querier',
          severity: 'advisory',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          fixes: ['Stop watching'],
        },
      ],
    },
    'bridges that watch and are said not to ask': {
      design: changed(group, each({ ...silent, ...withAddress(1) }, { ...silent, ...withAddress(2) })),
      findings: [
        {
          sentence: 'Nobody asks for group members on segment A',
          severity: 'degrading',
          fixes: ['Let each site ask', 'Stop watching'],
        },
      ],
    },
    'a querier at one site of two': {
      design: changed(group, each(asks, { ...snoop, ...withAddress(2) })),
      findings: [
        {
          sentence: 'Group members of segment A are asked from Head office alone',
          words: 'querier far away',
          severity: 'degrading',
          elements: ['forwarders/br-s1-a', 'segments/a'],
          fixes: ['Let it ask', 'Stop watching'],
        },
      ],
    },
  },
});
