import type { Json, MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';

type Draft = { [key: string]: Json | Draft };

/** The patch that takes tunnels and cables out of a design, with the circuits and pinned notes that name them. */
export const removalPatch = (
  network: Network,
  { tunnels = [], cables = [] }: { readonly tunnels?: readonly Id[]; readonly cables?: readonly Id[] },
): MergePatch => {
  const patch: Draft = {};
  const put = (path: readonly string[]): void => {
    let at: Draft = patch;
    for (const key of path.slice(0, -1)) at = (at[key] ??= {}) as Draft;
    at[path.at(-1)!] = null;
  };
  for (const id of tunnels) {
    put(['tunnels', id]);
    for (const circuit of network.circuitsByTunnel.get(id) ?? [])
      put(['forwarders', circuit.forwarder, 'circuits', circuit.id]);
  }
  for (const id of cables) put(['links', id]);
  for (const [id, { target }] of Object.entries(network.design.notes))
    if (
      (target?.collection === 'tunnels' && tunnels.includes(target.id)) ||
      (target?.collection === 'links' && cables.includes(target.id))
    )
      put(['notes', id, 'target']);
  return patch as MergePatch;
};
