import type { MergePatch } from '#engine/model/merge-patch.ts';
import type { Protocol } from '#engine/model/intent.ts';
import { reservedGroupNotPassed } from '#engine/rules/reserved-group-not-passed.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const needing = (...protocols: readonly Protocol[]) =>
  changed(pairDesign(), { segments: { a: { protocols: ['ipv4', ...protocols] } } });
const kind = (...sites: readonly string[]): MergePatch => ({
  forwarders: Object.fromEntries(sites.map((site) => [`br-${site}-a`, { kind: 'cross-connect' }])),
});
const profile = (treatment: 'pass' | 'drop', ...sites: readonly string[]): MergePatch => ({
  profiles: { own: { name: 'own', reservedGroups: { '00': treatment, '02': treatment } } },
  devices: Object.fromEntries(sites.map((site) => [`fw-${site}`, { profile: 'own' }])),
});

testRule(reservedGroupNotPassed, {
  accepted: {
    'a segment that needs none of them': pairDesign(),
    'LACP through cross-connects that pass it': changed(
      needing('lacp'),
      kind('s0', 's1'),
      profile('pass', 's0', 's1'),
    ),
    'LACP through cross-connects of which that is not known': changed(needing('lacp'), kind('s0', 's1')),
    'spanning tree in which the bridges take part': changed(needing('spanning-tree'), {
      forwarders: {
        'br-s0-a': { spanningTree: { mode: 'on' } },
        'br-s1-a': { spanningTree: { mode: 'on' } },
      },
    }),
  },
  rejected: {
    'LACP and 802.1X across bridges': {
      design: needing('lacp', 'eapol'),
      findings: [
        {
          sentence: 'LACP and 802.1X of segment A end at two forwarders',
          words: 'reserved group stopped',
          severity: 'blocking',
          elements: ['segments/a', 'forwarders/br-s0-a', 'forwarders/br-s1-a'],
          properties: ['segments/a: protocols'],
          fixes: ['Don’t promise LACP and 802.1X'],
        },
      ],
    },
    'LACP that one of two cross-connects drops': {
      design: changed(needing('lacp'), kind('s0', 's1'), profile('drop', 's1')),
      findings: [
        {
          sentence: 'LACP of segment A ends at br-110 at Gullhaven',
          elements: ['segments/a', 'forwarders/br-s1-a'],
          fixes: ['Don’t promise LACP'],
        },
      ],
    },
    'spanning tree across bridges that stay out of it': {
      design: needing('spanning-tree'),
      findings: [
        {
          sentence: 'Spanning tree of segment A ends at two forwarders',
          severity: 'blocking',
          fixes: ['Don’t promise Spanning tree'],
        },
      ],
    },
    'LLDP across bridges, as a milder fault': {
      design: needing('lldp'),
      findings: [
        {
          sentence: 'LLDP of segment A ends at two forwarders',
          severity: 'advisory',
          fixes: ['Don’t promise LLDP'],
        },
      ],
    },
  },
});
