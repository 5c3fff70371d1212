import { describe, expect, it } from 'vitest';
import type { Design, ElementRef } from '#engine/model/design.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { FlagGeometry, Rect, SheetGeometry } from '#drawing/geometry.ts';
import { overlap } from '#drawing/routing/rects.ts';
import { drawSheet, sheetOfDesign } from '#drawing/sheets/draw-sheet.ts';
import { sheetFacts } from '#drawing/sheets/sheet-facts.ts';
import { sheetCount, sheetOfSite, sheetRanges, sheetsOf } from '#drawing/sheets/sheet-numbers.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { chainDesign, hubDesign, meshDesign } from '../../support/designs.ts';
import { closeRuns, misplacedFrames, overPlates, reversed, throughSolid } from '../routing/sheet-checks.ts';

const two = { segments: ['a', 'b'] } as const;
const onA3 = (design: Design): Design => applyPatch(design, tidy(design, { largest: 'A3' }));
const sheetsOfDesign = (
  design: Design,
): readonly { readonly number: number; readonly drawing: SheetGeometry }[] =>
  Array.from({ length: sheetCount(design) }, (_, i) => ({
    number: i + 1,
    drawing: drawSheet(design, i + 1),
  }));

const designs: { readonly [name: string]: () => Design } = {
  'a hub of 9': () => hubDesign(9, { ...two, hub: 'ha-pair' }),
  'a hub of 14 with one segment': () => hubDesign(14, { segments: ['a'] }),
  'a chain of 9': () => chainDesign(9, two),
  'a mesh of 6': () => meshDesign(6, { segments: ['a'] }),
};

describe.each(Object.entries(designs))('%s on A3 sheets', (_, make) => {
  const made = make();
  const design = onA3(made);
  const sheets = sheetsOfDesign(design);
  const flags = sheets.flatMap(({ number, drawing }) =>
    (drawing.flags ?? []).map((flag) => ({ ...flag, on: number })),
  );
  const farOf = ({ id }: FlagGeometry, on: number): readonly string[] => {
    const cut = sheetOfDesign(design, on).design;
    const rings = Object.keys(cut.endpoints).filter((endpoint) => cut.endpoints[endpoint]!.device === id);
    return Object.values(cut.tunnels).flatMap(({ a, b }) =>
      rings.includes(a.endpoint) || rings.includes(b.endpoint) ? [a.endpoint, b.endpoint] : [],
    );
  };

  it('takes several, as a valid layout', () => {
    expect(sheets.length).toBeGreaterThan(1);
    expect(parseDesign(design)).toMatchObject({ ok: true });
    expect(design.layout.sheet).toBe('A3');
  });

  it('stands every site whole on exactly one of them, clear of all else', () => {
    const drawn = sheets.flatMap(({ drawing }) => drawing.sites.map(({ id }) => id)).sort();
    expect(drawn).toEqual(Object.keys(design.sites).sort());
    for (const { number, drawing } of sheets) {
      expect(misplacedFrames(drawing), `sheet ${number}`).toEqual([]);
      for (const device of drawing.devices)
        expect(sheetOfSite(design.layout, design.devices[device.id]!.site)).toBe(number);
    }
  });

  it('routes the cords of each clear of plates, of one another and of the furniture', () => {
    for (const { number, drawing } of sheets) {
      expect(closeRuns(drawing), `sheet ${number}`).toEqual([]);
      expect(overPlates(drawing), `sheet ${number}`).toEqual([]);
      expect(throughSolid(drawing), `sheet ${number}`).toEqual([]);
      expect(drawing.jackets.filter(({ noWay }) => noWay)).toEqual([]);
    }
  });

  it('keeps flags inside the frame, clear of sites, bands and each other', () => {
    const over = sheets.flatMap(({ number, drawing }) => {
      const others: readonly Rect[] = [
        ...drawing.sites.map(({ rect }) => rect),
        ...drawing.bands.flatMap(({ limbs }) => limbs),
        drawing.sheet.legend,
        drawing.sheet.titleBlock,
      ];
      return (drawing.flags ?? []).flatMap((flag, i) =>
        [...others, ...drawing.flags!.slice(i + 1).map(({ rect }) => rect)].some((rect) =>
          overlap(rect, flag.rect),
        )
          ? [`${flag.id} on ${number}`]
          : [],
      );
    });
    expect(over).toEqual([]);
  });

  it('draws each tunnel that leaves a sheet at both, with a flag that names the other', () => {
    const leaving = Object.keys(design.tunnels).filter(
      (id) => sheetsOf(design, { collection: 'tunnels', id }).length === 2,
    );
    expect(leaving.length).toBeGreaterThan(0);
    for (const id of leaving) {
      const [first, second] = sheetsOf(design, { collection: 'tunnels', id }) as [number, number];
      for (const [on, other] of [
        [first, second],
        [second, first],
      ] as const) {
        const { together } = sheetOfDesign(design, on);
        const drawnAs = [...together].find(([, tunnels]) => tunnels.includes(id))?.[0] ?? id;
        const { drawing } = sheets[on - 1]!;
        expect(drawing.jackets.some(({ lanes }) => lanes.some(({ tunnel }) => tunnel === drawnAs))).toBe(
          true,
        );
        const cut = sheetOfDesign(design, on).design;
        const ends = [cut.tunnels[drawnAs]!.a, cut.tunnels[drawnAs]!.b].map(
          ({ endpoint }) => cut.endpoints[endpoint]!.device,
        );
        const flag = drawing.flags?.find((one) => ends.includes(one.id));
        const from = drawing.flags!.map(({ sheet }) => sheet);
        const shows =
          flag?.sheet === other || (flag !== undefined && !from.includes(other) && flag.sheet < other);
        expect(shows, `${id} on sheet ${on} leads to ${flag?.head}, not ${other}`).toBe(true);
      }
    }
  });

  it('has no flag without a cord or a cable, and names site and device of one that stands for a single device', () => {
    for (const flag of flags) {
      expect(farOf(flag, flag.on).length).toBeGreaterThan(0);
      expect(flag.sheet).not.toBe(flag.on);
      if (flag.device === undefined) continue;
      const device = design.devices[flag.device]!;
      expect(flag.head).toBe(`Sheet ${sheetOfSite(design.layout, device.site)}`);
      expect(flag.lines).toEqual([`${design.sites[device.site]!.name} · ${device.name}`]);
    }
  });

  it('numbers each sheet in its title block, and says on every band where it goes on', () => {
    for (const { number } of sheets) {
      const drawn = sheetOfDesign(design, number);
      const facts = sheetFacts(drawn, new Map());
      expect(facts.titleBlock.sheet).toBe(`${number}/${sheets.length}`);
      for (const [id, words] of Object.entries(facts.transports)) {
        const others = sheetsOf(design, { collection: 'transports', id }).filter((on) => on !== number);
        if (others.length > 0) expect(words.name).toContain(`continues on sheet`);
        if (others.length > 0) expect(words.name.endsWith(sheetRanges(others))).toBe(true);
      }
    }
  });

  it('is the same however the design is listed, and when it is tidied again', () => {
    expect(onA3(reversed(made)).layout).toEqual(design.layout);
    expect(onA3(design).layout).toEqual(design.layout);
  });

  it('goes back to one sheet when a larger one may be taken', () => {
    const one = applyPatch(design, tidy(design, { largest: 'A0' }));
    expect(sheetCount(one)).toBe(1);
    expect(one.layout.furtherSheets).toBeUndefined();
    expect(one.layout.largestSheet).toBeUndefined();
    expect(one.layout).toEqual(applyPatch(made, tidy(made)).layout);
  });
});

it('keeps sites that talk most to one another on a sheet', () => {
  const design = onA3(chainDesign(9, two));
  const leaving = Object.keys(design.associations).filter(
    (id) => sheetsOf(design, { collection: 'associations', id }).length === 2,
  );
  // A chain that is cut into n pieces is cut n - 1 times.
  expect(leaving).toHaveLength(sheetCount(design) - 1);
});

it('finds the sheets of whatever stands somewhere, and none of what does not', () => {
  const design = onA3(hubDesign(9, two));
  const [site] = Object.keys(design.sites) as [string];
  const at = (ref: ElementRef): readonly number[] => sheetsOf(design, ref);
  expect(at({ collection: 'sites', id: site })).toEqual([sheetOfSite(design.layout, site)]);
  expect(at({ collection: 'segments', id: Object.keys(design.segments)[0]! })).toEqual([]);
  expect(at({ collection: 'devices', id: 'nowhere' })).toEqual([]);
  expect(at({ collection: 'transports', id: Object.keys(design.transports)[0]! })).toHaveLength(
    sheetCount(design),
  );
});

it('says numbers of sheets in few words', () => {
  expect(sheetRanges([2])).toBe('2');
  expect(sheetRanges([1, 2])).toBe('1, 2');
  expect(sheetRanges([5, 1, 3, 4])).toBe('1, 3 to 5');
});

it('leaves a design on one sheet as it is drawn', () => {
  const made = hubDesign(3, two);
  const design = applyPatch(made, tidy(made));
  expect(sheetCount(design)).toBe(1);
  expect(sheetOfDesign(design).design).toBe(design);
  expect(drawSheet(design).flags).toBeUndefined();
});
