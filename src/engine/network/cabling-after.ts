import type { Id } from '../model/scalars.ts';
import type { Changes } from './changes.ts';
import type { Bundle, Cable, DesignFacts, End, PortGroup } from './network.ts';
import { ends } from './network.ts';
import type { Cabling } from './port-groups.ts';
import { isAlive, plugGroup } from './port-groups.ts';

/** A bundle that has no number yet, or may get another. */
type Unnumbered = Omit<Bundle, 'index'>;

/** Groups cables anew, in order of id, by the two groups that they join. */
const laid = (
  ids: readonly Id[],
  { devices, links }: DesignFacts,
  groupOf: (plug: Cable['a']) => PortGroup | undefined,
): readonly Unnumbered[] => {
  const bundles: (Unnumbered & { readonly cables: Id[]; readonly alive: Id[] })[] = [];
  for (const id of ids) {
    const cable = links[id]!;
    if (cable.kind !== 'cable') continue;
    const [a, b] = [groupOf(cable.a), groupOf(cable.b)];
    if (a === undefined || b === undefined) continue;
    const isAggregated = a.aggregation !== undefined || b.aggregation !== undefined;
    let bundle = isAggregated
      ? bundles.find((other) => (other.a === a && other.b === b) || (other.a === b && other.b === a))
      : undefined;
    if (bundle === undefined) {
      bundle = { cables: [], alive: [], a, b };
      bundles.push(bundle);
    }
    bundle.cables.push(id);
    if (isAlive(devices, cable)) bundle.alive.push(id);
  }
  return bundles;
};

interface Numbered {
  readonly bundles: Unnumbered[];
  /** Numbers that mean another bundle than before, or none any more. */
  readonly renumbered: ReadonlySet<number>;
}

/**
 * Gives numbers to new bundles in place of loose ones: their own where the first cable is the same, then those that are free,
 * then new ones. Where numbers are left over, the last bundles move into them, so that there is no gap.
 */
const numbered = (
  before: readonly Bundle[],
  loose: ReadonlySet<Bundle>,
  fresh: readonly Unnumbered[],
): Numbered => {
  const bundles: Unnumbered[] = before.slice();
  const renumbered = new Set([...loose].map(({ index }) => index));
  const numberByCable = new Map([...loose].map(({ index, cables }) => [cables[0]!, index]));
  const free = new Set([...renumbered].sort((a, b) => a - b));
  const others: Unnumbered[] = [];
  for (const bundle of fresh) {
    const own = numberByCable.get(bundle.cables[0]!);
    if (own === undefined) others.push(bundle);
    else {
      bundles[own] = bundle;
      free.delete(own);
    }
  }
  for (const bundle of others) {
    const [number = bundles.length] = free;
    free.delete(number);
    bundles[number] = bundle;
    renumbered.add(number);
  }
  for (const number of [...free].reverse()) {
    const last = bundles.length - 1;
    renumbered.add(last);
    bundles[number] = bundles[last]!;
    bundles.pop();
  }
  return { bundles, renumbered };
};

/**
 * The cabling after cables came, went or were plugged in elsewhere, on devices whose ports are as before. Groups and bundles
 * that have nothing to do with them are the same objects under the same numbers. Undefined where numbers run out.
 */
export const cablingAfter = (
  before: Cabling,
  design: DesignFacts,
  changes: Changes['links'],
): Cabling | undefined => {
  const groupOf = (plug: Cable['a']): PortGroup | undefined =>
    plugGroup(design.devices[plug.device]!, before.portGroupsByDevice, plug);

  const loose = new Set<Bundle>();
  const ids = new Set<Id>();
  for (const { id, before: old, now } of changes) {
    for (const link of [old, now])
      if (link?.kind === 'cable')
        for (const end of ends)
          for (const { bundle } of groupOf(link[end])?.bundles ?? []) loose.add(before.bundles[bundle]!);
    if (now?.kind === 'cable') ids.add(id);
  }
  const gone = new Set(changes.filter(({ now }) => now?.kind !== 'cable').map(({ id }) => id));
  for (const { cables } of loose) for (const id of cables) if (!gone.has(id)) ids.add(id);
  const fresh = laid([...ids].sort(), design, groupOf);
  if (loose.size === 0 && fresh.length === 0) return before;

  const { bundles: drafts, renumbered } = numbered(before.bundles, loose, fresh);
  if (drafts.length > before.firstTunnelElement) return undefined;

  // The groups at either end of what a number meant or means.
  const bundlesAt = new Map<PortGroup, { readonly bundle: number; readonly end: End }[]>();
  for (const number of renumbered)
    for (const bundle of [before.bundles[number], drafts[number]])
      for (const end of ends)
        if (bundle !== undefined && !bundlesAt.has(bundle[end]))
          bundlesAt.set(
            bundle[end],
            bundle[end].bundles.filter((at) => !renumbered.has(at.bundle)),
          );
  for (const number of renumbered)
    for (const end of ends) {
      const bundle = drafts[number];
      if (bundle !== undefined) bundlesAt.get(bundle[end])!.push({ bundle: number, end });
    }
  const firstCable = ({ bundle }: { readonly bundle: number }): Id => drafts[bundle]!.cables[0]!;
  const renewed = new Map<PortGroup, PortGroup>();
  for (const [group, list] of bundlesAt) {
    list.sort((a, b) => (a.bundle === b.bundle ? 0 : firstCable(a) < firstCable(b) ? -1 : 1));
    renewed.set(group, { ...group, bundles: list });
  }

  const bundles = drafts as Bundle[];
  const bundleByCable = new Map(before.bundleByCable);
  for (const { id } of changes) bundleByCable.delete(id);
  const portGroupsByDevice = new Map(before.portGroupsByDevice);
  for (const group of renewed.values()) {
    const groups = portGroupsByDevice.get(group.device)!.slice();
    groups[group.index] = group;
    portGroupsByDevice.set(group.device, groups);
    for (const { bundle: index } of group.bundles) {
      const { cables, alive, a, b } = bundles[index]!;
      const bundle = { index, cables, alive, a: renewed.get(a) ?? a, b: renewed.get(b) ?? b };
      bundles[index] = bundle;
      for (const id of cables) bundleByCable.set(id, bundle);
    }
  }
  return { portGroupsByDevice, bundles, bundleByCable, firstTunnelElement: before.firstTunnelElement };
};
