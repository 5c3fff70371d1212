import { describe, expect, it } from 'vitest';
import { applyPatch } from '../../src/engine/model/merge-patch.ts';
import { parseDesign } from '../../src/engine/model/parse-design.ts';
import type { Design } from '../../src/engine/model/design.ts';
import { drawSheet, sheetOfDesign } from '../../src/drawing/sheets/draw-sheet.ts';
import { sheetFacts } from '../../src/drawing/sheets/sheet-facts.ts';
import { sheetCount } from '../../src/drawing/sheets/sheet-numbers.ts';
import { tidy } from '../../src/drawing/tidy/tidy.ts';
import { designToFlow } from '../../src/canvas/design-to-flow.ts';
import { standingOf } from '../../src/canvas/flow-changes-to-patch.ts';
import { sheetCommands, sheetWords } from '../../src/canvas/sheet-turner.tsx';
import { readSheetNumber } from '../../src/canvas/use-sheet-number.ts';
import { moveElements } from '../../src/workspace/operations/move-parts.ts';
import { designOnSheet, patchOnSheet } from '../../src/workspace/operations/on-sheet.ts';
import { hubDesign } from '../support/designs.ts';

const made = hubDesign(9, { segments: ['a', 'b'] });
const design: Design = applyPatch(made, tidy(made, { largest: 'A3' }));
const of = sheetCount(design);

describe('the sheet that an address names', () => {
  it('is the first where it names none, and the one it names', () => {
    expect(readSheetNumber('', of)).toEqual({ number: 1, problem: undefined });
    expect(readSheetNumber('2', of)).toEqual({ number: 2, problem: undefined });
  });

  it('is said to be missing with the value and the range where there is no such sheet', () => {
    for (const text of [String(of + 1), '0', 'two', '1.5', '-1'])
      expect(readSheetNumber(text, of)).toEqual({
        number: 1,
        problem: `There is no sheet “${text}”: this design has sheets 1 to ${of}. Sheet 1 is shown.`,
      });
    expect(readSheetNumber('2', 1).problem).toContain('has sheet 1 only');
  });

  it('is found by its number and by what stands on it, and not offered where there is one', () => {
    const turned: number[] = [];
    const sheet = { number: 1, of, problem: undefined, turnTo: (number: number) => void turned.push(number) };
    const commands = sheetCommands(design, sheet);
    expect(commands.map(({ name }) => name)).toEqual(Array.from({ length: of }, (_, i) => `Sheet ${i + 1}`));
    expect(commands[1]!.detail).toBe(sheetWords(design, 2));
    commands[1]!.run();
    expect(turned).toEqual([2]);
    expect(sheetCommands(design, { ...sheet, of: 1 })).toEqual([]);
  });
});

describe('the canvas of one sheet of several', () => {
  const drawn = sheetOfDesign(design, 2);
  const { nodes, edges } = designToFlow({
    design: drawn.design,
    geometry: drawSheet(design, 2),
    facts: sheetFacts(drawn, new Map()),
    selected: new Set(),
    editable: true,
    isLocked: () => false,
  });

  it('has a flag that says where it leads, held still, and cords that end on what is there', () => {
    const flags = nodes.filter(({ type }) => type === 'onward');
    expect(flags.length).toBeGreaterThan(0);
    for (const { ariaLabel, draggable } of flags) {
      expect(ariaLabel).toMatch(/^Go to sheet 1, /);
      expect(draggable).toBe(false);
    }
    const ids = new Set(nodes.map(({ id }) => id));
    expect(edges.filter(({ source, target }) => !ids.has(source) || !ids.has(target))).toEqual([]);
  });
});

describe('what is done on a further sheet', () => {
  it('puts new sites and notes there, and leaves those of other sheets where they are', () => {
    const [old] = Object.keys(design.sites) as [string];
    const patch = {
      sites: { new: { name: 'New' } },
      layout: {
        sites: {
          new: { x: 40, y: 40, width: 240, height: 110 },
          [old]: { x: 10, y: 10, width: 240, height: 110 },
        },
        notes: { told: { x: 1, y: 2 } },
      },
    };
    const after = patchOnSheet(design, patch, 2) as { layout: { sites: object; notes: object } };
    expect(after.layout.sites).toEqual({
      new: { x: 40, y: 40, width: 240, height: 110, sheet: 2 },
      [old]: { x: 10, y: 10, width: 240, height: 110 },
    });
    expect(after.layout.notes).toEqual({ told: { x: 1, y: 2, sheet: 2 } });
    expect(patchOnSheet(design, patch, 1)).toBe(patch);
  });

  it('moves the band of that sheet alone', () => {
    const [band] = Object.keys(design.transports) as [string];
    const before = design.layout.furtherSheets!['2']!.transports![band]!.limbs[0]!;
    const moved = moveElements(
      designOnSheet(design, 2),
      standingOf(drawSheet(design, 2)),
      [{ collection: 'transports', id: band }],
      30,
      0,
    );
    if (!moved.ok) throw new Error(moved.why);
    const after = applyPatch(design, patchOnSheet(design, moved.patch, 2));
    expect(parseDesign(after)).toMatchObject({ ok: true });
    expect(after.layout.transports).toBe(design.layout.transports);
    expect(after.layout.furtherSheets!['2']!.transports![band]!.limbs[0]!.x).toBe(before.x + 30);
  });
});
