import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, diffPatch } from '../model/merge-patch.ts';
import { rankAtEnd } from '../model/rank.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { associationEndOf, selectorsCover } from '../network/selectors-cover.ts';

const hostPrefix = (address: string): string => `${address}/${address.includes(':') ? 128 : 32}`;

const freeId = (taken: object, stem: string): string => {
  for (let n = 1; ; n += 1) {
    const id = n === 1 ? stem : `${stem}-${n}`;
    if (!Object.hasOwn(taken, id)) return id;
  }
};

/** The patch that adds, at every end that lacks it, a selector for exactly the endpoints of the given tunnels. */
export const coverPatch = (network: Network, tunnels: readonly string[]): MergePatch => {
  let current = network;
  for (const id of tunnels) {
    const cover = selectorsCover(current, id);
    if (cover.state !== 'misses') continue;
    for (const { end, local, remote } of cover.gaps) {
      const tunnel = current.design.tunnels[id]!;
      const association = current.design.associations[tunnel.association!]!;
      const side = associationEndOf(current, tunnel, association, end)!;
      const selectors = association[side].selectors ?? {};
      const selector = {
        rank: rankAtEnd(selectors),
        local: hostPrefix(local),
        remote: hostPrefix(remote),
      };
      const patch: MergePatch = {
        associations: {
          [tunnel.association!]: { [side]: { selectors: { [freeId(selectors, 'endpoints')]: selector } } },
        },
      };
      current = indexNetwork(applyPatch(current.design, patch));
    }
  }
  return diffPatch(network.design, current.design);
};
