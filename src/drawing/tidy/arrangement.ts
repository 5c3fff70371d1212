import type { Design } from '../../engine/model/design.ts';
import type { SheetSize } from '../../engine/model/layout.ts';
import type { Rect, SheetFrame } from '../geometry.ts';
import { band as bandSizes, bareWidth, jacketWidth } from '../parts/sizes.ts';
import type { Spacing } from '../parts/sizes.ts';
import { bandFoot } from '../routing/bands.ts';
import { bundlesOf } from '../routing/bundles.ts';
import { bottom, right } from '../routing/rects.ts';
import { laneCount } from '../routing/ring-seats.ts';
import { sheetFrame } from '../routing/sheet-frame.ts';
import type { SiteBlock } from './site-block.ts';
import type { SiteGraphFacts } from './site-graph.ts';
import type { Level } from './site-parts.ts';

export interface Seating {
  /** Sites of each column from the left; columns 2j and 2j + 1 lie left and right of limb j of the main band. */
  readonly columns: readonly (readonly string[])[];
  /** Columns right of each further transport's band, in the order of the transports. */
  readonly further: readonly (readonly string[])[];
}

export interface Arrangement {
  readonly size: SheetSize;
  readonly sheet: SheetFrame;
  readonly sites: ReadonlyMap<string, Rect>;
  readonly bands: ReadonlyMap<string, { readonly limbs: readonly Rect[]; readonly header?: Rect }>;
  readonly seating: Seating;
}

/** What routing reported back: how wide each transport's limbs and header have to be. */
export type BandWidths = ReadonlyMap<string, number>;

const widthOfBand = (design: Design, transport: string, widths: BandWidths): number =>
  Math.max(
    widths.get(transport) ?? 0,
    design.transports[transport]?.trusted === true ? bandSizes.trustedWidth : bandSizes.width,
  );

/** Frame of the sheet to the columns' first and last site. */
const edgeRoom = 16;
const backToBack = 40;
const leastGap = 16;
const mostGap = 60;
const footRoom = 14;
const headerGap = 12;

export const facingOf = (column: number): Level => (column % 2 === 0 ? 'right' : 'left');

export interface ArrangementOptions {
  readonly design: Design;
  readonly facts: SiteGraphFacts;
  readonly size: SheetSize;
  readonly seating: Seating;
  readonly spacing: Spacing;
  readonly blockOf: (site: string, facing: Level) => SiteBlock;
  readonly widths: BandWidths;
  /** All right columns are moved down by this much, so that runs of both sides don't meet. */
  readonly stagger?: number;
  /** The first column is moved down by this much, so that a cord of its hub runs straight. */
  readonly hubDown?: number;
  /** Columns begin at the top of their room instead of in its middle, so that the bands have room for words below. */
  readonly lifted?: boolean;
  /** The sheet may be too narrow, not too low. */
  readonly wide?: boolean;
  /** Answer even when the sheet is too small. */
  readonly force?: boolean;
}

/** Lays columns of sites and the bands between them on one sheet; undefined when they don't fit. */
export const arrange = (options: ArrangementOptions): Arrangement | undefined => {
  const { design, facts, size, seating, spacing, blockOf, widths } = options;
  const lifted = options.lifted === true;
  const stagger = options.stagger ?? 0;
  /** How far columns left and right of a band are moved down against each other. */
  const down = { left: lifted ? Math.max(0, -stagger) : 0, right: lifted ? Math.max(0, stagger) : stagger };
  const hubDown = options.hubDown ?? 0;
  const sheet = sheetFrame(size, Object.keys(design.segments).length);
  const limbs = seating.columns.length / 2;
  const [main, ...others] = facts.transports;
  const mainWidth = main === undefined ? 0 : widthOfBand(design, main, widths);
  const topHeader = limbs > 1 && main !== undefined ? mainWidth : 0;
  const inLeft = new Set(seating.columns[0]);
  // A further transport with members left of the first limb reaches round under the columns.
  const reaching = others.filter((t) =>
    [...inLeft].some((site) => facts.landedOn.get(site)?.has(t) ?? false),
  );
  const headers = reaching.map((t) => ({ transport: t, height: widthOfBand(design, t, widths) }));
  const headersHeight = headers.reduce((sum, h) => sum + h.height + headerGap, 0);

  const top = sheet.frame.y + edgeRoom + topHeader + (topHeader > 0 ? footRoom : 0);
  const foot = bottom(sheet.frame) - Math.max(sheet.titleBlock.height, sheet.legend.height) - footRoom;
  const columnFoot = foot - headersHeight - (headersHeight > 0 ? footRoom - headerGap : 0);
  const room = columnFoot - top;

  interface Column {
    readonly sites: readonly string[];
    readonly facing: Level;
    readonly width: number;
    readonly height: number;
  }
  const columnOf = (sites: readonly string[], facing: Level): Column => {
    const blocks = sites.map((site) => blockOf(site, facing).size);
    return {
      sites,
      facing,
      width: Math.max(0, ...blocks.map((block) => block.width)),
      height:
        blocks.reduce((sum, block) => sum + block.height, 0) + leastGap * Math.max(0, blocks.length - 1),
    };
  };
  const columns = seating.columns.map((sites, i) => columnOf(sites, facingOf(i)));
  const further = seating.further.map((sites) => columnOf(sites, 'left'));
  /** Room beside the first gutter for what goes round the first limb. */
  const reach = headers.reduce((sum, { transport }) => sum + 40 + reachWidth(design, transport, inLeft), 0);

  let solid = reach;
  let gutters = 0;
  columns.forEach((column, i) => {
    const isLeft = i % 2 === 0;
    solid += column.width;
    if (i > 0 && isLeft && column.width > 0 && columns[i - 1]!.width > 0) solid += backToBack;
    if (!isLeft) return;
    solid += mainWidth;
    gutters += 2;
  });
  others.forEach((t, i) => {
    solid += widthOfBand(design, t, widths) + further[i]!.width;
    gutters += further[i]!.width > 0 ? 2 : 1;
  });
  const spareWidth = sheet.frame.width - 2 * spacing.margin - solid - gutters * spacing.gutter;
  const all = [...columns, ...further];
  const tooHigh = all.some((column) => column.height > room);
  if ((tooHigh || (spareWidth < 0 && options.wide !== true)) && options.force !== true) return undefined;
  // Gutters and both margins share what is left.
  const gutter = Math.min(
    spacing.widestGutter,
    spacing.gutter + Math.max(0, Math.floor(spareWidth / (gutters + 2))),
  );
  const leftGutter = gutter + reach;
  const width = solid + gutters * gutter;

  const sites = new Map<string, Rect>();
  const stand = (column: Column, x: number, by: number): boolean => {
    const n = column.sites.length;
    const spare = room - column.height;
    const gap = n < 2 ? 0 : Math.min(mostGap, Math.max(leastGap, leastGap + spare / (n + 1)));
    const total = column.height + (gap - leastGap) * Math.max(0, n - 1);
    let y = Math.round(top + (lifted ? 0 : Math.max(0, (room - total) / 2)) + by);
    const start = y;
    for (const site of column.sites) {
      const block = blockOf(site, column.facing).size;
      sites.set(site, {
        x: Math.round(column.facing === 'right' ? x + column.width - block.width : x),
        y,
        width: block.width,
        height: block.height,
      });
      y = Math.round(y + block.height + gap);
    }
    return n === 0 || (start >= top - 0.5 && y - gap <= columnFoot + 0.5);
  };

  let x = Math.round(sheet.frame.x + Math.max(spacing.margin, (sheet.frame.width - width) / 2));
  const mainLimbs: { x: number }[] = [];
  let firstGutter = x;
  let fits = true;
  columns.forEach((column, i) => {
    const isLeft = i % 2 === 0;
    if (i > 0 && isLeft && column.width > 0 && columns[i - 1]!.width > 0) x += backToBack;
    fits = stand(column, x, isLeft ? down.left + (i === 0 ? hubDown : 0) : down.right) && fits;
    x += column.width;
    if (!isLeft) return;
    if (i === 0) firstGutter = x;
    x += i === 0 ? leftGutter : gutter;
    mainLimbs.push({ x });
    x += mainWidth + gutter;
  });
  if (!fits && options.force !== true) return undefined;

  const bands = new Map<string, { limbs: readonly Rect[]; header?: Rect }>();
  const limbAt = (at: number, w: number, until?: number): Rect => {
    const y = sheet.frame.y;
    return { x: at, y, width: w, height: (until ?? bandFoot(sheet, at, w)) - y };
  };
  const headersTop = foot - headersHeight;
  if (main !== undefined) {
    const until = headers.length > 0 ? headersTop : undefined;
    const rects = mainLimbs.map((limb) => limbAt(limb.x, mainWidth, until));
    const last = rects.at(-1)!;
    bands.set(main, {
      limbs: rects,
      ...(limbs > 1
        ? {
            header: {
              x: rects[0]!.x,
              y: sheet.frame.y,
              width: right(last) - rects[0]!.x,
              height: topHeader,
            },
          }
        : {}),
    });
  }
  let headerY = headersTop + headerGap;
  others.forEach((t, i) => {
    const w = widthOfBand(design, t, widths);
    x += gutter;
    const header = headers.find((h) => h.transport === t);
    if (header === undefined) bands.set(t, { limbs: [limbAt(x, w)] });
    else {
      const start = firstGutter + gutter / 2;
      bands.set(t, {
        limbs: [limbAt(x, w, headerY + header.height)],
        header: { x: start, y: headerY, width: x + w - start, height: header.height },
      });
      headerY += header.height + headerGap;
    }
    x += w;
    const column = further[i]!;
    if (column.width === 0) return;
    x += gutter;
    fits = stand(column, x, 0) && fits;
    x += column.width;
  });
  return fits || options.force === true ? { size, sheet, sites, bands, seating } : undefined;
};

/** Room in the first gutter for the cords that go round the first limb to a further transport. */
const reachWidth = (design: Design, transport: string, left: ReadonlySet<string>): number =>
  bundlesOf(design)
    .filter(
      (bundle) =>
        bundle.transport === transport &&
        [bundle.a, bundle.b].some((end) => left.has(design.devices[end.device]?.site ?? '')),
    )
    .reduce(
      (sum, bundle) => sum + 14 + (bundle.kind === 'bare' ? bareWidth : jacketWidth(laneCount(bundle))),
      0,
    );
