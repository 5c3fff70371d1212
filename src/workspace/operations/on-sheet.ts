import { bandsOnSheet } from '../../drawing/sheets/sheet-numbers.ts';
import type { Design } from '../../engine/model/design.ts';
import type { Json, MergePatch } from '../../engine/model/merge-patch.ts';

// Operations know one sheet: theirs. These two take a design there and bring a patch back.

/** The design with the bands of one sheet in place of the first one's. */
export const designOnSheet = (design: Design, sheet: number): Design => {
  if (sheet === 1) return design;
  const { transports: _first, ...layout } = design.layout;
  return { ...design, layout: { ...layout, transports: bandsOnSheet(design.layout, sheet) ?? {} } };
};

type Bag = { readonly [key: string]: Json };
const bagAt = (bag: Bag | undefined, key: string): Bag | undefined => {
  const value = bag?.[key];
  return typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Bag) : undefined;
};

/** A patch that was made on one sheet: what it adds stands there, and the bands that it moves are that sheet's. */
export const patchOnSheet = (design: Design, patch: MergePatch, sheet: number): MergePatch => {
  const layout = bagAt(patch, 'layout');
  if (sheet === 1 || layout === undefined) return patch;
  const added = (collection: 'sites' | 'notes'): Bag | undefined => {
    const places = bagAt(layout, collection);
    return places === undefined
      ? undefined
      : Object.fromEntries(
          Object.entries(places).map(([id, place]) => [
            id,
            place === null || Object.hasOwn(design[collection], id) ? place : { ...(place as Bag), sheet },
          ]),
        );
  };
  const { transports, ...rest } = layout;
  const [sites, notes] = [added('sites'), added('notes')];
  return {
    ...patch,
    layout: {
      ...rest,
      ...(sites === undefined ? {} : { sites }),
      ...(notes === undefined ? {} : { notes }),
      ...(transports === undefined ? {} : { furtherSheets: { [String(sheet)]: { transports } } }),
    },
  };
};
