import { elementKey } from '../decorations.ts';
import type { SheetGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { textWidth, wrapText } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import { anchorFor } from './anchor-for.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { hasTone } from './look.ts';
import { textLine } from './text-shape.ts';

const sizePx = 14;
const linePx = 19;
/** Room left of a standing note for its number, and above the first one for the heading. */
const numberPx = 18;
const headPx = 26;
/** From the top of a line's room down to its baseline. */
const baselinePx = 14;

/** The standing notes, numbered under their heading where routing found room for the block. */
export const standingNotesPart = (
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): Shape | undefined => {
  if (look.level === 'plan' || look.level === 'far') return undefined;
  const notes = geometry.notes.filter((note) => note.standing);
  const first = notes[0];
  if (first === undefined) return undefined;
  return group(
    [
      textLine('Notes', first.rect.x, first.rect.y - headPx + baselinePx, {
        sizePx,
        weight: 600,
        key: 'heading',
      }),
      ...notes.map(({ id, rect }, i) => {
        const ref = { collection: 'notes', id } as const;
        const marked = hasTone(look, ref, 'selected') || hasTone(look, ref, 'hovered');
        const lines = wrapText(facts.notes[id]?.text ?? '', rect.width - numberPx, sizePx);
        return group(
          [
            textLine(String(i + 1), rect.x, rect.y + baselinePx, { sizePx, weight: 600, key: 'number' }),
            ...lines.map((line, k) =>
              textLine(line, rect.x + numberPx, rect.y + baselinePx + k * linePx, {
                sizePx,
                fill: paint(marked ? 'blue' : 'ink-2'),
                key: `line-${k}`,
              }),
            ),
          ],
          { key: elementKey(ref), data: { ref, part: 'note' } },
        );
      }),
    ],
    { key: 'standing-notes' },
  );
};

const leaderPx = 1.2;

/** A note where it was put: its words on a shelf, and a leader from the shelf to what it speaks of. */
export const pinnedNotePart = (
  noteId: string,
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): Shape | undefined => {
  const note = geometry.notes.find(({ id, standing }) => id === noteId && !standing);
  const own = facts.notes[noteId];
  if (note === undefined || own === undefined || look.level === 'plan' || look.level === 'far')
    return undefined;
  const ref = { collection: 'notes', id: noteId } as const;
  const marked = hasTone(look, ref, 'selected') || hasTone(look, ref, 'hovered');
  const colour = paint(marked ? 'blue' : 'ink-2');
  const { rect } = note;
  const lines = wrapText(own.text, rect.width, sizePx);
  const width = Math.max(24, ...lines.map((line) => textWidth(line, sizePx)));
  const shelf = rect.y + lines.length * linePx + 2;
  const target = own.target === undefined ? undefined : anchorFor(geometry, own.target, facts);
  const from = target !== undefined && target.x > rect.x + width / 2 ? rect.x + width : rect.x;
  return group(
    [
      {
        ...shape('path', {
          d:
            `M${rect.x} ${shelf}H${rect.x + width}` +
            (target === undefined ? '' : `M${from} ${shelf}L${target.x} ${target.y}`),
          fill: 'none',
          stroke: colour,
          strokeWidth: leaderPx,
        }),
        key: 'leader',
      },
      target !== undefined && {
        ...shape('circle', {
          cx: target.x,
          cy: target.y,
          r: 2.8,
          fill: colour,
          stroke: paint('paper'),
          strokeWidth: 1.2,
        }),
        key: 'dot',
      },
      ...lines.map((line, i) =>
        textLine(line, rect.x, rect.y + baselinePx + i * linePx, {
          sizePx,
          fill: colour,
          haloPx: 4,
          key: `line-${i}`,
        }),
      ),
    ],
    { key: elementKey(ref), data: { ref, part: 'note' } },
  );
};
