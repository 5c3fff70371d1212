import type { Id } from '../model/scalars.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { rankAtEnd } from '../model/rank.ts';
import { removalPatch } from '../flood/removal-patch.ts';
import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { unusedId } from './unused-id.ts';

/** The bridges that would hold the tunnel: at each end the only forwarder of its device. */
const onlyBridges = (network: Network, tunnel: Id): readonly Id[] | undefined => {
  const entry = entryOf(network.design.tunnels, tunnel);
  const bridges = ends.map((end) => {
    const all = network.forwardersByDevice.get(deviceOfTunnelEnd(network, entry, end)) ?? [];
    const [only] = all;
    return all.length === 1 && entryOf(network.design.forwarders, only!).kind === 'bridge'
      ? only!
      : undefined;
  });
  return bridges.every((id): id is Id => id !== undefined) && bridges[0] !== bridges[1] ? bridges : undefined;
};

export const tunnelWithoutCircuit = defineRule({
  id: 'tunnel-without-circuit',
  title: 'Every tunnel is in a forwarder',
  severity: 'advisory',
  looksAt: ['tunnels', 'forwarders', 'endpoints', 'notes'],
  why: 'No forwarder hands it frames, so that it carries nothing: it is left over, or somebody forgot to put it to use.',
  seen: 'The tunnel is up and its counters stand still.',
  sources: ['common practice, no source'],
  messages: {
    idle: {
      words: 'carries nothing',
      sentence: (v: { readonly tunnel: string }) => `No forwarder holds ${v.tunnel} at either end`,
    },
  },
  check: ({ design, tunnelIds, circuitsByTunnel }) =>
    tunnelIds.flatMap((id) =>
      (circuitsByTunnel.get(id) ?? []).length > 0
        ? []
        : [
            {
              message: 'idle',
              values: { tunnel: entryOf(design.tunnels, id).name },
              elements: [{ collection: 'tunnels' as const, id }],
            },
          ],
    ),
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const bridges = onlyBridges(network, id);
    const held = (forwarder: Id): MergePatch => {
      const { circuits } = entryOf(network.design.forwarders, forwarder);
      return {
        circuits: { [unusedId(circuits, id)]: { kind: 'tunnel', rank: rankAtEnd(circuits), tunnel: id } },
      };
    };
    const claim: readonly Fix[] =
      bridges === undefined
        ? []
        : [
            {
              id: 'claim',
              label: 'Put it to use',
              sentence: `Lets the only bridge at each end hold ${fault.values.tunnel}.`,
              patch: { forwarders: Object.fromEntries(bridges.map((bridge) => [bridge, held(bridge)])) },
            },
          ];
    return [
      ...claim,
      {
        id: 'remove',
        label: `Remove ${fault.values.tunnel}`,
        sentence: `Removes ${fault.values.tunnel}, which nothing uses.`,
        patch: removalPatch(network, { tunnels: [id] }),
      },
    ];
  },
});
