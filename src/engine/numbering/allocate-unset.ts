import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, joinPatches, patchAt } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { DesignFacts } from '../network/network.ts';
import { ends, entryOf, otherEnd } from '../network/network.ts';
import type { Problem } from '../wire/problem.ts';
import { freeLoopbacks, freeVlans, freeVnis } from './free-numbers.ts';
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

/** The family of the tunnels at an endpoint that has no address yet: IPv6 where they ask for it, else IPv4. */
const familyAt = (design: DesignFacts, endpoint: Id): 4 | 6 =>
  Object.values(design.tunnels).some(
    ({ a, b, family }) => family === 6 && (a.endpoint === endpoint || b.endpoint === endpoint),
  )
    ? 6
    : 4;

/**
 * Numbers for all that has none: endpoints without an address, tunnels without a VNI, sites of segments without a VLAN. Both
 * ends of a tunnel get one VNI, all sites of a segment one VLAN where it is free at each; what one end or site has already is
 * taken for the others. Ids go first to last, each the lowest that is free.
 */
export const allocateUnset = <D extends DesignFacts>(
  design: D,
  context: NumberingContext = noNumberingContext,
): Allocation => {
  let now: DesignFacts = design;
  const patches: MergePatch[] = [];
  const allocated: Allocated[] = [];
  const problems: Problem[] = [];
  const give = (
    collection: 'endpoints' | 'tunnels' | 'segments',
    id: Id,
    path: readonly string[],
    value: number | string,
  ) => {
    const patch = patchAt([collection, id, ...path], value);
    patches.push(patch);
    now = applyPatch(now, patch);
    allocated.push({ ref: { collection, id }, path, value });
  };
  const fail = (place: string, found: readonly Problem[]): void => {
    problems.push(
      ...found.map(({ expected, ...problem }) => ({ ...problem, expected: `${expected}, for ${place}` })),
    );
  };

  for (const id of Object.keys(design.endpoints).sort()) {
    const { ipv4, ipv6 } = entryOf(design.endpoints, id);
    if (ipv4 !== undefined || ipv6 !== undefined) continue;
    const family = familyAt(design, id);
    const answer = freeLoopbacks(now, family, 1, context);
    if (answer.ok) give('endpoints', id, [family === 4 ? 'ipv4' : 'ipv6'], answer.loopbacks[0]!);
    else fail(`endpoints.${id}`, answer.problems);
  }

  for (const id of Object.keys(design.tunnels).sort()) {
    const tunnel = entryOf(design.tunnels, id);
    const unset = ends.filter((end) => tunnel[end].vni === undefined);
    if (unset.length === 0) continue;
    const known = tunnel[otherEnd(unset[0]!)].vni;
    const answer = known === undefined ? freeVnis(now, 1, context) : { ok: true as const, vnis: [known] };
    if (answer.ok) for (const end of unset) give('tunnels', id, [end, 'vni'], answer.vnis[0]!);
    else fail(`tunnels.${id}`, answer.problems);
  }

  for (const id of Object.keys(design.segments).sort()) {
    const { sites } = entryOf(design.segments, id);
    const names = Object.keys(sites).sort();
    const unset = names.filter((site) => sites[site]!.vlan === undefined);
    if (unset.length === 0) continue;
    const isFree = (site: Id, vlan: number): boolean =>
      !isInRanges(context.reserved?.vlans, vlan) && !vlansAt(now, site).has(vlan);
    const known = names.map((site) => sites[site]!.vlan).filter((vlan) => vlan !== undefined);
    const common =
      known.find((vlan) => unset.every((site) => isFree(site, vlan))) ??
      (known.length === 0 ? commonVlan(now, unset, context) : undefined);
    for (const site of unset) {
      const own = common ?? known.find((vlan) => isFree(site, vlan));
      const answer =
        own === undefined
          ? freeVlans(now, 1, { sites: [site] }, context)
          : { ok: true as const, vlans: [own] };
      if (answer.ok) give('segments', id, ['sites', site, 'vlan'], answer.vlans[0]!);
      else fail(`segments.${id}.sites.${site}`, answer.problems);
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
