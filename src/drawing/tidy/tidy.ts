import type { Design } from '../../engine/model/design.ts';
import type { Layout, SheetSize } from '../../engine/model/layout.ts';
import { sheetSizes } from '../../engine/model/layout.ts';
import { diffPatch } from '../../engine/model/merge-patch.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { onOneSheet } from './one-sheet.ts';
import { onSeveralSheets } from './several-sheets.ts';
import type { SiteLayout } from './site-layout.ts';

export interface TidyOptions {
  /** Layouts computed for the sites that `unusualSites` names. */
  readonly siteLayouts?: { readonly [site: string]: SiteLayout };
  /** The largest sheet to take; absent: as the design says, else the largest there is. */
  readonly largest?: SheetSize;
}

/**
 * Lays out the whole design and answers the patch on it that does it: on the smallest sheet that holds it, and on several of
 * the largest allowed where none does. What not even a sheet of its own holds overflows to the right. The same design gives the
 * same layout, whatever it looked like before; only what a person locked or collapsed stays.
 */
export const tidy = (design: Design, options: TidyOptions = {}): MergePatch => {
  const { siteLayouts = {} } = options;
  const largest = options.largest ?? design.layout.largestSheet ?? sheetSizes.at(-1)!;
  const sizes = sheetSizes.slice(0, sheetSizes.indexOf(largest) + 1);
  const one = onOneSheet(design, { siteLayouts, sizes });
  const single = one.layout();
  const layout =
    single !== undefined
      ? onFirstSheet(single)
      : (onSeveralSheets(design, siteLayouts, largest) ?? onFirstSheet(one.overflowing()));
  return diffPatch(
    { layout: design.layout },
    { layout: { ...layout, ...(largest === sheetSizes.at(-1) ? {} : { largestSheet: largest }) } },
  );
};

const withoutSheet = <P extends { readonly sheet?: number | undefined }>(
  places: { readonly [id: string]: P } | undefined,
): { [id: string]: Omit<P, 'sheet'> } =>
  Object.fromEntries(
    Object.entries(places ?? {}).map(([id, { sheet: _sheet, ...place }]) => [id, place] as const),
  );

/** What a person locked or put down may have stood on a further sheet. */
const onFirstSheet = (layout: Layout): Layout => ({
  ...layout,
  ...(layout.sites === undefined ? {} : { sites: withoutSheet(layout.sites) }),
  ...(layout.notes === undefined ? {} : { notes: withoutSheet(layout.notes) }),
});
