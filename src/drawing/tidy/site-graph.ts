import type { Design } from '../../engine/model/design.ts';
import { mostUsed } from './site-parts.ts';
import { bundlesOf } from '../routing/bundles.ts';
import { byText } from '../routing/rects.ts';

/** How the sites of a design hang together. */
export interface SiteGraphFacts {
  /** The transport that most associations and bare tunnels run over. */
  readonly main: string | undefined;
  /** All transports, the main one first. */
  readonly transports: readonly string[];
  /** Which transports each site lands on. */
  readonly landedOn: ReadonlyMap<string, ReadonlySet<string>>;
  readonly hub: string | undefined;
  /** All sites but the hub, in the order in which they take their places. */
  readonly order: readonly string[];
  readonly hasPair: ReadonlySet<string>;
}

const hubShare = 0.6;

/** Names as people read them, s2 before s10; ids decide between equal names. */
const byName =
  (design: Design) =>
  (a: string, b: string): number =>
    (design.sites[a]?.name ?? '').localeCompare(design.sites[b]?.name ?? '', 'en', { numeric: true }) ||
    byText(a, b);

/** Spokes in the order given, but those that are joined to each other too stand next to one another. */
const sideBySide = (
  sites: readonly string[],
  neighbours: ReadonlyMap<string, ReadonlySet<string>>,
): readonly string[] => {
  const left = new Set(sites);
  const order: string[] = [];
  const visit = (site: string): void => {
    if (!left.delete(site)) return;
    order.push(site);
    for (const next of sites) if (neighbours.get(site)?.has(next)) visit(next);
  };
  for (const site of sites) visit(site);
  return order;
};

/** The hub, the order of the other sites, and who is on which transport. */
export const siteGraphFacts = (design: Design): SiteGraphFacts => {
  const sites = Object.keys(design.sites).sort(byText);
  const siteOf = (device: string): string | undefined => design.devices[device]?.site;
  const bundles = bundlesOf(design);
  const main = mostUsed(bundles.map((b) => b.transport)) ?? Object.keys(design.transports).sort(byText)[0];
  const transports = [
    ...(main === undefined ? [] : [main]),
    ...Object.keys(design.transports)
      .filter((t) => t !== main)
      .sort(byText),
  ];
  const landedOn = new Map<string, Set<string>>(sites.map((site) => [site, new Set()]));
  for (const link of Object.values(design.links))
    if (link.kind === 'landing') landedOn.get(siteOf(link.device) ?? '')?.add(link.transport);
  for (const bundle of bundles)
    for (const end of [bundle.a, bundle.b])
      if (bundle.transport !== undefined) landedOn.get(siteOf(end.device) ?? '')?.add(bundle.transport);

  const neighbours = new Map<string, Set<string>>(sites.map((site) => [site, new Set()]));
  const degree = new Map<string, number>(sites.map((site) => [site, 0]));
  let joined = 0;
  for (const bundle of bundles) {
    const a = siteOf(bundle.a.device);
    const b = siteOf(bundle.b.device);
    if (a === undefined || b === undefined || a === b || !degree.has(a) || !degree.has(b)) continue;
    joined += 1;
    neighbours.get(a)!.add(b);
    neighbours.get(b)!.add(a);
    degree.set(a, degree.get(a)! + 1);
    degree.set(b, degree.get(b)! + 1);
  }
  const ranked = [...sites].sort((a, b) => degree.get(b)! - degree.get(a)! || byText(a, b));
  const most = ranked[0];
  const isHub =
    most !== undefined &&
    (sites.length === 2 ||
      (joined > 0 &&
        degree.get(most)! >= hubShare * joined &&
        degree.get(most)! > (ranked[1] === undefined ? 0 : degree.get(ranked[1])!)));
  const pairs = new Set(
    Object.values(design.devices)
      .filter((device) => device.kind === 'ha-pair')
      .map((device) => device.site),
  );
  // Of two sites the one with an HA pair takes the hub's side: its row is the longer.
  const hub = !isHub
    ? undefined
    : sites.length === 2
      ? ([...sites].find((site) => pairs.has(site)) ?? sites[0])
      : most;
  const others = sites.filter((site) => site !== hub);
  return {
    main,
    transports,
    landedOn,
    hub,
    order:
      hub === undefined ? walk(others, neighbours) : sideBySide([...others].sort(byName(design)), neighbours),
    hasPair: pairs,
  };
};

/** A walk from neighbour to neighbour, least joined first, so that a chain stays a chain. */
const walk = (
  sites: readonly string[],
  neighbours: ReadonlyMap<string, ReadonlySet<string>>,
): readonly string[] => {
  const size = (site: string): number => neighbours.get(site)?.size ?? 0;
  const left = new Set([...sites].sort((a, b) => size(a) - size(b) || byText(a, b)));
  const order: string[] = [];
  let at: string | undefined;
  while (left.size > 0) {
    const here: string | undefined = at;
    const next: string =
      (here === undefined ? undefined : [...left].find((site) => neighbours.get(here)?.has(site))) ??
      [...left][0]!;
    left.delete(next);
    order.push(next);
    at = next;
  }
  return order;
};
