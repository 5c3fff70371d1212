import type { MergePatch } from '#engine/model/merge-patch.ts';
import { zonesJoinedUnfiltered } from '#engine/rules/zones-joined-unfiltered.ts';
import { hubDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const zones = (s0: string | null, s1: string | null, s2: string | null, ...more: MergePatch[]) =>
  changed(hubDesign(2), { sites: { s0: { zone: s0 }, s1: { zone: s1 }, s2: { zone: s2 } } }, ...more);
const filterAt = (forwarder: string): MergePatch => ({
  forwarders: {
    [forwarder]: {
      kind: 'cross-connect',
      policy: { all: { rank: 'a', action: 'permit', direction: 'both', frames: 'any' } },
    },
  },
});

testRule(zonesJoinedUnfiltered, {
  accepted: {
    'sites without zones': hubDesign(2),
    'one zone': zones('Office', 'Office', null),
    'a filter between the zones': zones('Office', 'Office', 'Quay', filterAt('br-s2-a')),
    'a segment that must be filtered, which another check tells': zones('Office', 'Quay', 'Quay', {
      segments: { a: { mustBeFiltered: true } },
    }),
  },
  rejected: {
    'two zones joined by a bridge': {
      design: zones('Office', 'Office', 'Quay'),
      findings: [
        {
          sentence: 'Segment A joins zones Office and Quay unfiltered',
          words: 'zones joined',
          severity: 'degrading',
          elements: ['segments/a', 'tunnels/tn-s0-s2-a'],
          properties: ['segments/a: mustBeFiltered'],
          fixes: [],
        },
      ],
    },
    'two tunnels between the zones, once': {
      design: zones('Office', 'Quay', 'Quay'),
      findings: [
        {
          sentence: 'Segment A joins zones Office and Quay unfiltered',
          elements: ['segments/a', 'tunnels/tn-s0-s1-a', 'tunnels/tn-s0-s2-a'],
          fixes: [],
        },
      ],
    },
  },
});
