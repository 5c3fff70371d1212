import type { Decorations, Tone } from '../../drawing/decorations.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { shareText } from '../../lib/figure-texts.ts';
import type { LimitRow } from './limit-rows.ts';

// What is hardly used says nothing worth a place on the sheet, and a sheet full of tags says nothing either.
const leastPerMillion = 50_000;
const leastTags = 3;
const mostTags = 12;

/** The fullest limit of each element, the first of them the bottleneck. */
const fullestOfEach = (rows: readonly LimitRow[]): readonly LimitRow[] => {
  const seen = new Set<string>();
  return rows.filter(({ ref, group, sharePerMillion }) => {
    const key = elementKey(ref);
    if (group === 'tunnels' || sharePerMillion === undefined || sharePerMillion === 0 || seen.has(key))
      return false;
    seen.add(key);
    return true;
  });
};

/** How load shows on the sheet: a tag at what is used most, the bottleneck's in full ink, and what was chosen lit. */
export const loadDecorations = (
  rows: readonly LimitRow[],
  bottleneck: string | undefined,
  chosen: readonly ElementRef[],
): Partial<Decorations> => {
  const tones: Record<string, readonly Tone[]> = {};
  for (const { collection, id } of chosen) tones[elementKey({ collection, id })] = ['lit'];
  return {
    tones,
    tags: fullestOfEach(rows)
      .filter(({ sharePerMillion }, at) => at < leastTags || sharePerMillion! >= leastPerMillion)
      .slice(0, mostTags)
      .map(({ key, ref, sharePerMillion }) => ({
        at: ref,
        text: key === bottleneck ? `first full, ${shareText(sharePerMillion!)}` : shareText(sharePerMillion!),
        strong: key === bottleneck,
        fillPerMillion: sharePerMillion!,
      })),
    loops: [],
    ghosts: [],
    overhangs: [],
    balloons: [],
  };
};
