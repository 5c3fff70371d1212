import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Bundle, Cable, Device, End, PortGroup } from './network.ts';
import { ends, otherEnd, perObject, plugKey } from './network.ts';

type Draft = Omit<PortGroup, 'bundles'> & { readonly bundles: PortGroup['bundles'][number][] };

/** What joins devices at layer 2: ports as logical ports, cables as crossings. Member links carry no segment frames and are left out. */
export interface Cabling {
  readonly groups: readonly PortGroup[];
  readonly groupByPlug: ReadonlyMap<string, PortGroup>;
  readonly bundles: readonly Bundle[];
  readonly bundleByCable: ReadonlyMap<Id, Bundle>;
}

interface PortsAsOne {
  readonly ports: readonly Id[];
  readonly aggregation?: string;
}

/** The logical ports of a device: by the number of their first port, which stands for all. */
const logicalPorts = perObject(({ ports }: Device): readonly PortsAsOne[] => {
  const inOrder = Object.entries(ports)
    .filter(([, port]) => port.role !== 'member-link')
    .sort(([idA, a], [idB, b]) => a.number - b.number || (idA < idB ? -1 : 1));
  const logical: { readonly ports: Id[]; readonly aggregation?: string }[] = [];
  const aggregates = new Map<string, Id[]>();
  for (const [id, { aggregation }] of inOrder) {
    const known = aggregation === undefined ? undefined : aggregates.get(aggregation);
    if (known !== undefined) {
      known.push(id);
      continue;
    }
    const own = [id];
    logical.push({ ports: own, ...(aggregation === undefined ? {} : { aggregation }) });
    if (aggregation !== undefined) aggregates.set(aggregation, own);
  }
  return logical;
});

const groupsOf = (devices: readonly (readonly [Id, Device])[]): Cabling['groups'] & Draft[] => {
  const groups: Draft[] = [];
  for (const [id, device] of devices) {
    const members: readonly Member[] = device.kind === 'ha-pair' ? [1, 2] : [1];
    for (const member of members)
      for (const { ports, aggregation } of logicalPorts(device))
        groups.push({
          index: groups.length,
          device: id,
          member,
          port: ports[0]!,
          ports,
          bundles: [],
          ...(aggregation === undefined ? {} : { aggregation }),
        });
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
