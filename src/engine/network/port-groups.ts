import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Bundle, Cable, DesignFacts, Device, End, Network, PortGroup } from './network.ts';
import { otherEnd, perObject } from './network.ts';

type Draft = Omit<PortGroup, 'bundles'> & { readonly bundles: PortGroup['bundles'][number][] };

/** What joins devices at layer 2: ports as logical ports, cables as crossings. Member links carry no segment frames and are left out. */
export interface Cabling {
  readonly portGroupsByDevice: ReadonlyMap<Id, readonly PortGroup[]>;
  readonly bundles: readonly Bundle[];
  readonly bundleByCable: ReadonlyMap<Id, Bundle>;
  readonly firstTunnelElement: number;
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
      groups.push(
        aggregation === undefined
          ? { index: groups.length, device: id, member, port: ports[0]!, ports, bundles: [] }
          : { index: groups.length, device: id, member, port: ports[0]!, ports, bundles: [], aggregation },
      );
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

/** The logical port of a cable's plug among those of the devices given. */
export const plugGroup = <G extends PortGroup>(
  entry: Device,
  portGroupsByDevice: ReadonlyMap<Id, readonly G[]>,
  { device, port, member }: Cable['a'],
): G | undefined => {
  // Only a pair has members: on anything else a plug that names one is in the device all the same.
  const index = groupIndex(entry, port, entry.kind === 'ha-pair' ? member : undefined);
  return index === undefined ? undefined : portGroupsByDevice.get(device)![index];
};

/** Whether a cable has no end in a shut port. */
export const isAlive = (devices: DesignFacts['devices'], { a, b }: Cable): boolean =>
  devices[a.device]!.ports[a.port]?.shut !== true && devices[b.device]!.ports[b.port]?.shut !== true;

/** Room for cables that come later, so that tunnels keep their numbers. */
const spareElements = 256;

type BundleDraft = Bundle & { readonly cables: Id[]; readonly alive: Id[] };

/** The bundle that joins the two groups already; undefined where there is none. */
const bundleBetween = (bundles: readonly BundleDraft[], a: Draft, b: Draft): BundleDraft | undefined => {
  for (const { bundle } of a.bundles) {
    const other = bundles[bundle]!;
    if ((other.a === a && other.b === b) || (other.a === b && other.b === a)) return other;
  }
  return undefined;
};

/** Groups ports by aggregation and cables by the two groups they join. Ids of devices and links come in order. */
export const cablingOf = (
  { devices, links }: DesignFacts,
  deviceIds: readonly Id[],
  linkIds: readonly Id[],
): Cabling => {
  const portGroupsByDevice = new Map<Id, Draft[]>();
  for (const id of deviceIds) {
    const groups = groupsOf(id, devices[id]!);
    if (groups.length > 0) portGroupsByDevice.set(id, groups);
  }

  const bundles: BundleDraft[] = [];
  const bundleByCable = new Map<Id, Bundle>();
  for (const id of linkIds) {
    const cable = links[id]!;
    if (cable.kind !== 'cable') continue;
    const a = plugGroup(devices[cable.a.device]!, portGroupsByDevice, cable.a);
    const b = plugGroup(devices[cable.b.device]!, portGroupsByDevice, cable.b);
    if (a === undefined || b === undefined) continue;
    // Two cables between the same single ports stay two: only an aggregate makes one crossing of several.
    const isAggregated = a.aggregation !== undefined || b.aggregation !== undefined;
    let bundle = isAggregated ? bundleBetween(bundles, a, b) : undefined;
    if (bundle === undefined) {
      bundle = { index: bundles.length, cables: [], alive: [], a, b };
      bundles.push(bundle);
      a.bundles.push({ bundle: bundle.index, end: 'a' });
      b.bundles.push({ bundle: bundle.index, end: 'b' });
    }
    bundle.cables.push(id);
    if (isAlive(devices, cable)) bundle.alive.push(id);
    bundleByCable.set(id, bundle);
  }
  return { portGroupsByDevice, bundles, bundleByCable, firstTunnelElement: bundles.length + spareElements };
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
