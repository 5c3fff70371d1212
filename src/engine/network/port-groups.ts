import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Bundle, Cable, Device, End, PortGroup } from './network.ts';
import { ends, otherEnd, plugKey } from './network.ts';

type Draft = {
  -readonly [K in keyof PortGroup]: PortGroup[K] extends readonly (infer E)[] ? E[] : PortGroup[K];
};

/** What joins devices at layer 2: ports as logical ports, cables as crossings. Member links carry no segment frames and are left out. */
export interface Cabling {
  readonly groups: readonly PortGroup[];
  readonly groupByPlug: ReadonlyMap<string, PortGroup>;
  readonly bundles: readonly Bundle[];
  readonly bundleByCable: ReadonlyMap<Id, Bundle>;
}

const groupsOf = (devices: readonly (readonly [Id, Device])[]): Cabling['groups'] & Draft[] => {
  const groups: Draft[] = [];
  for (const [id, device] of devices) {
    const ports = Object.entries(device.ports)
      .filter(([, port]) => port.role !== 'member-link')
      .sort(([idA, a], [idB, b]) => a.number - b.number || (idA < idB ? -1 : 1));
    const members: readonly Member[] = device.kind === 'ha-pair' ? [1, 2] : [1];
    for (const member of members) {
      const aggregates = new Map<string, Draft>();
      for (const [portId, port] of ports) {
        const known = port.aggregation === undefined ? undefined : aggregates.get(port.aggregation);
        if (known !== undefined) {
          known.ports.push(portId);
          continue;
        }
        const group: Draft = {
          index: groups.length,
          device: id,
          member,
          port: portId,
          ports: [portId],
          bundles: [],
          ...(port.aggregation === undefined ? {} : { aggregation: port.aggregation }),
        };
        groups.push(group);
        if (port.aggregation !== undefined) aggregates.set(port.aggregation, group);
      }
    }
  }
  return groups;
};

/** Groups ports by aggregation and cables by the two groups they join. Devices and cables come in order of id. */
export const cablingOf = (
  devices: readonly (readonly [Id, Device])[],
  cables: readonly (readonly [Id, Cable])[],
): Cabling => {
  const groups = groupsOf(devices);
  const groupByPlug = new Map<string, Draft>();
  for (const group of groups)
    for (const port of group.ports) groupByPlug.set(plugKey(group.device, port, group.member), group);
  const byId = new Map(devices);
  // Only a pair has members: on anything else a plug that names one is in the device all the same.
  const groupOf = (plug: Cable['a']): Draft | undefined =>
    groupByPlug.get(
      plugKey(plug.device, plug.port, byId.get(plug.device)?.kind === 'ha-pair' ? plug.member : undefined),
    );
  const isShut = (plug: Cable['a']): boolean => byId.get(plug.device)?.ports[plug.port]?.shut === true;

  const bundles: (Bundle & { readonly cables: Id[]; readonly alive: Id[] })[] = [];
  const bundleByCable = new Map<Id, Bundle>();
  const byGroups = new Map<string, (typeof bundles)[number]>();
  for (const [id, cable] of cables) {
    const [a, b] = [groupOf(cable.a), groupOf(cable.b)];
    if (a === undefined || b === undefined) continue;
    // Two cables between the same single ports stay two: only an aggregate makes one crossing of several.
    const aggregated = a.aggregation !== undefined || b.aggregation !== undefined;
    const key = aggregated
      ? `${Math.min(a.index, b.index)} ${Math.max(a.index, b.index)}`
      : `${a.index} ${b.index} ${id}`;
    let bundle = byGroups.get(key);
    if (bundle === undefined) {
      bundle = { index: bundles.length, cables: [], alive: [], a, b };
      byGroups.set(key, bundle);
      bundles.push(bundle);
      const at = { a, b };
      for (const end of ends) at[end].bundles.push({ bundle: bundle.index, end });
    }
    bundle.cables.push(id);
    if (!isShut(cable.a) && !isShut(cable.b)) bundle.alive.push(id);
    bundleByCable.set(id, bundle);
  }
  return { groups, groupByPlug, bundles, bundleByCable };
};

/** The end of a bundle opposite to the one given. */
export const farGroup = (bundle: Bundle, end: End): PortGroup => bundle[otherEnd(end)];
