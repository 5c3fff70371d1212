import { expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { overlap } from '#drawing/routing/rects.ts';
import { legendColumns, sheetFrame } from '#drawing/routing/sheet-frame.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { largeDesign } from '../../support/large-design.ts';

it('a design of 1,000 devices stands in columns within the height of the largest sheet, clear of each other', () => {
  const design = largeDesign();
  const tidied = applyPatch(design, tidy(design));
  expect(parseDesign(tidied)).toMatchObject({ ok: true });
  const { layout } = tidied;
  expect(layout.sheet).toBe('A0');
  const sites = Object.entries(layout.sites!).map(([id, { x, y, width, height }]) => ({
    id,
    rect: { x, y, width: width!, height: height! },
  }));
  expect(sites.map(({ id }) => id).sort()).toEqual(Object.keys(design.sites).sort());
  expect(Object.keys(layout.devices!)).toHaveLength(Object.keys(design.devices).length);
  const { frame, legend } = sheetFrame('A0', Object.keys(design.segments).length);
  for (const { id, rect } of sites) {
    expect(rect.y, id).toBeGreaterThanOrEqual(frame.y);
    expect(rect.y + rect.height, id).toBeLessThanOrEqual(legend.y);
  }
  const bands = Object.values(layout.transports!).flatMap(({ limbs, header }) =>
    header === undefined ? limbs : [...limbs, header],
  );
  const touching = sites.flatMap(({ id, rect }, i) =>
    [...sites.slice(i + 1).map((other) => other.rect), ...bands].some((other) => overlap(rect, other))
      ? [id]
      : [],
  );
  expect(touching).toEqual([]);
}, 30_000);

it('a long legend goes on in further columns, within the sheet and clear of the title block', () => {
  expect(legendColumns(sheetFrame('A0', 20))).toBe(1);
  const sheet = sheetFrame('A0', 200);
  expect(legendColumns(sheet)).toBe(5);
  expect(sheet.legend.y).toBeGreaterThan(sheet.frame.y + sheet.frame.height / 2);
  expect(overlap(sheet.legend, sheet.titleBlock)).toBe(false);
});
