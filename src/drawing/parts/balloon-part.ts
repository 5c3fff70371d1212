import type { SheetGeometry } from '../geometry.ts';
import { placeBalloons } from '../routing/balloons.ts';
import type { Shape } from '../shape.ts';
import { group } from '../shape.ts';
import { anchorFor } from './anchor-for.ts';
import { balloonMark } from './balloon-mark.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';

/** The balloons of all findings that have a place on the sheet, with words beside blocking ones. */
export const balloonParts = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] => {
  const balloons = look.decorations.balloons.flatMap((balloon) => {
    const at = anchorFor(geometry, balloon.at, facts);
    const { words, ...rest } = balloon;
    const worded = balloon.severity === 'blocking' && words !== undefined && look.level !== 'far';
    return at === undefined ? [] : [{ ...rest, anchorAt: at, ...(worded ? { words } : {}) }];
  });
  const placed = placeBalloons(
    geometry,
    balloons.map(({ number, anchorAt, words }) => ({
      number,
      at: anchorAt,
      ...(words === undefined ? {} : { words }),
    })),
  );
  return placed.flatMap((place) => {
    const balloon = balloons.find(({ number }) => number === place.number);
    if (balloon === undefined) return [];
    return [
      group(
        balloonMark(
          {
            ...balloon,
            at: place.centre,
            anchor: place.anchor,
            wordsSide: place.words?.anchor === 'end' ? 'left' : 'right',
          },
          look.level,
        ),
        { key: `balloon-${place.number}`, data: { ref: balloon.at, part: 'balloon' } },
      ),
    ];
  });
};
