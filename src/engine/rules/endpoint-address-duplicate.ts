import type { Entry } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, diffPatch } from '../model/merge-patch.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { perObject } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { perFacts } from './facts.ts';
import { betterAddress, families, familyField, plainAddress, readdressPatch } from './endpoint-addresses.ts';
import { sharedSets } from './grouping.ts';
import { counted, listed, namedOrCounted, sentenceCase } from './wording.ts';

const plainAddresses = perObject((endpoint: Entry<'endpoints'>): readonly string[] =>
  families.flatMap((family) => {
    const address = endpoint[familyField(family)];
    return address === undefined ? [] : [plainAddress(address)];
  }),
);

/** Endpoints that have an address in common; the two members of one pair may share theirs. */
export const duplicateEndpoints = perFacts(
  ['endpoints', 'gateways'],
  ({ design }): readonly (readonly string[])[] => {
    const marked = Object.entries(design.endpoints).flatMap(([id, endpoint]) =>
      plainAddresses(endpoint).map((address) => [address, id] as const),
    );
    return sharedSets(marked).filter((ids) => {
      const [first, ...others] = ids.map((id) => design.endpoints[id]!);
      const isOnePair =
        design.devices[first!.device]!.kind === 'ha-pair' &&
        others.every((other) => other.device === first!.device) &&
        new Set(ids.map((id) => design.endpoints[id]!.member)).size === ids.length &&
        ids.every((id) => design.endpoints[id]!.member !== undefined);
      return !isOnePair;
    });
  },
);

const addressesOf = (design: Network['design'], id: string): readonly string[] =>
  plainAddresses(design.endpoints[id]!);

export const endpointAddressDuplicate = defineRule({
  id: 'endpoint-address-duplicate',
  title: 'Every endpoint has an address of its own',
  severity: 'blocking',
  looksAt: ['endpoints', 'gateways', 'tunnels', 'associations', 'landings', 'addressing'],
  why: 'A receiver learns hosts behind the outer source address. With one address at two places it sends frames to the wrong one, and the selectors of two associations claim the same packets.',
  seen: 'Hosts answer now from one site, now from another; a second association comes up and the first goes silent.',
  sources: [
    { document: 'RFC 7348', clause: 'section 4.1' },
    { document: 'RFC 3948', clause: 'section 5.1' },
  ],
  messages: {
    shared: {
      words: 'same address',
      sentence: (v: { readonly endpoints: string; readonly addresses: string; readonly isPair: boolean }) =>
        `${v.endpoints} ${v.isPair ? 'both' : 'all'} have ${v.addresses}`,
    },
  },
  check: (network) =>
    duplicateEndpoints(network).map((ids) => {
      const { design } = network;
      const all = ids.flatMap((id) => addressesOf(design, id));
      const shared = [...new Set(all.filter((address, i) => all.indexOf(address) !== i))].sort();
      return {
        message: 'shared',
        values: {
          endpoints:
            ids.length > 3
              ? sentenceCase(counted(ids.length, 'endpoint', 'endpoints'))
              : listed(
                  ids.map(
                    (id) =>
                      `${design.endpoints[id]!.name} on ${design.devices[design.endpoints[id]!.device]!.name}`,
                  ),
                ),
          addresses: listed(shared),
          isPair: ids.length === 2,
        },
        elements: ids.map((id) => ({ collection: 'endpoints' as const, id })),
        properties: ids.flatMap((id) =>
          families
            .filter((family) => {
              const address = design.endpoints[id]![familyField(family)];
              return address !== undefined && shared.includes(plainAddress(address));
            })
            .map((family) => ({
              ref: { collection: 'endpoints' as const, id },
              path: [familyField(family)],
            })),
        ),
        basis: shared,
      };
    }),
  fixes: (fault, network) => {
    const { design } = network;
    const shared = fault.basis as readonly string[];
    const ids = fault.elements.map(({ id }) => id);
    if (ids.length === 2) {
      const tunnelCount = (id: string): number => (network.tunnelsByEndpoint.get(id) ?? []).length;
      // The endpoint with fewer tunnels first: less has to be changed with it.
      const moves = [...ids]
        .sort((x, y) => tunnelCount(x) - tunnelCount(y))
        .map((id) => ({ id, ...moveOff(network, [id], shared) }));
      // Where selectors still name the right address of one, moving the other would build on the slip.
      const named = moves.filter(({ isNamed }) => isNamed);
      return (named.length > 0 ? named : moves).map(({ id, patch, addresses, isNamed }) => ({
        id: `move-${id}`,
        label: `Set ${design.endpoints[id]!.name} to ${addresses[0] ?? ''}`,
        sentence: `Gives ${design.endpoints[id]!.name} ${listed(addresses)}, ${isNamed ? 'which its selectors name' : 'the next free address, in the selectors too'}.`,
        patch,
      }));
    }
    const [, ...others] = ids;
    const { patch, addresses } = moveOff(network, others, shared);
    return [
      {
        id: 'move-others',
        label: `Readdress ${counted(others.length, 'endpoint', 'endpoints')}`,
        sentence: `Leaves the address to ${design.endpoints[ids[0]!]!.name} and gives the others ${namedOrCounted(addresses, 'free addresses')}.`,
        patch,
      },
    ];
  },
});

interface Move {
  readonly patch: MergePatch;
  readonly addresses: readonly string[];
  /** True when all new addresses stood in selectors already. */
  readonly isNamed: boolean;
}

/** Gives endpoints other addresses than the shared ones: those that their selectors name, or the next free ones. */
const moveOff = (network: Network, endpoints: readonly string[], shared: readonly string[]): Move => {
  let current = network;
  const addresses: string[] = [];
  let isNamed = true;
  for (const id of endpoints)
    for (const family of families) {
      const address = current.design.endpoints[id]![familyField(family)];
      if (address === undefined || !shared.includes(plainAddress(address))) continue;
      const better = betterAddress(current, id, family, address);
      if (better === undefined) continue;
      isNamed &&= better.isNamed;
      addresses.push(better.address.split('/')[0]!);
      current = indexNetwork(applyPatch(current.design, readdressPatch(current, id, family, better.address)));
    }
  return { patch: diffPatch(network.design, current.design), addresses, isNamed };
};
