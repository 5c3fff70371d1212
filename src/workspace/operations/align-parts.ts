import type { Rect } from '../../drawing/geometry.ts';
import { around, bottom, centre, right } from '../../drawing/routing/rects.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { joinPatches } from '../../engine/model/merge-patch.ts';
import { isLocked, moveElements, type Standing } from './move-parts.ts';
import { nameOf } from './name-of.ts';
import type { Operation } from './operation.ts';
import { refused } from './operation.ts';

/** An element with the ground it covers on the sheet. */
export interface Box {
  readonly ref: ElementRef;
  readonly rect: Rect;
}

export const alignments = ['left', 'centre', 'right', 'top', 'middle', 'bottom'] as const;
/** What is brought into line: an edge, or the centres (`centre` in one column, `middle` in one row). */
export type Alignment = (typeof alignments)[number];
export type Direction = 'across' | 'down';

const words: { readonly [A in Alignment]: string } = {
  left: 'left edges',
  centre: 'centres in a column',
  right: 'right edges',
  top: 'top edges',
  middle: 'centres in a row',
  bottom: 'bottom edges',
};
export const alignmentWords = (alignment: Alignment): string => `Align ${words[alignment]}`;
export const directionWords = (direction: Direction): string =>
  direction === 'across' ? 'Space out evenly across' : 'Space out evenly down';

/** How far one box is from where the others' ground wants it. */
const distanceTo = (alignment: Alignment, rect: Rect, ground: Rect): { dx: number; dy: number } => {
  switch (alignment) {
    case 'left':
      return { dx: ground.x - rect.x, dy: 0 };
    case 'right':
      return { dx: right(ground) - right(rect), dy: 0 };
    case 'centre':
      return { dx: centre(ground).x - centre(rect).x, dy: 0 };
    case 'top':
      return { dx: 0, dy: ground.y - rect.y };
    case 'bottom':
      return { dx: 0, dy: bottom(ground) - bottom(rect) };
    case 'middle':
      return { dx: 0, dy: centre(ground).y - centre(rect).y };
  }
};

/** A device whose site is selected as well goes where its site goes. */
const outermost = (design: Design, boxes: readonly Box[]): readonly Box[] => {
  const sites = new Set(boxes.filter(({ ref }) => ref.collection === 'sites').map(({ ref }) => ref.id));
  return boxes.filter(
    ({ ref }) => ref.collection !== 'devices' || !sites.has(design.devices[ref.id]?.site ?? ''),
  );
};

const movedBy = (
  design: Design,
  standing: Standing,
  moves: readonly { readonly ref: ElementRef; readonly dx: number; readonly dy: number }[],
): MergePatch =>
  joinPatches(
    design,
    // Notes last and always: one that is aligned itself doesn't go along with what it is pinned to.
    [
      ...moves.filter(({ ref, dx, dy }) => ref.collection !== 'notes' && (dx !== 0 || dy !== 0)),
      ...moves.filter(({ ref }) => ref.collection === 'notes'),
    ].flatMap(({ ref, dx, dy }) => {
      const operation = moveElements(design, standing, [ref], dx, dy);
      return operation.ok ? [operation.patch] : [];
    }),
  );

/**
 * Brings elements into line. Those that are locked stay, and then the others come to them; without any all of them share
 * the ground that they cover together.
 */
export const alignElements = (
  design: Design,
  standing: Standing,
  selected: readonly Box[],
  alignment: Alignment,
): Operation => {
  const boxes = outermost(design, selected);
  if (boxes.length < 2)
    return refused('One element alone is always in line: select two or more sites, devices or notes.');
  const locked = boxes.filter(({ ref }) => isLocked(design, ref));
  if (locked.length === boxes.length)
    return refused('All of these are locked in place: free at least one of them to align it.');
  const ground = around((locked.length > 0 ? locked : boxes).map(({ rect }) => rect))!;
  return {
    ok: true,
    label: alignmentWords(alignment),
    patch: movedBy(
      design,
      standing,
      boxes.map(({ ref, rect }) => ({ ref, ...distanceTo(alignment, rect, ground) })),
    ),
  };
};

/** Gives three or more elements equal gaps; the outermost two stay where they are. */
export const distributeElements = (
  design: Design,
  standing: Standing,
  selected: readonly Box[],
  direction: Direction,
): Operation => {
  const across = direction === 'across';
  const from = (rect: Rect): number => (across ? rect.x : rect.y);
  const length = (rect: Rect): number => (across ? rect.width : rect.height);
  const boxes = [...outermost(design, selected)].sort(
    (a, b) => from(a.rect) - from(b.rect) || (a.ref.id < b.ref.id ? -1 : 1),
  );
  const [first, last] = [boxes[0], boxes.at(-1)];
  if (first === undefined || last === undefined || boxes.length < 3)
    return refused('Even gaps need three elements or more: select sites, devices or notes.');
  const locked = boxes.slice(1, -1).find(({ ref }) => isLocked(design, ref));
  if (locked !== undefined)
    return refused(
      `${nameOf(design, locked.ref)} is locked in place between the others: free it, or leave it out.`,
    );
  const taken = boxes.reduce((sum, { rect }) => sum + length(rect), 0);
  const gap = (from(last.rect) + length(last.rect) - from(first.rect) - taken) / (boxes.length - 1);
  let at = from(first.rect);
  const moves = boxes.map(({ ref, rect }) => {
    const by = ref === last.ref ? 0 : at - from(rect);
    at += length(rect) + gap;
    return { ref, dx: across ? by : 0, dy: across ? 0 : by };
  });
  return { ok: true, label: directionWords(direction), patch: movedBy(design, standing, moves) };
};
