import type { DrawingFacts, TitleBlockFacts, TunnelFacts } from '../parts/drawing-facts.ts';
import { drawingFacts } from '../parts/drawing-facts.ts';
import type { DrawnSheet } from './draw-sheet.ts';

/** The number of a sheet as its title block has it. */
export const sheetNumberWords = ({ number, of }: Pick<DrawnSheet, 'number' | 'of'>): string =>
  `${number}/${of}`;

/** What the drawing of one sheet says. */
export const sheetFacts = (
  drawn: DrawnSheet,
  tunnelSegments: ReadonlyMap<string, readonly string[]>,
  titleBlock: Partial<TitleBlockFacts> = {},
): DrawingFacts => {
  const carried = segmentsOnSheet(drawn, tunnelSegments);
  const facts = drawingFacts(drawn.design, carried, { sheet: sheetNumberWords(drawn), ...titleBlock });
  if (drawn.together.size === 0) return facts;
  const counted = [...drawn.together].flatMap(([id, tunnels]): (readonly [string, TunnelFacts])[] => {
    const own = facts.tunnels[id];
    return own === undefined ? [] : [[id, { ...own, count: tunnels.length }]];
  });
  return { ...facts, tunnels: { ...facts.tunnels, ...Object.fromEntries(counted) } };
};

/** The segments of each tunnel of a sheet; of tunnels that leave it together all of theirs. */
export const segmentsOnSheet = (
  { together }: DrawnSheet,
  tunnelSegments: ReadonlyMap<string, readonly string[]>,
): ReadonlyMap<string, readonly string[]> =>
  together.size === 0
    ? tunnelSegments
    : new Map([
        ...tunnelSegments,
        ...[...together].map(
          ([id, tunnels]) =>
            [id, [...new Set(tunnels.flatMap((tunnel) => tunnelSegments.get(tunnel) ?? []))]] as const,
        ),
      ]);
