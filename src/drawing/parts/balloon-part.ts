import type { Decorations } from '../decorations.ts';
import type { JacketGeometry, Point, Rect, SheetGeometry } from '../geometry.ts';
import { pathAt, pathLength } from '../path-geometry.ts';
import { placeBalloons, type PlacedBalloon } from '../routing/balloons.ts';
import { contains, grown } from '../routing/rects.ts';
import type { Shape } from '../shape.ts';
import { group } from '../shape.ts';
import { anchorFor } from './anchor-for.ts';
import { balloonMark, balloonScale } from './balloon-mark.ts';
import { cutBoxes } from './cuts.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import { ghostBoxes } from './ghost-part.ts';
import type { Look } from './look.ts';
import { overhangAnchors, overhangCallouts } from './overhang-part.ts';
import { siteNameBoxes } from './site-part.ts';

type Balloon = Decorations['balloons'][number];

const besidePx = 22;
const fromMarkPx = 24;
/** Along a jacket with a cut lane: before the gap, and after it. */
const cutShares = [0.16, 0.84] as const;

const jacketOf = (geometry: SheetGeometry, { at }: Balloon): JacketGeometry | undefined =>
  at.collection === 'tunnels'
    ? geometry.jackets.find((jacket) => jacket.lanes.some((lane) => lane.tunnel === at.id))
    : at.collection === 'associations'
      ? geometry.jackets.find((jacket) => jacket.kind === 'jacket' && jacket.id === at.id)
      : undefined;

/** The middle of a cable's longest run that no mark covers; undefined where all are covered. */
const clearOfMarks = (geometry: SheetGeometry, link: string, marks: readonly Rect[]): Point | undefined => {
  const { polyline } = geometry.cables.find((cable) => cable.links.includes(link)) ?? { polyline: [] };
  return polyline
    .slice(1)
    .map((to, i) => ({ from: polyline[i]!, to }))
    .sort((a, b) => lengthOf(b) - lengthOf(a))
    .map(({ from, to }) => ({ x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 }))
    .find((point) => !marks.some((mark) => contains(grown(mark, fromMarkPx), point)));
};
const lengthOf = ({ from, to }: { readonly from: Point; readonly to: Point }): number =>
  Math.hypot(to.x - from.x, to.y - from.y);

/** What each balloon points at. Several on one jacket are spread along it, several at one point set side by side. */
const anchorsOf = (
  geometry: SheetGeometry,
  balloons: readonly Balloon[],
  facts: DrawingFacts,
  look: Look,
): ReadonlyMap<Balloon, Point> => {
  const anchors = new Map<Balloon, Point>();
  const ghosts = ghostBoxes(geometry, look);
  const beside = overhangAnchors(geometry, look);
  const inGap = new Set(look.decorations.cuts.map((cut) => cut.balloon));
  const sharing = new Map<JacketGeometry, Balloon[]>();
  const at = new Map<string, number>();
  for (const balloon of [...balloons].sort((a, b) => a.number - b.number)) {
    const atPipe = beside.get(balloon.number);
    const anchor =
      atPipe ??
      (balloon.at.collection === 'links' ? clearOfMarks(geometry, balloon.at.id, ghosts) : undefined) ??
      anchorFor(geometry, balloon.at, facts);
    if (anchor === undefined) continue;
    if (atPipe !== undefined || inGap.has(balloon.number)) {
      anchors.set(balloon, anchor);
      continue;
    }
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
    const isCut = look.decorations.cuts.some((cut) => jacket.lanes.some((l) => l.tunnel === cut.tunnel));
    if (several.length < 2 && !isCut) continue;
    several.forEach((balloon, i) => {
      const lane = jacket.lanes.find(({ tunnel }) => tunnel === balloon.at.id);
      const path = lane?.path ?? jacket.path;
      // Where a lane of it is cut, the others keep off the gap and the flags beside it.
      const share = isCut && i < 2 ? cutShares[i]! : (i + 1) / (several.length + 1);
      const { x, y } = pathAt(path, pathLength(path) * share);
      anchors.set(balloon, { x, y });
    });
  }
  return anchors;
};

/** Where the balloons of all findings stand that have a place on the sheet. */
export const placedBalloons = (
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): readonly PlacedBalloon[] => {
  const { balloons } = look.decorations;
  if (balloons.length === 0) return [];
  const anchors = anchorsOf(geometry, balloons, facts, look);
  const wordsOf = ({ severity, words }: Balloon): string | undefined =>
    severity === 'blocking' && look.level !== 'far' ? words : undefined;
  return placeBalloons(
    geometry,
    [...anchors].map(([balloon, at]) => {
      const words = wordsOf(balloon);
      return { number: balloon.number, at, ...(words === undefined ? {} : { words }) };
    }),
    {
      marks: [
        ...[...cutBoxes(geometry, look), ...ghostBoxes(geometry, look)].map((box) => ({ box })),
        ...overhangCallouts(geometry, look),
        ...siteNameBoxes(geometry, facts, look),
      ],
      scale: balloonScale[look.level],
    },
  );
};

/** The balloons of all findings that have a place on the sheet, with words beside blocking ones. */
export const balloonParts = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] =>
  placedBalloons(geometry, facts, look).flatMap((place) => {
    const balloon = look.decorations.balloons.find(({ number }) => number === place.number);
    if (balloon === undefined) return [];
    const { words: _words, ...rest } = balloon;
    const words = place.words?.text;
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
