import type { BpduListener, TreePort } from '../flood/spanning-tree.ts';
import { bpduReach } from '../flood/spanning-tree.ts';
import type { Id } from '../model/scalars.ts';
import type { Network, Port } from '../network/network.ts';
import { entryOf } from '../network/network.ts';

/** The port of a device behind a port of a tree; undefined for a bridge's circuit into a tunnel. */
export const devicePortOf = (
  network: Network,
  { bridge, ordinal }: TreePort,
): { readonly device: Id; readonly port: Id; readonly facts: Port } | undefined => {
  const { place } = bpduReach(network)[bridge]!;
  const at =
    place.kind === 'switch'
      ? place.ports[ordinal]
      : place.kind === 'forwarder' && place.circuits[ordinal]?.kind === 'port'
        ? place.circuits[ordinal]
        : undefined;
  if (at === undefined) return undefined;
  const { device, port } = at.group;
  return { device, port, facts: entryOf(entryOf(network.design.devices, device).ports, port) };
};

/** One port of a tree that hears another. */
export interface Hears {
  readonly at: TreePort;
  readonly from: TreePort;
  readonly tunnels: readonly Id[];
  readonly hearsBetter: boolean;
}

/** Every port of a tree that hears one of another switch or bridge. */
export const hearings = (listeners: readonly BpduListener[]): readonly Hears[] =>
  listeners.flatMap(({ ports }, bridge) =>
    ports.flatMap(({ ordinal, hearsBetter, hears }) =>
      hears
        .filter(({ from }) => from.bridge !== bridge)
        .map(({ from, tunnels }) => ({ at: { bridge, ordinal }, from, tunnels, hearsBetter })),
    ),
  );
