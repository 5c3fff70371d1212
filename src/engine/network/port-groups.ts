import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Bundle, Cable, Device, End, Network, PortGroup } from './network.ts';
import { ends, otherEnd, perObject } from './network.ts';

type Draft = Omit<PortGroup, 'bundles'> & { readonly bundles: PortGroup['bundles'][number][] };

/** What joins devices at layer 2: ports as logical ports, cables as crossings. Member links carry no segment frames and are left out. */
export interface Cabling {
  readonly portGroupsByDevice: ReadonlyMap<Id, readonly PortGroup[]>;
  readonly bundles: readonly Bundle[];
  readonly bundleByCable: ReadonlyMap<Id, Bundle>;
}

interface PortsAsOne {
  readonly ports: readonly Id[];
  readonly aggregation?: string;
}
interface LogicalPorts {
  /** By the number of their first port, which stands for all. */
  readonly all: readonly PortsAsOne[];
  /** By port: its place in `all`. */
  readonly ordinals: ReadonlyMap<Id, number>;
}

const logicalPorts = perObject(({ ports }: Device): LogicalPorts => {
  const inOrder = Object.entries(ports)
    .filter(([, port]) => port.role !== 'member-link')
    .sort(([idA, a], [idB, b]) => a.number - b.number || (idA < idB ? -1 : 1));
  const all: { readonly ports: Id[]; readonly aggregation?: string }[] = [];
  const ordinals = new Map<Id, number>();
  const aggregates = new Map<string, number>();
  for (const [id, { aggregation }] of inOrder) {
    const known = aggregation === undefined ? undefined : aggregates.get(aggregation);
    ordinals.set(id, known ?? all.length);
    if (known !== undefined) {
      all[known]!.ports.push(id);
      continue;
    }
    if (aggregation !== undefined) aggregates.set(aggregation, all.length);
    all.push({ ports: [id], ...(aggregation === undefined ? {} : { aggregation }) });
  }
  return { all, ordinals };
});

const membersOf = (device: Device): readonly Member[] => (device.kind === 'ha-pair' ? [1, 2] : [1]);

const groupsOf = (id: Id, device: Device): Draft[] => {
  const groups: Draft[] = [];
  for (const member of membersOf(device))
    for (const { ports, aggregation } of logicalPorts(device).all)
      groups.push({
        index: groups.length,
        device: id,
        member,
        port: ports[0]!,
        ports,
        bundles: [],
        ...(aggregation === undefined ? {} : { aggregation }),
      });
  return groups;
};

/** Where the group of a plug stands in the list of its device; undefined where the port carries no segment frames. */
const groupIndex = (device: Device, port: Id, member: Member | undefined): number | undefined => {
  const { all, ordinals } = logicalPorts(device);
  const ordinal = ordinals.get(port);
  return ordinal === undefined ? undefined : ((member ?? 1) - 1) * all.length + ordinal;
};

/** The logical port of a plug; undefined where the port, or the member, carries no segment frames. */
export const portGroupAt = (
  { design, portGroupsByDevice }: Network,
  device: Id,
  port: Id,
  member: Member | undefined,
): PortGroup | undefined => {
  const entry = design.devices[device];
  const index = entry === undefined ? undefined : groupIndex(entry, port, member);
  return index === undefined ? undefined : portGroupsByDevice.get(device)?.[index];
};

/** Groups ports by aggregation and cables by the two groups they join. Devices and cables come in order of id. */
export const cablingOf = (
  devices: readonly (readonly [Id, Device])[],
  cables: readonly (readonly [Id, Cable])[],
): Cabling => {
  const byDevice = new Map(devices.map(([id, device]) => [id, { device, groups: groupsOf(id, device) }]));
  type Plugged = { readonly group: Draft; readonly isShut: boolean };
  const pluggedIn = ({ device: id, port, member }: Cable['a']): Plugged | undefined => {
    const { device, groups } = byDevice.get(id)!;
    // Only a pair has members: on anything else a plug that names one is in the device all the same.
    const index = groupIndex(device, port, device.kind === 'ha-pair' ? member : undefined);
    const group = index === undefined ? undefined : groups[index];
    return group === undefined ? undefined : { group, isShut: device.ports[port]?.shut === true };
  };

  const bundles: (Bundle & { readonly cables: Id[]; readonly alive: Id[] })[] = [];
  const bundleByCable = new Map<Id, Bundle>();
  for (const [id, cable] of cables) {
    const [plugA, plugB] = [pluggedIn(cable.a), pluggedIn(cable.b)];
    if (plugA === undefined || plugB === undefined) continue;
    const [a, b] = [plugA.group, plugB.group];
    // Two cables between the same single ports stay two: only an aggregate makes one crossing of several.
    const isAggregated = a.aggregation !== undefined || b.aggregation !== undefined;
    const joinsTheSame = ({ bundle }: Draft['bundles'][number]): boolean => {
      const other = bundles[bundle]!;
      return (other.a === a && other.b === b) || (other.a === b && other.b === a);
    };
    const known = isAggregated ? a.bundles.find(joinsTheSame) : undefined;
    let bundle = known === undefined ? undefined : bundles[known.bundle];
    if (bundle === undefined) {
      bundle = { index: bundles.length, cables: [], alive: [], a, b };
      bundles.push(bundle);
      const at = { a, b };
      for (const end of ends) at[end].bundles.push({ bundle: bundle.index, end });
    }
    bundle.cables.push(id);
    if (!plugA.isShut && !plugB.isShut) bundle.alive.push(id);
    bundleByCable.set(id, bundle);
  }
  const portGroupsByDevice = new Map<Id, readonly PortGroup[]>();
  for (const [id, { groups }] of byDevice) if (groups.length > 0) portGroupsByDevice.set(id, groups);
  return { portGroupsByDevice, bundles, bundleByCable };
};

/** The port groups where devices that have no cables came, went or got other ports. */
export const portGroupsAfter = (
  before: Cabling['portGroupsByDevice'],
  changes: readonly { readonly id: Id; readonly now?: Device }[],
): Cabling['portGroupsByDevice'] => {
  const after = new Map(before);
  for (const { id, now } of changes) {
    const groups = now === undefined ? [] : groupsOf(id, now);
    if (groups.length > 0) after.set(id, groups);
    else after.delete(id);
  }
  return after;
};

/** The end of a bundle opposite to the one given. */
export const farGroup = (bundle: Bundle, end: End): PortGroup => bundle[otherEnd(end)];
