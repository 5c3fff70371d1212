import type { Design } from '../../engine/model/design.ts';
import type { FlagGeometry, SheetGeometry } from '../geometry.ts';
import { route, routeWhileDragging } from '../routing/route.ts';
import { sheetFrame } from '../routing/sheet-frame.ts';
import { flagPlaces, flagSizes } from './flag-places.ts';
import type { SheetCut } from './sheet-cut.ts';
import { cutSheet, flagSite } from './sheet-cut.ts';
import { bandsOnSheet, sheetCount, sheetOfSite, sheetsOf } from './sheet-numbers.ts';

/** One sheet of a design as it is drawn. */
export interface DrawnSheet extends SheetCut {
  readonly number: number;
  readonly of: number;
}

const cutParts = [
  'sites',
  'devices',
  'transports',
  'links',
  'endpoints',
  'associations',
  'tunnels',
  'segments',
  'notes',
  'layout',
] as const satisfies readonly (keyof Design)[];

interface Kept {
  readonly design: Design;
  readonly sheets: Map<number, DrawnSheet>;
}
const kept = new WeakMap<Design['layout'], Kept>();

/** A copy of a sheet's cut that says what the design says now of what isn't drawn. */
const saying = (drawn: DrawnSheet, design: Design): DrawnSheet =>
  drawn.design.meta === design.meta ? drawn : { ...drawn, design: { ...drawn.design, meta: design.meta } };

/**
 * What lies on one sheet, as a design that routing takes like any other. A design on one sheet is its own cut; the same
 * design gives the same cut, so that what is remembered of it holds.
 */
export const sheetOfDesign = (design: Design, number = 1): DrawnSheet => {
  const of = sheetCount(design);
  if (of === 1) return { number: 1, of, design, flags: [], together: new Map() };
  const before = kept.get(design.layout);
  const isSame = before !== undefined && cutParts.every((part) => before.design[part] === design[part]);
  const sheets = isSame ? before.sheets : new Map<number, DrawnSheet>();
  if (!isSame) kept.set(design.layout, { design, sheets });
  const known = sheets.get(number);
  if (known !== undefined) return saying(known, design);
  const { layout } = design;
  const notes = Object.fromEntries(
    Object.entries(design.notes).filter(([id]) =>
      sheetsOf(design, { collection: 'notes', id }).includes(number),
    ),
  );
  const cut = cutSheet({
    design: { ...design, notes },
    sheet: number,
    numberOf: (site) => sheetOfSite(layout, site),
    places: { ...layout, transports: bandsOnSheet(layout, number) ?? {} },
  });
  const drawn: DrawnSheet = { ...cut, number, of, design: withFlags(cut) };
  sheets.set(number, drawn);
  return drawn;
};

/** The cut with a place for each of its flags. */
export const withFlags = ({ design, flags }: SheetCut): Design => {
  if (flags.length === 0) return design;
  const sheet = sheetFrame(design.layout.sheet ?? 'A3', Object.keys(design.segments).length);
  const places = flagPlaces(
    sheet,
    flagSizes(design, flags),
    Object.values(design.layout.sites ?? {}),
    Object.values(design.layout.transports ?? {}).flatMap(({ limbs }) => limbs),
  );
  const devices = { ...design.layout.devices, ...Object.fromEntries(places) };
  return { ...design, layout: { ...design.layout, devices } };
};

/** The drawing without what only stands in for other sheets, and with the flags that it stands for. */
const furnished = ({ design, flags }: DrawnSheet, routed: SheetGeometry): SheetGeometry => {
  if (flags.length === 0) return routed;
  const sizes = new Map(flagSizes(design, flags).map((size) => [size.id, size]));
  const stands = new Map(routed.devices.map((device) => [device.id, device]));
  const standIns = new Set(flags.map(({ id }) => id));
  const frames = new Set(flags.map(({ id }) => flagSite(id)));
  return {
    ...routed,
    sites: routed.sites.filter(({ id }) => !frames.has(id)),
    devices: routed.devices.filter(({ id }) => !standIns.has(id)),
    flags: flags.flatMap((flag): FlagGeometry[] => {
      const stand = stands.get(flag.id);
      const size = sizes.get(flag.id);
      if (stand === undefined || size === undefined) return [];
      const { rect } = stand;
      const rings = routed.rings.filter(({ device }) => device === flag.id);
      const middle = routed.sheet.frame.x + routed.sheet.frame.width / 2;
      const looks = rings[0]?.side ?? (rect.x < middle ? 'right' : 'left');
      return [
        {
          ...flag,
          looks: looks === 'left' ? 'left' : 'right',
          rect: {
            ...rect,
            y: rect.y - size.plateAt + size.flagAt,
            height: Math.max(size.height, rect.height),
          },
          pips: stand.pips,
        },
      ];
    }),
    crowded: routed.crowded.flatMap((entry) => {
      if (entry.what !== 'text') return [entry];
      // An address on a flag is at hand on the sheet where its ring is.
      const ids = entry.ids.filter((id) => !standIns.has(design.endpoints[id]?.device ?? ''));
      return ids.length === 0 ? [] : [{ ...entry, ids }];
    }),
  };
};

const drawings = new WeakMap<SheetGeometry, SheetGeometry>();

const remember = (drawn: DrawnSheet, routed: SheetGeometry): SheetGeometry => {
  const before = drawings.get(routed);
  if (before !== undefined) return before;
  const now = furnished(drawn, routed);
  drawings.set(routed, now);
  return now;
};

/** One sheet of a design, placed and routed; of a design on one sheet the whole drawing. */
export const drawSheet = (design: Design, number = 1): SheetGeometry => {
  const drawn = sheetOfDesign(design, number);
  return remember(drawn, route(drawn.design));
};

/** The same, quick enough for every step of a drag. */
export const drawSheetWhileDragging = (design: Design, from: Design, number = 1): SheetGeometry => {
  const drawn = sheetOfDesign(design, number);
  return remember(drawn, routeWhileDragging(drawn.design, sheetOfDesign(from, number).design));
};
