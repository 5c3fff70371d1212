import fc from 'fast-check';
import { expect, it } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { applyPatch, type MergePatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { broadcastDeliveredTwice } from '#engine/rules/broadcast-delivered-twice.ts';
import { portVlanClaimedTwice } from '#engine/rules/port-vlan-claimed-twice.ts';
import { bruteForceFlood } from '../../support/brute-force-flood.ts';
import { hubDesign, meshDesign, pairDesign, sitesOnCoast } from '../../support/designs.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

/** The circuits into tunnels at these sites' gateways put into a group. */
const isolatedAt = (design = meshDesign(3), ...sites: readonly string[]): MergePatch => ({
  forwarders: Object.fromEntries(
    sites.map((site) => [
      `br-${site}-a`,
      {
        circuits: Object.fromEntries(
          Object.entries(design.forwarders[`br-${site}-a`]!.circuits)
            .filter(([, { kind }]) => kind === 'tunnel')
            .map(([id]) => [id, { isolation: 'mesh' }]),
        ),
      },
    ]),
  ),
});

/** Two tunnels side by side, which neither end passes from one to the other. */
const parallel = (() => {
  const twice = sitesOnCoast(2)
    .join('s0', 's1', { transport: 'coast', segments: ['a'], vni: () => 10_000, isolation: 'two' })
    .build();
  const [first] = Object.keys(twice.tunnels);
  const { a, b, ...tunnel } = twice.tunnels[first!]!;
  const circuit = { kind: 'tunnel', rank: 'z', tunnel: 'tn-second', isolation: 'two' } as const;
  return changed(
    applyPatch(twice, {
      tunnels: {
        'tn-second': {
          ...tunnel,
          name: 'tn-second',
          a: { ...a, vni: 10_001 },
          b: { ...b, vni: 10_001 },
        },
      },
    } as unknown as MergePatch),
    {
      forwarders: {
        'br-s0-a': { circuits: { second: circuit } },
        'br-s1-a': { circuits: { second: circuit } },
      },
    },
  );
})();

testRule(broadcastDeliveredTwice, {
  accepted: {
    'two sites': pairDesign(),
    'a hub': hubDesign(3),
    'a mesh whose tunnels are kept apart at every site': meshDesign(4, { join: { isolation: 'mesh' } }),
    'a storm, which is told of by itself': meshDesign(3),
  },
  rejected: {
    'a mesh whose tunnels are kept apart at one site alone': {
      design: changed(meshDesign(3), isolatedAt(meshDesign(3), 's0')),
      findings: [
        {
          sentence: 'A broadcast in segment A from h-s0-a reaches h-s1-a in two copies',
          words: 'delivered twice',
          severity: 'degrading',
          elements: ['tunnels/tn-s0-s1-a', 'tunnels/tn-s0-s2-a', 'tunnels/tn-s1-s2-a', 'segments/a'],
          fixes: ['Isolate the tunnels everywhere', 'Remove tn-s0-s1-a', 'Remove tn-s0-s2-a'],
        },
      ],
    },
    'a pair of which both members send into the tunnel': {
      design: changed(pairDesign({ hub: 'ha-pair' }), { devices: { 'fw-s0': { mode: 'active-active' } } }),
      findings: [
        {
          sentence: 'A broadcast in segment A from h-s0-a reaches h-s1-a in two copies',
          elements: ['links/cb-s0-up1', 'links/cb-s0-up2', 'segments/a'],
          fixes: ['Let one member stand by'],
        },
      ],
    },
    'two tunnels side by side that are kept apart at both ends': {
      design: parallel,
      findings: [
        {
          sentence: 'A broadcast in segment A from h-s0-a reaches h-s1-a in two copies',
          fixes: ['Remove tn-s0-s1-a', 'Remove tn-second'],
        },
      ],
    },
  },
});

it('speaks exactly where a host, walked step by step, takes two copies of what another sent', () => {
  let found = 0;
  fc.assert(
    fc.property(generatedDesign, (design) => {
      const network = indexNetwork(design);
      // Two circuits that claim one VLAN of a port take a frame in twice: a fault of its own, told by its own check.
      if (findStorms(floodGraph(network)).length > 0 || portVlanClaimedTwice.check(network, {}).length > 0)
        return;
      const twin = bruteForceFlood(design);
      const hosts = Object.keys(design.devices).filter((id) => design.devices[id]!.kind === 'host');
      const isDoubled = hosts.some((sender) =>
        [...twin.fromHost(sender).copies].some(([host, copies]) => host !== sender && copies > 1),
      );
      const says = broadcastDeliveredTwice.check(network, {}).length > 0;
      if (isDoubled) found += 1;
      expect(says).toBe(isDoubled);
    }),
    { numRuns: 150, seed: 20 },
  );
  expect(found).toBeGreaterThan(5);
}, 60_000);
