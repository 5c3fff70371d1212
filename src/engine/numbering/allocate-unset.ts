import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, joinPatches, patchAt } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { DesignFacts } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import type { Problem } from '../wire/problem.ts';
import { freeLoopbacks, freeVlans, freeVnis, lowestLoopbacks, lowestVnis } from './free-numbers.ts';
import type { NumberingContext } from './numbering-context.ts';
import { isInRanges, noNumberingContext } from './numbering-context.ts';
import { vlansAt } from './numbers-of.ts';

/** A number that was given to what had none. */
export interface Allocated {
  readonly ref: ElementRef;
  readonly path: readonly string[];
  readonly value: number | string;
}
export interface Allocation {
  /** All of it as one change; {} where nothing was unset. */
  readonly patch: MergePatch;
  /** In the order in which numbers were given. */
  readonly allocated: readonly Allocated[];
  /** What got no number, since its pool has none. */
  readonly problems: readonly Problem[];
}

/** Endpoints of tunnels that ask for IPv6. */
const sixAsked = (design: DesignFacts): ReadonlySet<Id> =>
  new Set(
    Object.values(design.tunnels).flatMap(({ a, b, family }) =>
      family === 6 ? [a.endpoint, b.endpoint] : [],
    ),
  );

/**
 * Numbers for all that has none: endpoints without an address, tunnels without a VNI, sites of segments without a VLAN. Both
 * ends of a tunnel get one VNI, all sites of a segment one VLAN where it is free at each; what one end or site has already is
 * taken for the others. Ids go first to last, each the lowest that is free.
 */
export const allocateUnset = <D extends DesignFacts>(
  design: D,
  context: NumberingContext = noNumberingContext,
): Allocation => {
  const patches: MergePatch[] = [];
  const allocated: Allocated[] = [];
  const problems: Problem[] = [];
  const give = (
    collection: 'endpoints' | 'tunnels' | 'segments',
    id: Id,
    path: readonly string[],
    value: number | string,
  ) => {
    patches.push(patchAt([collection, id, ...path], value));
    allocated.push({ ref: { collection, id }, path, value });
  };
  const now = (): DesignFacts => patches.reduce<DesignFacts>(applyPatch, design);
  const fail = (places: readonly string[], found: readonly Problem[]): void => {
    problems.push(
      ...found.map(({ expected, ...problem }) => ({
        ...problem,
        expected: `${expected}, for ${places.join(', ')}`,
      })),
    );
  };

  const bare = Object.keys(design.endpoints)
    .sort()
    .filter((id) => {
      const { ipv4, ipv6 } = entryOf(design.endpoints, id);
      return ipv4 === undefined && ipv6 === undefined;
    });
  const isV6 = sixAsked(design);
  for (const family of [4, 6] as const) {
    const own = bare.filter((id) => isV6.has(id) === (family === 6));
    const loopbacks = lowestLoopbacks(design, family, own.length, context);
    own.forEach((id, i) => {
      const loopback = loopbacks[i];
      if (loopback !== undefined) give('endpoints', id, [family === 4 ? 'ipv4' : 'ipv6'], loopback);
    });
    const left = own.slice(loopbacks.length);
    const answer = left.length === 0 ? undefined : freeLoopbacks(now(), family, left.length, context);
    if (answer?.ok === false)
      fail(
        left.map((id) => `endpoints.${id}`),
        answer.problems,
      );
  }

  const open = Object.keys(design.tunnels)
    .sort()
    .filter((id) => ends.some((end) => entryOf(design.tunnels, id)[end].vni === undefined));
  const knownVni = (id: Id): number | undefined => {
    const { a, b } = entryOf(design.tunnels, id);
    return a.vni ?? b.vni;
  };
  const fresh = open.filter((id) => knownVni(id) === undefined);
  const vnis = lowestVnis(design, fresh.length, context);
  const freshVni = new Map(fresh.map((id, i) => [id, vnis[i]]));
  for (const id of open) {
    const vni = knownVni(id) ?? freshVni.get(id);
    if (vni === undefined) continue;
    for (const end of ends)
      if (entryOf(design.tunnels, id)[end].vni === undefined) give('tunnels', id, [end, 'vni'], vni);
  }
  const left = fresh.slice(vnis.length);
  const answer = left.length === 0 ? undefined : freeVnis(now(), left.length, context);
  if (answer?.ok === false)
    fail(
      left.map((id) => `tunnels.${id}`),
      answer.problems,
    );

  for (const id of Object.keys(design.segments).sort()) {
    const { sites } = entryOf(design.segments, id);
    const names = Object.keys(sites).sort();
    const unset = names.filter((site) => sites[site]!.vlan === undefined);
    if (unset.length === 0) continue;
    const current = now();
    const isFree = (site: Id, vlan: number): boolean =>
      !isInRanges(context.reserved?.vlans, vlan) && !vlansAt(current, site).has(vlan);
    const known = names.map((site) => sites[site]!.vlan).filter((vlan) => vlan !== undefined);
    const common =
      known.find((vlan) => unset.every((site) => isFree(site, vlan))) ??
      (known.length === 0 ? commonVlan(current, unset, context) : undefined);
    for (const site of unset) {
      const own = common ?? known.find((vlan) => isFree(site, vlan));
      const answer =
        own === undefined
          ? freeVlans(current, 1, { sites: [site] }, context)
          : { ok: true as const, vlans: [own] };
      if (answer.ok) give('segments', id, ['sites', site, 'vlan'], answer.vlans[0]!);
      else fail([`segments.${id}.sites.${site}`], answer.problems);
    }
  }
  return { patch: joinPatches(design, patches), allocated, problems };
};

const commonVlan = (
  design: DesignFacts,
  sites: readonly Id[],
  context: NumberingContext,
): number | undefined => {
  const answer = freeVlans(design, 1, { sites }, context);
  return answer.ok ? answer.vlans[0] : undefined;
};
