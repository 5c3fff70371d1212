import type { MergePatch } from '#engine/model/merge-patch.ts';
import { spanningTreesMerged } from '#engine/rules/spanning-trees-merged.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const on = { spanningTree: { mode: 'on' } } as const;
const treeAt = (...switches: readonly string[]): MergePatch => ({
  devices: Object.fromEntries(switches.map((id) => [id, { settings: on }])),
});
/** Gateways that pass BPDUs, and carry what is untagged, from one site's switch to the other's. */
const passing: MergePatch = {
  profiles: { pass: { name: 'Passes', reservedGroups: { '00': 'pass' } } },
  devices: { 'fw-s0': { profile: 'pass' }, 'fw-s1': { profile: 'pass' } },
  forwarders: {
    'br-s0-a': { circuits: { access: { vlans: 'all' } } },
    'br-s1-a': { circuits: { access: { vlans: 'all' } } },
  },
  tunnels: { 'tn-s0-s1-a': { a: { innerTags: 'keep' }, b: { innerTags: 'keep' } } },
};
const merged = changed(pairDesign(), treeAt('sw-s0', 'sw-s1'), passing);
const quayCable: MergePatch = {
  devices: Object.fromEntries(
    ['sw-s0', 'sw-s1'].map((id) => [
      id,
      { ports: { p9: { number: 9, role: 'lan', mode: 'trunk', nativeVlan: 1 } } },
    ]),
  ),
  links: {
    'cb-quay': {
      kind: 'cable',
      a: { device: 'sw-s0', port: 'p9' },
      b: { device: 'sw-s1', port: 'p9' },
    },
  },
};
const bridgesWithTree = (design = meshDesign(3)): MergePatch => ({
  forwarders: Object.fromEntries(Object.keys(design.forwarders).map((id) => [id, on])),
});

testRule(spanningTreesMerged, {
  accepted: {
    'sites without spanning tree': pairDesign(),
    'a tree at each site, which ends at gateways that drop BPDUs': changed(
      pairDesign(),
      treeAt('sw-s0', 'sw-s1'),
    ),
    'a tree at one site whose BPDUs cross the overlay to where there is none': changed(
      pairDesign(),
      treeAt('sw-s0'),
      passing,
    ),
    'a tree that the segment must carry': changed(merged, {
      segments: { a: { protocols: ['ipv4', 'spanning-tree'] } },
    }),
    'BPDUs filtered at one of the ports that face the overlay': changed(merged, {
      devices: { 'sw-s1': { ports: { p1: { bpdus: 'filter' } } } },
    }),
    'a loop through the overlay that a tree with a chosen root breaks': changed(merged, quayCable, {
      devices: { 'sw-s0': { settings: { spanningTree: { priority: 4096 } } } },
    }),
  },
  rejected: {
    'two trees that gateways pass into each other': {
      design: merged,
      findings: [
        {
          sentence:
            'Spanning tree is one over Head office and Gullhaven, with sw-s0 at Head office as its root',
          words: 'trees merged',
          severity: 'degrading',
          elements: ['devices/sw-s0', 'devices/sw-s1', 'tunnels/tn-s0-s1-a'],
          properties: ['devices/sw-s0/p1: bpdus', 'devices/sw-s1/p1: bpdus'],
          fixes: ['End the tree at the overlay'],
        },
      ],
    },
    'one tree over all bridges of a hub, which has no loop': {
      design: changed(hubDesign(2), bridgesWithTree(hubDesign(2))),
      findings: [
        {
          sentence:
            'Spanning tree is one over Head office, Gullhaven and Orrin Point, with fw-s0 at Head office as its root',
          severity: 'degrading',
          properties: [
            'forwarders/br-s0-a: spanningTree.mode',
            'forwarders/br-s1-a: spanningTree.mode',
            'forwarders/br-s2-a: spanningTree.mode',
          ],
          fixes: ['End the tree at the overlay'],
        },
      ],
    },
    'gateways’ bridges in the tree whose make passes BPDUs when they are not': {
      design: changed(pairDesign(), treeAt('sw-s0', 'sw-s1'), passing, bridgesWithTree(pairDesign())),
      findings: [
        {
          sentence:
            'Spanning tree is one over Head office and Gullhaven, with fw-s0 at Head office as its root',
          fixes: ['End the tree at the overlay'],
        },
      ],
    },
    'a loop through the overlay that a tree breaks at random': {
      design: changed(merged, quayCable),
      findings: [
        {
          sentence: 'Two bridges share the best priority, 32768, of the tree over Head office and Gullhaven',
          words: 'root by chance',
          severity: 'advisory',
          properties: [
            'devices/sw-s0: settings.spanningTree.priority',
            'devices/sw-s1: settings.spanningTree.priority',
          ],
          fixes: ['Make sw-s0 the root'],
        },
      ],
    },
    'a mesh whose bridges break its loops, none of them chosen as root': {
      design: changed(meshDesign(3), bridgesWithTree()),
      findings: [
        {
          sentence:
            'Three bridges share the best priority, 32768, of the tree over Head office, Gullhaven and Orrin Point',
          severity: 'advisory',
          properties: [
            'forwarders/br-s0-a: spanningTree.priority',
            'forwarders/br-s1-a: spanningTree.priority',
            'forwarders/br-s2-a: spanningTree.priority',
          ],
          fixes: ['Make fw-s0 the root'],
        },
      ],
    },
    'bridges that all have the best priority there is': {
      design: changed(meshDesign(3), bridgesWithTree(), {
        forwarders: Object.fromEntries(
          Object.keys(meshDesign(3).forwarders).map((id) => [id, { spanningTree: { priority: 0 } }]),
        ),
      }),
      findings: [
        {
          sentence:
            'Three bridges share the best priority, 0, of the tree over Head office, Gullhaven and Orrin Point',
          fixes: [],
        },
      ],
    },
  },
});
