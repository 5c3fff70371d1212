import { stormAnyToAnyMesh } from '#engine/rules/storm-any-to-any-mesh.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const mesh = meshDesign(3);
const without = (sites: readonly [string, string], design = mesh) => {
  const tunnel = `tn-${sites[0]}-${sites[1]}-a`;
  const gone = { circuits: { [tunnel]: null } };
  return changed(design, {
    tunnels: { [tunnel]: null },
    forwarders: { [`br-${sites[0]}-a`]: gone, [`br-${sites[1]}-a`]: gone },
  });
};
const isolatedAt = (site: string, tunnels: readonly string[]) => ({
  forwarders: {
    [`br-${site}-a`]: { circuits: Object.fromEntries(tunnels.map((id) => [id, { isolation: 'own' }])) },
  },
});

testRule(stormAnyToAnyMesh, {
  accepted: {
    'two sites': pairDesign({ segments: ['a', 'b'] }),
    'a hub that relays between its spokes': hubDesign(4),
    'a chain': chainDesign(4),
    'a full mesh in one isolation group': meshDesign(4, { join: { isolation: 'mesh' } }),
    'a mesh with one tunnel less': without(['s1', 's2']),
    'a mesh of which one site keeps its tunnels apart': changed(
      mesh,
      isolatedAt('s0', ['tn-s0-s1-a', 'tn-s0-s2-a']),
    ),
    'a mesh of which one tunnel can’t come up': changed(mesh, {
      tunnels: { 'tn-s1-s2-a': { b: { vni: 4711 } } },
    }),
    'a mesh with spanning tree at every bridge': changed(mesh, {
      forwarders: Object.fromEntries(
        Object.keys(mesh.forwarders).map((id) => [id, { spanningTree: { mode: 'on' } }]),
      ),
    }),
  },
  rejected: {
    'three sites joined any to any': {
      design: mesh,
      findings: [
        {
          sentence: 'Three tunnels of segment A close a loop that nothing blocks',
          words: 'broadcast storm',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s1-a', 'tunnels/tn-s0-s2-a', 'tunnels/tn-s1-s2-a'],
          properties: [
            'forwarders/br-s0-a: circuits.tn-s0-s1-a.isolation',
            'forwarders/br-s1-a: circuits.tn-s0-s1-a.isolation',
            'forwarders/br-s0-a: circuits.tn-s0-s2-a.isolation',
            'forwarders/br-s2-a: circuits.tn-s0-s2-a.isolation',
            'forwarders/br-s1-a: circuits.tn-s1-s2-a.isolation',
            'forwarders/br-s2-a: circuits.tn-s1-s2-a.isolation',
          ],
          mark: {
            kind: 'loop',
            steps: [
              { collection: 'tunnels', id: 'tn-s0-s1-a', direction: 'a-to-b' },
              { collection: 'tunnels', id: 'tn-s1-s2-a', direction: 'a-to-b' },
              { collection: 'tunnels', id: 'tn-s0-s2-a', direction: 'b-to-a' },
            ],
          },
          fixes: ['Isolate the tunnels', 'Remove tn-s1-s2-a'],
        },
      ],
    },
    'a mesh of four sites in each of two segments': {
      design: meshDesign(4, { segments: ['a', 'b'] }),
      findings: ['A', 'B'].map((letter) => ({
        sentence: `Six tunnels of segment ${letter} close a loop that nothing blocks`,
        fixes: ['Isolate the tunnels', 'Remove three tunnels'],
      })),
    },
    'a ring of four sites, which isolation would part': {
      design: without(['s1', 's3'], without(['s0', 's2'], meshDesign(4))),
      findings: [
        {
          sentence: 'Four tunnels of segment A close a loop that nothing blocks',
          fixes: ['Remove tn-s2-s3-a'],
        },
      ],
    },
    'a mesh of eight sites': {
      design: meshDesign(8),
      findings: [
        {
          sentence: '28 tunnels of segment A close a loop that nothing blocks',
          fixes: ['Isolate the tunnels', 'Remove 21 tunnels'],
        },
      ],
    },
  },
});
