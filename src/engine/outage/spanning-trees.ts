import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, entryOf, perNetwork } from '../network/network.ts';

/** Devices between which BPDUs may run, so that what fails at one of them may open a port at another. */
export interface SpanningTree {
  readonly devices: ReadonlySet<Id>;
  readonly elements: ReadonlySet<number>;
  /** True where BPDUs may run through a tunnel. */
  readonly crossesTunnels: boolean;
}

/** Devices that take part in a spanning tree, or that pass its BPDUs on. */
const hearsBpdus = (network: Network, id: Id): boolean => {
  const device = entryOf(network.design.devices, id);
  if (device.kind === 'host') return false;
  if (device.settings?.spanningTree?.mode === 'on') return true;
  const own = network.forwardersByDevice.get(id) ?? [];
  if (own.some((forwarder) => entryOf(network.design.forwarders, forwarder).spanningTree?.mode === 'on'))
    return true;
  return (
    device.profile !== undefined &&
    entryOf(network.design.profiles, device.profile).reservedGroups?.['00'] === 'pass'
  );
};

/** The spanning trees of a design: connected parts of what hears BPDUs. */
export const spanningTrees = perNetwork((network): readonly SpanningTree[] => {
  const hearing = network.deviceIds.filter((id) => hearsBpdus(network, id));
  const isHearing = new Set(hearing);
  const neighbours = new Map<Id, { readonly device: Id; readonly element: number }[]>();
  const join = (a: Id, b: Id, element: number): void => {
    if (!isHearing.has(a) || !isHearing.has(b)) return;
    for (const [from, to] of [
      [a, b],
      [b, a],
    ] as const) {
      const list = neighbours.get(from) ?? [];
      list.push({ device: to, element });
      neighbours.set(from, list);
    }
  };
  for (const bundle of network.bundles) join(bundle.a.device, bundle.b.device, bundle.index);
  network.tunnelIds.forEach((id, i) => {
    const tunnel = entryOf(network.design.tunnels, id);
    const [a, b] = ends.map((end) => deviceOfTunnelEnd(network, tunnel, end));
    join(a!, b!, network.firstTunnelElement + i);
  });
  const trees: SpanningTree[] = [];
  const seen = new Set<Id>();
  for (const start of hearing) {
    if (seen.has(start)) continue;
    seen.add(start);
    const devices = [start];
    const elements = new Set<number>();
    for (const device of devices)
      for (const next of neighbours.get(device) ?? []) {
        elements.add(next.element);
        if (seen.has(next.device)) continue;
        seen.add(next.device);
        devices.push(next.device);
      }
    const crossesTunnels = [...elements].some((element) => element >= network.firstTunnelElement);
    trees.push({ devices: new Set(devices), elements, crossesTunnels });
  }
  return trees;
});
