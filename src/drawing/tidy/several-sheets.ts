import type { Design } from '../../engine/model/design.ts';
import type { Layout, SheetSize } from '../../engine/model/layout.ts';
import { mostSheets } from '../../engine/model/layout.ts';
import { spacings } from '../parts/sizes.ts';
import { bundlesOf } from '../routing/bundles.ts';
import type { SheetCut } from '../sheets/sheet-cut.ts';
import { cutSheet, flagSite } from '../sheets/sheet-cut.ts';
import { flagColumnHeight, flagColumnWidth, flagSizes } from '../sheets/flag-places.ts';
import { onOneSheet } from './one-sheet.ts';
import type { OneSheet } from './one-sheet.ts';
import { siteBlocks } from './site-blocks.ts';
import { siteGraphFacts } from './site-graph.ts';
import type { SiteLayout } from './site-layout.ts';

// A design that no sheet holds, on several of one size. A sheet is begun with the hub or the first site that is left, and takes
// the sites that talk most to those on it, as many as it has room for; then all sheets are filled about evenly.

type SiteLayouts = { readonly [site: string]: SiteLayout };
type Shares = readonly (readonly string[])[];

/** The site of a cut that keeps room for all its flags. */
const flagsSite = 'flags here';
/** With more cords than this and no hub most of them would leave their sheet, and none could be followed. */
const mostInterwoven = 120;
/** Sheets that turn out too full give a site to the next; after so many times the design is left to overflow. */
const mostRounds = 24;

/** The cut with all its flags in one site at an edge of the sheet. */
const withFlagsInOneSite = (
  { design, flags }: SheetCut,
  siteLayouts: SiteLayouts,
): { readonly design: Design; readonly siteLayouts: SiteLayouts; readonly atEdge?: string } => {
  if (flags.length === 0) return { design, siteLayouts };
  const sizes = flagSizes(design, flags);
  const own = new Set(flags.map(({ id }) => flagSite(id)));
  const sites = Object.fromEntries([
    ...Object.entries(design.sites).filter(([id]) => !own.has(id)),
    [flagsSite, { name: ' ' }],
  ]);
  const devices = { ...design.devices };
  const positions: { [device: string]: { x: number; y: number } } = {};
  let y = 0;
  for (const size of sizes) {
    devices[size.id] = { ...devices[size.id]!, site: flagsSite };
    positions[size.id] = { x: 0, y: y + size.plateAt };
    y += size.room + 10;
  }
  return {
    design: { ...design, sites, devices },
    atEdge: flagsSite,
    siteLayouts: {
      ...siteLayouts,
      [flagsSite]: {
        positions,
        size: { width: flagColumnWidth(sizes), height: flagColumnHeight(sizes) + 24 },
      },
    },
  };
};

export const onSeveralSheets = (
  whole: Design,
  siteLayouts: SiteLayouts,
  size: SheetSize,
): Layout | undefined => {
  const facts = siteGraphFacts(whole);
  const all = [...(facts.hub === undefined ? [] : [facts.hub]), ...facts.order];
  if (all.length < 2) return undefined;
  if (facts.hub === undefined && bundlesOf(whole).length > mostInterwoven) return undefined;
  // What the whole design collapses is collapsed on its sheets too.
  const { collapsed } = siteBlocks(whole, facts, siteLayouts, spacings.snug);
  const before = whole.layout.sites ?? {};
  const nowhere = { x: 0, y: 0, width: 1, height: 1 };
  const design: Design = {
    ...whole,
    layout: {
      ...whole.layout,
      sites: {
        ...before,
        ...Object.fromEntries(
          [...collapsed].map((site) => [site, { ...(before[site] ?? nowhere), collapsed: true }]),
        ),
      },
    },
  };
  const talk = new Map<string, Map<string, number>>(all.map((site) => [site, new Map()]));
  for (const { a, b } of bundlesOf(design)) {
    const [p, q] = [a, b].map(({ device }) => design.devices[device]!.site) as [string, string];
    if (p === q) continue;
    talk.get(p)?.set(q, (talk.get(p)!.get(q) ?? 0) + 1);
    talk.get(q)?.set(p, (talk.get(q)!.get(p) ?? 0) + 1);
  }
  const isHeldBack = (site: string, sheet: number): boolean =>
    before[site]?.locked === true && (before[site].sheet ?? 1) > sheet;

  const sheetWith = (share: readonly string[], shares: Shares, number: number): OneSheet => {
    const numbers = new Map<string, number>();
    shares.forEach((sites, i) => sites.forEach((site) => numbers.set(site, i + 1)));
    share.forEach((site) => numbers.set(site, number));
    // Those that have no sheet yet are taken to fill others as this one is filled, for the flags that lead there.
    all
      .filter((site) => !numbers.has(site))
      .forEach((site, i) => numbers.set(site, number + 1 + Math.floor(i / Math.max(1, share.length))));
    const cut = cutSheet({
      design,
      sheet: number,
      numberOf: (site) => numbers.get(site) ?? 0,
      places: { ...design.layout, transports: {} },
    });
    const flagged = withFlagsInOneSite(cut, siteLayouts);
    return onOneSheet(flagged.design, { ...flagged, sizes: [size], holdsRings: true });
  };

  /** The sites that are left, in the order in which a sheet would take them. */
  const inTurn = (left: ReadonlySet<string>, number: number): readonly string[] => {
    const waiting = new Set(all.filter((site) => left.has(site) && !isHeldBack(site, number)));
    const ties = new Map<string, number>();
    const turn: string[] = [];
    while (waiting.size > 0) {
      let next: string | undefined;
      for (const site of waiting)
        if (next === undefined || (ties.get(site) ?? 0) > (ties.get(next) ?? 0)) next = site;
      waiting.delete(next!);
      turn.push(next!);
      for (const [other, count] of talk.get(next!)!) ties.set(other, (ties.get(other) ?? 0) + count);
    }
    return turn;
  };

  /** Fills one sheet after the other, each with `most` sites at most; undefined when a site has no room on a sheet of its own. */
  const share = (most: (sheet: number, left: number) => number): Shares | undefined => {
    const left = new Set(all);
    const shares: (readonly string[])[] = [];
    while (left.size > 0) {
      const number = shares.length + 1;
      if (number > mostSheets) return undefined;
      const turn = inTurn(left, number);
      const fits = (count: number): boolean => sheetWith(turn.slice(0, count), shares, number).fits();
      // The largest count that has room, found by halving.
      let [least, beyond] = [0, Math.min(turn.length, most(number, left.size)) + 1];
      while (beyond - least > 1) {
        const middle = Math.floor((least + beyond) / 2);
        if (fits(middle)) least = middle;
        else beyond = middle;
      }
      if (least === 0) return undefined;
      const taken = turn.slice(0, least);
      taken.forEach((site) => left.delete(site));
      shares.push(taken);
    }
    return shares;
  };

  const fullest = share(() => Infinity);
  if (fullest === undefined) return undefined;
  const count = fullest.length;
  const even = share((sheet, left) => Math.ceil(left / Math.max(1, count - sheet + 1)));
  let shares = even !== undefined && even.length === count ? even : fullest;
  const caps = new Map<number, number>();
  for (let round = 0; round < mostRounds; round += 1) {
    const layouts: Layout[] = [];
    for (const [i, sites] of shares.entries()) {
      const layout = sheetWith(sites, shares, i + 1).cleanest();
      if (layout === undefined) break;
      layouts.push(layout);
    }
    if (layouts.length === shares.length) return joined(whole, size, shares, layouts);
    // The first sheet without room for its flags takes one site less.
    const full = layouts.length + 1;
    caps.set(full, shares[full - 1]!.length - 1);
    if (caps.get(full) === 0) return undefined;
    const shares_ = share((sheet, left) => caps.get(sheet) ?? shares[sheet - 1]?.length ?? left);
    if (shares_ === undefined) return undefined;
    shares = shares_;
  }
  return undefined;
};

/** One layout of all sheets. */
const joined = (design: Design, size: SheetSize, shares: Shares, layouts: readonly Layout[]): Layout => {
  const sites: NonNullable<Layout['sites']> = {};
  const devices: NonNullable<Layout['devices']> = {};
  const endpoints: NonNullable<Layout['endpoints']> = {};
  const furtherSheets: NonNullable<Layout['furtherSheets']> = {};
  const isCord = (id: string): boolean =>
    Object.hasOwn(design.associations, id) || Object.hasOwn(design.tunnels, id);
  shares.forEach((share, i) => {
    const layout = layouts[i]!;
    const here = new Set(share);
    for (const site of share) {
      const { sheet: _before, ...place } = layout.sites![site]!;
      sites[site] = i === 0 ? place : { ...place, sheet: i + 1 };
    }
    for (const [id, place] of Object.entries(layout.devices ?? {}))
      if (here.has(design.devices[id]?.site ?? '')) devices[id] = place;
    for (const [id, seat] of Object.entries(layout.endpoints ?? {})) {
      const device = design.endpoints[id]?.device ?? '';
      if (here.has(design.devices[device]?.site ?? '') && (seat.order ?? []).every(isCord))
        endpoints[id] = seat;
    }
    if (i > 0) furtherSheets[String(i + 1)] = { transports: layout.transports ?? {} };
  });
  return {
    sheet: size,
    sites,
    devices,
    transports: layouts[0]!.transports ?? {},
    ...(Object.keys(furtherSheets).length === 0 ? {} : { furtherSheets }),
    ...(Object.keys(endpoints).length === 0 ? {} : { endpoints }),
    ...notesOf(design, (site) => sites[site]?.sheet ?? 1),
  };
};

/** Notes that somebody put down keep their places; those about something that went to another sheet find one beside it there. */
const notesOf = (design: Design, numberOf: (site: string) => number): Pick<Layout, 'notes'> => {
  const notes = Object.entries(design.layout.notes ?? {}).filter(([id]) => {
    const target = design.notes[id]?.target;
    const site =
      target?.collection === 'sites'
        ? target.id
        : target?.collection === 'devices'
          ? design.devices[target.id]?.site
          : undefined;
    return site === undefined || numberOf(site) === (design.layout.sites?.[site]?.sheet ?? 1);
  });
  return notes.length === 0 ? {} : { notes: Object.fromEntries(notes.map(([id, at]) => [id, { ...at }])) };
};
