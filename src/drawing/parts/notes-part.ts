import { elementKey } from '../decorations.ts';
import type { Point, Rect, SheetGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group } from '../shape.ts';
import { textWidth, wrapText } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { hasTone } from './look.ts';
import { grown } from './outlines.ts';
import { textLine } from './text-shape.ts';

const sizePx = 14;
const linePx = 20;
const gapPx = 3;
const numberPx = 20;
const headPx = 24;
const clearPx = 8;
/** Widths the block of standing notes may take, widest first. */
const blockWidths = [526, 430, 340, 260, 200] as const;

interface NoteBlock {
  readonly rect: Rect;
  readonly notes: readonly { readonly id: string; readonly lines: readonly string[] }[];
}

const blockOf = (
  notes: readonly { readonly id: string; readonly text: string }[],
  at: Point,
  width: number,
): NoteBlock => {
  const wrapped = notes.map(({ id, text }) => ({ id, lines: wrapText(text, width - numberPx, sizePx) }));
  const lineCount = wrapped.reduce((sum, note) => sum + note.lines.length, 0);
  const widest = Math.max(
    60,
    ...wrapped.flatMap((note) => note.lines.map((line) => numberPx + textWidth(line, sizePx))),
  );
  return {
    rect: { ...at, width: widest, height: headPx + lineCount * linePx + (wrapped.length - 1) * gapPx },
    notes: wrapped,
  };
};

const overlap = (a: Rect, b: Rect): number =>
  Math.max(0, Math.min(a.x + a.width, b.x + b.width) - Math.max(a.x, b.x)) *
  Math.max(0, Math.min(a.y + a.height, b.y + b.height) - Math.max(a.y, b.y));

const bounds = (points: readonly Point[], by: number): Rect => {
  const xs = points.map((p) => p.x);
  const ys = points.map((p) => p.y);
  const [x, y] = [Math.min(...xs), Math.min(...ys)];
  return grown({ x, y, width: Math.max(...xs) - x, height: Math.max(...ys) - y }, by);
};

const runs = (polyline: readonly Point[], by: number): readonly Rect[] =>
  polyline.slice(1).map((point, i) => bounds([polyline[i] ?? point, point], by));

const occupied = (geometry: SheetGeometry): readonly Rect[] => [
  ...geometry.sites.map((site) => grown(site.rect, clearPx)),
  ...geometry.devices.map((device) => grown(device.rect, clearPx)),
  ...geometry.bands.flatMap((band) => [
    ...band.limbs,
    ...(band.header === undefined ? [] : [band.header]),
    band.text.rect,
  ]),
  ...geometry.rings.flatMap((ring) => ring.groups.flatMap((g) => g.ferrules.map((f) => f.rect))),
  ...geometry.jackets.flatMap((jacket) => runs(jacket.polyline, jacket.width / 2 + clearPx)),
  ...geometry.cables.flatMap((cable) => [
    ...runs(cable.polyline, clearPx),
    ...(cable.label === undefined ? [] : [cable.label.rect]),
  ]),
  geometry.sheet.titleBlock,
  geometry.sheet.legend,
];

/** The first place from the top left where all standing notes are clear of the drawing; where none is, the one that hides least. */
const placeBlock = (
  notes: readonly { readonly id: string; readonly text: string }[],
  geometry: SheetGeometry,
): NoteBlock => {
  const { frame } = geometry.sheet;
  const taken = occupied(geometry);
  let best: { block: NoteBlock; hidden: number } | undefined;
  for (const width of blockWidths) {
    const block = blockOf(notes, { x: 0, y: 0 }, width);
    const lastX = frame.x + frame.width - block.rect.width - clearPx;
    const lastY = frame.y + frame.height - block.rect.height - clearPx;
    for (let y = frame.y + 20; y <= lastY; y += 24)
      for (let x = frame.x + 20; x <= lastX; x += 40) {
        const rect = { ...block.rect, x, y };
        const hidden = taken.reduce((sum, other) => sum + overlap(other, rect), 0);
        if (hidden === 0) return { ...block, rect };
        if (best === undefined || hidden < best.hidden) best = { block: { ...block, rect }, hidden };
      }
  }
  return best?.block ?? blockOf(notes, { x: frame.x + 20, y: frame.y + 20 }, blockWidths[0]);
};

/** The standing notes in a numbered block, top left where the drawing leaves room. */
export const standingNotesPart = (
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): Shape | undefined => {
  if (look.level === 'plan' || look.level === 'far') return undefined;
  const notes = geometry.notes
    .filter((note) => note.standing)
    .map(({ id }) => ({ id, text: facts.notes[id]?.text ?? '' }));
  if (notes.length === 0) return undefined;
  const { rect, notes: wrapped } = placeBlock(notes, geometry);
  let y = rect.y + sizePx * 0.75;
  const heading = textLine('Notes', rect.x, y, { sizePx, weight: 600, key: 'heading' });
  y += headPx;
  return group(
    [
      heading,
      ...wrapped.map(({ id, lines }, i) => {
        const ref = { collection: 'notes', id } as const;
        const marked = hasTone(look, ref, 'selected') || hasTone(look, ref, 'hovered');
        const note = group(
          [
            textLine(String(i + 1), rect.x, y, { sizePx, weight: 600, key: 'number' }),
            ...lines.map((line, k) =>
              textLine(line, rect.x + numberPx, y + k * linePx, {
                sizePx,
                fill: paint(marked ? 'blue' : 'ink-2'),
                key: `line-${k}`,
              }),
            ),
          ],
          { key: elementKey(ref), data: { ref, part: 'note' } },
        );
        y += lines.length * linePx + gapPx;
        return note;
      }),
    ],
    { key: 'standing-notes' },
  );
};
