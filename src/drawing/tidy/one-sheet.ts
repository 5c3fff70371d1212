import type { Design } from '../../engine/model/design.ts';
import type { Layout, SheetSize } from '../../engine/model/layout.ts';
import { band as bandSizes, lane, spacings } from '../parts/sizes.ts';
import type { Spacing } from '../parts/sizes.ts';
import type { Bundle } from '../routing/bundles.ts';
import { bundlesOf, otherEnd } from '../routing/bundles.ts';
import type { FurnishedSheet } from '../routing/furnish.ts';
import { cordsOf, furnish } from '../routing/furnish.ts';
import { bandNeeds } from '../routing/route-cords.ts';
import { route, routeSheetOnce } from '../routing/route.ts';
import { sheetFrame } from '../routing/sheet-frame.ts';
import type { Arrangement, BandWidths, Seating } from './arrangement.ts';
import { layoutOf } from './arranged-layout.ts';
import { arrange } from './arrangement.ts';
import { siteBlocks } from './site-blocks.ts';
import { refine, scoreOf } from './refine.ts';
import type { Score } from './refine.ts';
import { mostMixedLimbs, seatings } from './seatings.ts';
import type { SiteLayout } from './site-layout.ts';
import type { SiteGraphFacts } from './site-graph.ts';
import { siteGraphFacts } from './site-graph.ts';

export interface OneSheetOptions {
  /** Layouts computed for the sites that `unusualSites` names. */
  readonly siteLayouts: { readonly [site: string]: SiteLayout };
  /** The sheets to be tried, small to large. */
  readonly sizes: readonly SheetSize[];
  /** A site that stands at an edge of the sheet: in the place of a hub where there is none, else last of all. */
  readonly atEdge?: string;
  /** Pin rings to the limb that they face where another lies close behind them. */
  readonly holdsRings?: boolean;
}

const mostWidthRounds = 4;
const widestWhenFull = 340;
/** Of designs with more cords the first arrangement that fits is taken, without a look at how the others route. */
const mostCompared = 120;
/** Of further sheets, what moving columns may be able to mend: a few overlaps. */
const mostMended = 1000;
const mostHopeless = 3;
/** Steps in px by which right columns may be moved, so that runs of both sides don't meet. */
const staggers = [16, -16, 24, -24, 32, -32, 44, -44, 58, -58];

interface Tidied {
  readonly layout: Layout;
  readonly arrangement: Arrangement;
  readonly spacing: Spacing;
  readonly stagger: number;
  /** How far it is from clean, routed when first asked. */
  readonly score: () => Score;
}

const once = <T>(work: () => T): (() => T) => {
  let done: { readonly value: T } | undefined;
  return () => (done ??= { value: work() }).value;
};

/** What each transport's cords need, where that is more than before. */
const widerThan = (widths: BandWidths, furnished: FurnishedSheet): BandWidths => {
  const wider = new Map(widths);
  const cords = cordsOf(furnished, () => lane.pitch);
  for (const [key, need] of bandNeeds(furnished.ground, cords)) {
    const transport = key.slice(0, key.lastIndexOf(' ', key.lastIndexOf(' ') - 1));
    if (need > (wider.get(transport) ?? 0)) wider.set(transport, Math.ceil(need / 2) * 2);
  }
  return wider;
};

const isSettled = (needed: BandWidths, { bands }: Arrangement): boolean =>
  [...needed].every(([transport, width]) => {
    const laid = bands.get(transport);
    return laid === undefined || width <= laid.limbs[0]!.width + 0.5;
  });

/** The design with another layout. */
const withLayout = (design: Design, layout: Layout): Design => ({ ...design, layout });

/** How the sites of a design are laid out on one sheet, for asking several things of it. */
export interface OneSheet {
  /** Clean or as clean as can be, on the smallest sheet that holds all; undefined where none does. */
  readonly layout: () => Layout | undefined;
  /** On the largest of the sheets, the first way that is clean, else the least bad of all; undefined where there is no room. */
  readonly cleanest: () => Layout | undefined;
  /** Whether the largest of the sheets has room for all, however clean. */
  readonly fits: () => boolean;
  /** More than the largest sheet holds: as many limbs as keep the columns to its height, so that only its width is passed. */
  readonly overflowing: () => Layout;
}

const factsOf = (design: Design, atEdge: string | undefined): SiteGraphFacts => {
  const facts = siteGraphFacts(design);
  if (atEdge === undefined || facts.hub === atEdge) return facts;
  const order = facts.order.filter((site) => site !== atEdge);
  return facts.hub === undefined ? { ...facts, hub: atEdge, order } : { ...facts, order: [...order, atEdge] };
};

/**
 * Sites in columns along their transports' bands, on the smallest sheet that holds them, snug where the usual spacing would
 * take a larger one. The same design gives the same layout, whatever it looked like before; only what a person locked or
 * collapsed stays.
 */
export const onOneSheet = (
  design: Design,
  { siteLayouts, sizes, atEdge, holdsRings = false }: OneSheetOptions,
): OneSheet => {
  const facts = factsOf(design, atEdge);
  const blocks = new Map(
    [spacings.roomy, spacings.snug].map((spacing) => [
      spacing,
      siteBlocks(design, facts, siteLayouts, spacing),
    ]),
  );
  const heightOf = (site: string): number =>
    blocks.get(spacings.roomy)!.blockOf(site, 'left').size.height + 16;

  const attempt = (
    size: SheetSize,
    spacing: Spacing,
    seating: Seating,
    stagger: number,
    lifted = false,
  ): Tidied | undefined => {
    const { blockOf, collapsed } = blocks.get(spacing)!;
    let widths: ReadonlyMap<string, number> = new Map();
    for (let round = 0; ; round += 1) {
      const lay = (hubDown: number) => {
        const arrangement = arrange({
          design,
          facts,
          size,
          seating,
          spacing,
          blockOf,
          widths,
          stagger,
          hubDown,
          lifted,
        });
        if (arrangement === undefined) return undefined;
        const layout = layoutOf(design, arrangement, blockOf, collapsed, holdsRings);
        return { arrangement, layout, furnished: furnish(withLayout(design, layout)) };
      };
      const centred = lay(0);
      if (centred === undefined) return undefined;
      const bend = facts.hub === undefined ? 0 : leastBend(facts.hub, centred.furnished);
      const { arrangement, layout, furnished } = (bend === 0 ? undefined : lay(bend)) ?? centred;
      const laidOut = withLayout(design, layout);
      const wider = widerThan(widths, furnished);
      if (isSettled(wider, arrangement) || round === mostWidthRounds - 1)
        return { layout, arrangement, spacing, stagger, score: once(() => scoreOf(routeSheetOnce(laidOut))) };
      widths = wider;
    }
  };

  const isCompared = bundlesOf(design).length <= mostCompared;
  /** The best of a seating's arrangements on one sheet: as it comes, or with the right columns moved a little. */
  const bestOf = (size: SheetSize, spacing: Spacing, seating: Seating): Tidied | undefined => {
    const plain = attempt(size, spacing, seating, 0);
    // Where snug needs more than that to be clean, the next sheet is the better answer.
    if (spacing === spacings.snug || (plain !== undefined && !isCompared)) return plain;
    if (plain !== undefined && plain.score().steps === 0) return plain;
    if (!isCompared) return undefined;
    const candidates = staggers.flatMap((stagger) => attempt(size, spacing, seating, stagger) ?? []);
    if (plain !== undefined) candidates.unshift(plain);
    return candidates.reduce<Tidied | undefined>(
      (best, next) => (best === undefined || next.score().total < best.score().total ? next : best),
      undefined,
    );
  };
  /** Bands without room for their words in them. */
  const wordless = ({ layout }: Tidied): number =>
    route(withLayout(design, layout)).bands.filter((band) => band.text.mode !== 'in').length;
  const withRoomForWords = (tidied: Tidied): Tidied => {
    if (wordless(tidied) === 0) return tidied;
    const { size, seating } = tidied.arrangement;
    const lifted = attempt(size, tidied.spacing, seating, tidied.stagger, true);
    const isBetter =
      lifted !== undefined &&
      wordless(lifted) < wordless(tidied) &&
      lifted.score().total <= tidied.score().total;
    return isBetter ? lifted : tidied;
  };
  const overflowing = (): Layout => {
    const size = sizes.at(-1)!;
    const { blockOf, collapsed } = blocks.get(spacings.snug)!;
    let limbs = mostMixedLimbs;
    let widths: ReadonlyMap<string, number> = new Map();
    for (let round = 0; ;) {
      const room = roomOn(design, size, limbs) - Math.max(0, ...widths.values());
      const seating = seatings(facts, limbs, heightOf, room).at(-1)!;
      const options = { design, facts, size, seating, spacing: spacings.snug, blockOf, widths };
      const low = arrange({ ...options, wide: true });
      if (low === undefined && limbs < facts.order.length) {
        limbs += 1;
        continue;
      }
      const arrangement = low ?? arrange({ ...options, force: true })!;
      const layout = layoutOf(design, arrangement, blockOf, collapsed, holdsRings);
      round += 1;
      if (round === mostWidthRounds) return layout;
      // Bands may take only so much of the height; beyond that their cords lie closer.
      const wider = new Map(
        [...widerThan(widths, furnish(withLayout(design, layout)))].map(([transport, width]) => [
          transport,
          Math.min(width, widestWhenFull),
        ]),
      );
      if (isSettled(wider, arrangement)) return layout;
      widths = wider;
    }
  };
  const find = (): Tidied | undefined => {
    for (const size of sizes)
      for (const spacing of [spacings.roomy, spacings.snug])
        for (let limbs = 1; limbs <= mostMixedLimbs; limbs += 1)
          for (const seating of seatings(facts, limbs, heightOf, roomOn(design, size, limbs))) {
            const tidied = bestOf(size, spacing, seating);
            // Snug never costs clearances: where it does, the next sheet is better.
            if (
              tidied !== undefined &&
              (!isCompared || spacing === spacings.roomy || tidied.score().steps === 0)
            )
              return tidied;
          }
    return undefined;
  };
  const finished = (best: Tidied | undefined): Layout | undefined =>
    best === undefined || !isCompared ? best?.layout : refine(design, withRoomForWords(best).layout);
  const largest = sizes.at(-1)!;
  const ways = Array.from({ length: mostMixedLimbs }, (_, i) => i + 1).flatMap((limbs) =>
    seatings(facts, limbs, heightOf, roomOn(design, largest, limbs)),
  );
  return {
    overflowing,
    fits: () => ways.some((seating) => attempt(largest, spacings.snug, seating, 0) !== undefined),
    layout: () => finished(find()),
    cleanest: () => {
      const better = (best: Tidied | undefined, next: Tidied | undefined): Tidied | undefined =>
        next === undefined || (best !== undefined && best.score().total <= next.score().total) ? best : next;
      const isClean = (tidied: Tidied | undefined): boolean => tidied?.score().steps === 0;
      let best: Tidied | undefined;
      let tried = 0;
      for (const spacing of [spacings.roomy, spacings.snug])
        for (const seating of ways) {
          // What the first ways leave far from clean is too interwoven for the others too.
          if (tried >= mostHopeless && best!.score().steps > mostMended) return best!.layout;
          const next = attempt(largest, spacing, seating, 0);
          if (next === undefined) continue;
          tried += 1;
          best = better(best, next);
          if (isClean(best)) return finished(best);
        }
      if (best === undefined || best.score().steps > mostMended) return best?.layout;
      const { spacing, arrangement } = best;
      for (const stagger of staggers) {
        best = better(best, attempt(largest, spacing, arrangement.seating, stagger));
        if (isClean(best)) break;
      }
      return finished(best);
    },
  };
};

/** Cords that bend by more are better left to turn properly. */
const mostLevelled = 60;

/** How far the hub has to move down for that cord of it to run straight which bends least; 0 where none comes near. */
const leastBend = (hub: string, { bundles, rings, stands }: FurnishedSheet): number => {
  const mouthAt = (bundle: Bundle, end: 'a' | 'b'): number =>
    rings
      .get(bundle[end].endpoint)!
      .groups.find(
        (group) => group.jacket === bundle.id && group.end === end && (group.part ?? 0) === bundle.part,
      )!.mouth.y;
  const bends = bundles.flatMap((bundle) => {
    const atHub = (['a', 'b'] as const).find((end) => stands.get(bundle[end].device)!.device.site === hub);
    if (atHub === undefined) return [];
    const far = otherEnd(atHub);
    const [mine, theirs] = [rings.get(bundle[atHub].endpoint)!, rings.get(bundle[far].endpoint)!];
    // A trunk needs room to turn in, so that its branches leave it sideways.
    const canBeStraight =
      mine.side !== theirs.side && mine.manifold === undefined && theirs.manifold === undefined;
    return canBeStraight ? [mouthAt(bundle, far) - mouthAt(bundle, atHub)] : [];
  });
  const least = bends.reduce((best, bend) => (Math.abs(bend) < Math.abs(best) ? bend : best), Infinity);
  return Math.abs(least) <= mostLevelled ? least : 0;
};

/** Height that a column may take on a sheet, to fill columns evenly. */
const roomOn = (design: Design, size: SheetSize, limbs: number): number => {
  const { frame, legend } = sheetFrame(size, Object.keys(design.segments).length);
  return frame.height - 16 - legend.height - 14 - (limbs > 1 ? bandSizes.width + 14 : 0);
};
