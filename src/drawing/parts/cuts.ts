import type { JacketGeometry, LaneGeometry, Point, Rect, SheetGeometry } from '../geometry.ts';
import { longestRun, nearestAlong, pathAt, pathLength } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import { ferruleMark } from './ferrule.ts';
import type { Level } from './level-of-detail.ts';
import { drawnJacketWidth } from './level-of-detail.ts';
import type { Look } from './look.ts';
import { ferrule, ferruleWidth } from './sizes.ts';

const gapPx = 60;
const slantPx = 15;
const bareSpanPx = 30;

/** The gap of a severed lane, in a frame that travels along the lane. */
interface Cut {
  readonly middle: Point;
  /** Unit vectors along the lane's travel and to its right. */
  readonly along: Point;
  readonly right: Point;
  readonly halfGap: number;
  /** Length of what is left of the straight run on either side of the gap. */
  readonly stubPx: number;
  /** How far the opening reaches to the left and to the right of the lane. */
  readonly reachLeft: number;
  readonly reachRight: number;
}

/** Where a lane is shown severed: in the middle of its longest straight run, or of the lane where no run is long enough. */
const cutOf = (jacket: JacketGeometry, lane: LaneGeometry, level: Level): Cut | undefined => {
  const length = pathLength(lane.path);
  if (length < 12) return undefined;
  const run = longestRun(lane.path);
  const straight = run !== undefined && run.to - run.from > gapPx * 0.6;
  const room = straight ? run.to - run.from : length;
  const place = pathAt(lane.path, straight ? (run.from + run.to) / 2 : length / 2);
  const along = { x: Math.cos(place.angle), y: Math.sin(place.angle) };
  const right = { x: -along.y, y: along.x };
  const halfGap = Math.min(gapPx, Math.max(12, room - 24)) / 2;
  const stubPx = room / 2 - halfGap;
  if (jacket.kind === 'bare')
    return {
      middle: place,
      along,
      right,
      halfGap,
      stubPx,
      reachLeft: bareSpanPx / 2,
      reachRight: bareSpanPx / 2,
    };
  // Inside a jacket the opening ends half a lane away from its neighbours and runs out where there is none.
  const centre = pathAt(jacket.path, nearestAlong(jacket.path, place));
  const toCentre = (centre.x - place.x) * right.x + (centre.y - place.y) * right.y;
  const width = drawnJacketWidth(jacket.width, jacket.lanes.length, level) + 5;
  const half = jacket.pitch / 2;
  const outermost = ((jacket.lanes.length - 1) / 2) * jacket.pitch - 0.5;
  return {
    middle: place,
    along,
    right,
    halfGap,
    stubPx,
    reachLeft: -toCentre <= -outermost ? width / 2 - toCentre : half,
    reachRight: -toCentre >= outermost ? width / 2 + toCentre : half,
  };
};

const at = (cut: Cut, along: number, right: number): Point => ({
  x: cut.middle.x + cut.along.x * along + cut.right.x * right,
  y: cut.middle.y + cut.along.y * along + cut.right.y * right,
});
const spot = ({ x, y }: Point): string => `${x.toFixed(1)} ${y.toFixed(1)}`;

const isOverBand = (point: Point, geometry: SheetGeometry): boolean =>
  geometry.bands.some((band) =>
    [...band.limbs, ...(band.header === undefined ? [] : [band.header])].some(
      (rect) =>
        point.x >= rect.x &&
        point.x <= rect.x + rect.width &&
        point.y >= rect.y &&
        point.y <= rect.y + rect.height,
    ),
  );

const isCut = (look: Look, tunnel: string): boolean =>
  look.decorations.cuts.some((cut) => cut.tunnel === tunnel);

/** The opening in a severed lane's jacket or cord: the ground shows through, with a slanted red edge on each end. */
export const cutOpening = (
  jacket: JacketGeometry,
  lane: LaneGeometry,
  geometry: SheetGeometry,
  look: Look,
): Shape | undefined => {
  const cut = isCut(look, lane.tunnel) ? cutOf(jacket, lane, look.level) : undefined;
  if (cut === undefined) return undefined;
  const span = cut.reachLeft + cut.reachRight;
  const lean = Math.min(slantPx, span * 0.5) / 2;
  const edge = (side: 1 | -1): readonly [Point, Point] => [
    at(cut, side * cut.halfGap - lean, -cut.reachLeft),
    at(cut, side * cut.halfGap + lean, cut.reachRight),
  ];
  const [fromLeft, fromRight] = edge(-1);
  const [toLeft, toRight] = edge(1);
  const overshoot = (side: 1 | -1): string =>
    `M${spot(at(cut, side * cut.halfGap - lean * 1.15, -cut.reachLeft * 1.12))}L${spot(at(cut, side * cut.halfGap + lean * 1.15, cut.reachRight * 1.12))}`;
  const edges = overshoot(-1) + overshoot(1);
  return group(
    [
      shape('path', {
        d: `M${spot(fromLeft)}L${spot(fromRight)}L${spot(toRight)}L${spot(toLeft)}z`,
        fill: paint(isOverBand(cut.middle, geometry) ? 'band' : 'paper'),
      }),
      shape('path', { d: edges, fill: 'none', stroke: paint('paper'), strokeWidth: 7 }),
      shape('path', { d: edges, fill: 'none', stroke: paint('red'), strokeWidth: 4, strokeLinecap: 'round' }),
    ],
    {
      key: `cut-${lane.tunnel}`,
      data: { ref: { collection: 'tunnels', id: lane.tunnel }, part: 'cut' },
      attrs: { className: 'cut' },
    },
  );
};

/** Two strokes and a slash: these two are not the same. */
const unequal = (middle: Point, scale: number): Shape => {
  const d = 'M-9 -4.5H9M-9 4.5H9M-7 11L7 -11';
  return group(
    [
      shape('path', { d, fill: 'none', stroke: paint('paper'), strokeWidth: 7, strokeLinecap: 'round' }),
      shape('path', { d, fill: 'none', stroke: paint('red'), strokeWidth: 2.6, strokeLinecap: 'round' }),
    ],
    {
      key: 'unequal',
      attrs: { transform: `translate(${middle.x.toFixed(1)} ${middle.y.toFixed(1)}) scale(${scale})` },
    },
  );
};

/** A severed end's flag: which end, its number, and its box. */
interface Flag {
  readonly end: 'a' | 'b';
  readonly vni: number | undefined;
  readonly farVni: number | undefined;
  readonly rect: Rect;
  readonly capSide: 'left' | 'right';
}

const flagsOf = (cut: Cut, lane: LaneGeometry, look: Look): readonly Flag[] => {
  const vnis = look.decorations.cuts.find((c) => c.tunnel === lane.tunnel)?.vnis;
  if (vnis === undefined || look.level === 'plan' || look.level === 'far') return [];
  const upright = Math.abs(cut.along.y) > Math.abs(cut.along.x);
  // On a short level run the ferrules are near enough to be read; flags would cover what is left of the cord.
  if (!upright && cut.stubPx < ferrule.width + 40) return [];
  return (['a', 'b'] as const).map((end) => {
    const vni = vnis[end];
    const farVni = vnis[end === 'a' ? 'b' : 'a'];
    const side = end === 'a' ? -1 : 1;
    const width = ferruleWidth(String(vni ?? 0).length);
    const anchor = at(cut, side * (cut.halfGap + 16), 0);
    // On an upright lane the cap sits on the lane; on a level one the flag covers it up to the gap.
    const x = upright
      ? anchor.x - ferrule.cap / 2
      : side * cut.along.x > 0
        ? anchor.x - 2
        : anchor.x - width + 2;
    return {
      end,
      vni,
      farVni,
      rect: { x, y: anchor.y - ferrule.height / 2, width, height: ferrule.height },
      capSide: upright || side * cut.along.x > 0 ? 'left' : 'right',
    };
  });
};

const flags = (cut: Cut, lane: LaneGeometry, facts: DrawingFacts, look: Look): readonly Shape[] => {
  const tunnel = facts.tunnels[lane.tunnel];
  if (tunnel === undefined) return [];
  return flagsOf(cut, lane, look).map(({ end, vni, farVni, rect, capSide }) =>
    group(
      ferruleMark({
        rect,
        capSide,
        segments: tunnel.segments,
        level: 'near',
        fault: true,
        ...(vni === undefined ? {} : { vni }),
        ...(farVni === undefined ? {} : { farVni }),
      }),
      { key: `flag-${end}` },
    ),
  );
};

/** ≠ stands beside an upright lane of a jacket, and in the gap of any other. */
const unequalAt = (cut: Cut, jacket: JacketGeometry): Point =>
  Math.abs(cut.along.y) > Math.abs(cut.along.x) && jacket.kind === 'jacket'
    ? { x: cut.middle.x + 26, y: cut.middle.y }
    : cut.middle;

/** The room that flags and ≠ take, for what is placed after them. */
export const cutBoxes = (geometry: SheetGeometry, look: Look): readonly Rect[] =>
  geometry.jackets.flatMap((jacket) =>
    jacket.lanes.flatMap((lane) => {
      const cut = isCut(look, lane.tunnel) && !jacket.noWay ? cutOf(jacket, lane, look.level) : undefined;
      if (cut === undefined) return [];
      const { x, y } = unequalAt(cut, jacket);
      return [
        ...flagsOf(cut, lane, look).map(({ rect }) => rect),
        { x: x - 12, y: y - 12, width: 24, height: 24 },
      ];
    }),
  );

/** Flags with each end's VNI at the severed ends, and ≠ in the gap between them. */
export const cutMarks = (geometry: SheetGeometry, facts: DrawingFacts, look: Look): readonly Shape[] =>
  look.decorations.cuts.length === 0
    ? []
    : geometry.jackets.flatMap((jacket) =>
        jacket.noWay
          ? []
          : jacket.lanes
              .filter((lane) => isCut(look, lane.tunnel))
              .flatMap((lane) => {
                const cut = cutOf(jacket, lane, look.level);
                if (cut === undefined) return [];
                const differs = look.decorations.cuts.some(
                  (c) => c.tunnel === lane.tunnel && c.vnis !== undefined,
                );
                return [
                  group(
                    [
                      ...flags(cut, lane, facts, look),
                      differs &&
                        look.level !== 'far' &&
                        unequal(unequalAt(cut, jacket), look.level === 'plan' ? 1.4 : 1),
                    ],
                    {
                      key: `cut-${lane.tunnel}`,
                      data: { ref: { collection: 'tunnels', id: lane.tunnel }, part: 'cut' },
                    },
                  ),
                ];
              }),
      );
