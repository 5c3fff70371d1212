import type { Decorations } from '../decorations.ts';
import type { JacketGeometry, Point, SheetGeometry } from '../geometry.ts';
import { pathAt, pathLength } from '../path-geometry.ts';
import { placeBalloons } from '../routing/balloons.ts';
import type { Shape } from '../shape.ts';
import { group } from '../shape.ts';
import { anchorFor } from './anchor-for.ts';
import { balloonMark, balloonScale } from './balloon-mark.ts';
import { cutBoxes } from './cuts.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import { ghostBoxes } from './ghost-part.ts';
import type { Look } from './look.ts';
import { overhangCallouts } from './overhang-part.ts';

type Balloon = Decorations['balloons'][number];

const besidePx = 22;
/** Along a jacket with a cut lane: before the gap, in it, after it. */
const cutShares = [0.16, 0.5, 0.84] as const;

const jacketOf = (geometry: SheetGeometry, { at }: Balloon): JacketGeometry | undefined =>
  at.collection === 'tunnels'
    ? geometry.jackets.find((jacket) => jacket.lanes.some((lane) => lane.tunnel === at.id))
    : at.collection === 'associations'
      ? geometry.jackets.find((jacket) => jacket.kind === 'jacket' && jacket.id === at.id)
      : undefined;

/** What each balloon points at. Several on one jacket are spread along it, several at one point set side by side. */
const anchorsOf = (
  geometry: SheetGeometry,
  balloons: readonly Balloon[],
  facts: DrawingFacts,
  look: Look,
): ReadonlyMap<Balloon, Point> => {
  const anchors = new Map<Balloon, Point>();
  const sharing = new Map<JacketGeometry, Balloon[]>();
  const at = new Map<string, number>();
  for (const balloon of [...balloons].sort((a, b) => a.number - b.number)) {
    const anchor = anchorFor(geometry, balloon.at, facts);
    if (anchor === undefined) continue;
    const jacket = jacketOf(geometry, balloon);
    if (jacket !== undefined) sharing.set(jacket, [...(sharing.get(jacket) ?? []), balloon]);
    const key = `${anchor.x} ${anchor.y}`;
    const before = at.get(key) ?? 0;
    at.set(key, before + 1);
    anchors.set(
      balloon,
      jacket === undefined && balloon.at.port === undefined
        ? { x: anchor.x - before * besidePx, y: anchor.y }
        : anchor,
    );
  }
  for (const [jacket, several] of sharing) {
    if (several.length < 2) continue;
    several.forEach((balloon, i) => {
      const lane = jacket.lanes.find(({ tunnel }) => tunnel === balloon.at.id);
      const path = lane?.path ?? jacket.path;
      // Where a lane of it is cut, the second points into the gap and the others keep off the flags beside it.
      const isCut = look.decorations.cuts.some((cut) => jacket.lanes.some((l) => l.tunnel === cut.tunnel));
      if (isCut && i === 1) return;
      const share = isCut && i < 3 ? cutShares[i]! : (i + 1) / (several.length + 1);
      const { x, y } = pathAt(path, pathLength(path) * share);
      anchors.set(balloon, { x, y });
    });
  }
  return anchors;
};

/** The balloons of all findings that have a place on the sheet, with words beside blocking ones. */
export const balloonParts = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] => {
  const { balloons } = look.decorations;
  if (balloons.length === 0) return [];
  const anchors = anchorsOf(geometry, balloons, facts, look);
  const wordsOf = ({ severity, words }: Balloon): string | undefined =>
    severity === 'blocking' && look.level !== 'far' ? words : undefined;
  const placed = placeBalloons(
    geometry,
    [...anchors].map(([balloon, at]) => {
      const words = wordsOf(balloon);
      return { number: balloon.number, at, ...(words === undefined ? {} : { words }) };
    }),
    {
      marks: [
        ...[...cutBoxes(geometry, look), ...ghostBoxes(geometry, look)].map((box) => ({ box })),
        ...overhangCallouts(geometry, look),
      ],
      scale: balloonScale[look.level],
    },
  );
  return placed.flatMap((place) => {
    const balloon = balloons.find(({ number }) => number === place.number);
    if (balloon === undefined) return [];
    const { words: _words, ...rest } = balloon;
    const words = wordsOf(balloon);
    return [
      group(
        balloonMark(
          {
            ...rest,
            ...(words === undefined ? {} : { words }),
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
