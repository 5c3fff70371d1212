import { elementKey } from '../decorations.ts';
import type { JacketGeometry, LaneGeometry, Path, SheetGeometry } from '../geometry.ts';
import { joinPaths, pathData, pathLength, reversePath } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { BaseToken } from '../theme/tokens.ts';
import type { ChangeTone } from './change-marks.ts';
import { changeToneOf, changeUnderlay } from './change-marks.ts';
import { cordStrokes, coreStrokes, failedStrokes, palettesOf } from './cord.ts';
import { cutOpening } from './cuts.ts';
import type { DrawingFacts, TunnelFacts } from './drawing-facts.ts';
import { drawnJacketWidth, measures } from './level-of-detail.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, hiddenOpacity, tonesOf } from './look.ts';
import { cuff as cuffSize } from './sizes.ts';
import { tunnelHidden } from './tunnel-look.ts';
import { untrustedHatch } from './untrusted-hatch.ts';

const stroke = (path: Path, colour: BaseToken, widthPx: number, key: string): Shape => ({
  ...shape('path', { d: pathData(path), fill: 'none', stroke: paint(colour), strokeWidth: widthPx }),
  key,
});

interface LaneLook {
  readonly lane: LaneGeometry;
  readonly tunnel: TunnelFacts;
  readonly marked: boolean;
  readonly lit: boolean;
  readonly dimmed: boolean;
  readonly failed: boolean;
  readonly hidden: boolean;
  readonly change: ChangeTone | undefined;
}

const laneLooks = (jacket: JacketGeometry, facts: DrawingFacts, look: Look): readonly LaneLook[] =>
  jacket.lanes.flatMap((lane) => {
    const tunnel = facts.tunnels[lane.tunnel];
    if (tunnel === undefined) return [];
    const tones = tonesOf(look, { collection: 'tunnels', id: lane.tunnel });
    return [
      {
        lane,
        tunnel,
        marked: tones.includes('selected') || tones.includes('hovered'),
        lit: tones.includes('lit'),
        dimmed: tones.includes('dimmed'),
        // What was removed is drawn as thin and broken as what failed.
        failed: tones.includes('failed') || tones.includes('removed'),
        hidden: tunnelHidden(tunnel, look),
        change: changeToneOf(tones),
      },
    ];
  });

/** What lies under a cord that is selected or lit. */
const underlay = (path: Path, { marked, lit, change }: LaneLook, casingPx: number): readonly Shape[] => {
  if (lit)
    return [
      stroke(path, 'lamp-line', casingPx + 10.8, 'lamp-edge'),
      stroke(path, 'lamp', casingPx + 8.2, 'lamp'),
    ];
  if (!marked) return changeUnderlay(pathData(path), change, casingPx);
  return [
    stroke(path, 'blue', casingPx + 12.2, 'pencil-edge'),
    stroke(path, 'blue-soft', casingPx + 9.2, 'pencil'),
  ];
};

const opacityOf = (lane: LaneLook): number | undefined =>
  lane.hidden ? hiddenOpacity : lane.dimmed ? dimmedOpacity : undefined;

const opacityAttrs = (opacity: number | undefined): { readonly attrs?: { readonly opacity: number } } =>
  opacity === undefined ? {} : { attrs: { opacity } };

const laneGroup = (children: readonly Shape[], lane: LaneLook, part: string): Shape =>
  group(children, {
    key: `${part}-${lane.lane.tunnel}`,
    data: { ref: { collection: 'tunnels', id: lane.lane.tunnel }, part },
    ...opacityAttrs(opacityOf(lane)),
  });

/** Ferrule to cuff at both ends, as bare cord. */
const tails = (lane: LaneLook, look: Look): readonly Shape[] => {
  const { casingPx, corePx } = measures[look.level];
  return (['a', 'b'] as const).flatMap((end) => {
    const path = lane.lane.tails[end];
    if (path.length < 2) return [];
    const strokes = lane.failed
      ? [failedStrokes(path, palettesOf(lane.tunnel.segments))]
      : [
          ...underlay(path, lane, casingPx - 3),
          ...cordStrokes(path, palettesOf(lane.tunnel.segments), casingPx, corePx),
        ];
    return [laneGroup(strokes, lane, `tail-${end}`)];
  });
};

const tracer = (lane: LaneLook, jacket: JacketGeometry, look: Look): Shape => {
  const { path } = lane.lane;
  const palettes = palettesOf(lane.tunnel.segments);
  // On a crowded transport lanes lie closer: the tracer keeps half of its lane.
  const widthPx = Math.min(measures[look.level].tracerPx, jacket.pitch * 0.84);
  const behind = Math.min(13, jacket.pitch - 1);
  if (lane.failed) return laneGroup([failedStrokes(path, palettes, true)], lane, 'tracer');
  return laneGroup(
    [
      ...(lane.lit
        ? [stroke(path, 'lamp-line', behind + 1.6, 'lamp-edge'), stroke(path, 'lamp', behind - 0.8, 'lamp')]
        : lane.marked
          ? [stroke(path, 'blue-soft', behind, 'pencil')]
          : []),
      ...coreStrokes(path, palettes, widthPx, true),
    ],
    lane,
    'tracer',
  );
};

const cuffs = (jacket: JacketGeometry, look: Look): readonly Shape[] =>
  look.level === 'far'
    ? []
    : jacket.cuffs.map(({ end, rect, side }) => {
        const upright = side === 'left' || side === 'right';
        const [x, y] = [rect.x + rect.width / 2, rect.y + rect.height / 2];
        const inset = 3;
        return group(
          [
            shape('rect', {
              ...rect,
              rx: cuffSize.radius,
              fill: paint('brass'),
              stroke: paint('ink'),
              strokeWidth: 1.5,
            }),
            shape('path', {
              d: upright
                ? `M${x} ${rect.y + inset}V${rect.y + rect.height - inset}`
                : `M${rect.x + inset} ${y}H${rect.x + rect.width - inset}`,
              stroke: paint('brass-deep'),
              strokeWidth: 1,
            }),
          ],
          { key: `cuff-${end}` },
        );
      });

/** Where a jacket or cord passes over another, a rim in the colour beneath parts the two. */
const crossingHalos = (jacket: JacketGeometry, widthPx: number): readonly Shape[] =>
  jacket.crossings.map((crossing, i) => stroke(crossing.path, crossing.ground, widthPx + 9, `halo-${i}`));

const drawnWidth = (jacket: JacketGeometry, { jackets }: SheetGeometry, { level }: Look): number =>
  drawnJacketWidth(jacket.width, jacket.lanes.length, level, jackets.length);

const wholeJacket = (
  jacket: JacketGeometry,
  lanes: readonly LaneLook[],
  geometry: SheetGeometry,
  look: Look,
): readonly Shape[] => {
  const ref = { collection: 'associations' as const, id: jacket.id };
  const tones = tonesOf(look, ref);
  const width = drawnWidth(jacket, geometry, look);
  const change = changeToneOf(tones);
  const failed =
    tones.includes('failed') ||
    change === 'removed' ||
    (lanes.length > 0 && lanes.every((lane) => lane.failed));
  const quiet = lanes.every((lane) => lane.dimmed || lane.hidden);
  const hidden = lanes.length > 0 && lanes.every((lane) => lane.hidden);
  const marked = tones.includes('selected') || tones.includes('hovered');
  const lit = tones.includes('lit');
  const opacity = hidden ? hiddenOpacity : quiet || tones.includes('dimmed') ? dimmedOpacity : undefined;
  const body = group(
    [
      marked && stroke(jacket.path, 'blue', width + 12.2, 'pencil-edge'),
      marked && stroke(jacket.path, 'blue-soft', width + 9.2, 'pencil'),
      lit && stroke(jacket.path, 'lamp-line', width + 14.6, 'lamp-edge'),
      lit && stroke(jacket.path, 'lamp', width + 12, 'lamp'),
      ...(marked || lit ? [] : changeUnderlay(pathData(jacket.path), change, width)),
      ...(failed
        ? []
        : [
            stroke(
              jacket.path,
              tones.includes('fault') ? 'red' : 'jacket-edge',
              width + (tones.includes('fault') ? 4.4 : 2.4),
              'edge',
            ),
            stroke(jacket.path, 'jacket', width, 'body'),
          ]),
      ...lanes.filter((lane) => lane.dimmed && quiet).map((lane) => undim(tracer(lane, jacket, look))),
      // Faded together with the jacket, so that it doesn't show through its own cuffs.
      quiet && group(cuffs(jacket, look), { key: 'cuffs' }),
    ],
    {
      key: 'jacket',
      data: { ref, part: 'jacket' },
      ...opacityAttrs(opacity),
    },
  );
  return [
    body,
    ...lanes.filter((lane) => !(lane.dimmed && quiet)).map((lane) => tracer(lane, jacket, look)),
    ...lanes
      .map((lane) => cutOpening(jacket, lane.lane, geometry, look))
      .filter((part) => part !== undefined),
    ...(quiet ? [] : [group(cuffs(jacket, look), { key: 'cuffs' })]),
  ];
};

/** A dimmed tracer inside a dimmed jacket: the jacket's own opacity is enough. */
const undim = (part: Shape): Shape => ({ ...part, attrs: {} });

const bareCord = (
  jacket: JacketGeometry,
  lane: LaneLook,
  geometry: SheetGeometry,
  look: Look,
): readonly Shape[] => {
  const { casingPx, corePx } = measures[look.level];
  const path = joinPaths(lane.lane.tails.a, lane.lane.path, reversePath(lane.lane.tails.b));
  const palettes = palettesOf(lane.tunnel.segments);
  const strokes = lane.failed
    ? [failedStrokes(path, palettes)]
    : [
        ...underlay(path, lane, casingPx),
        ...jacket.overBand.flatMap((piece, i) => untrustedHatch(piece, look.level, i)),
        ...cordStrokes(path, palettes, casingPx, corePx),
      ];
  const opening = cutOpening(jacket, lane.lane, geometry, look);
  return [laneGroup(strokes, lane, 'cord'), ...(opening === undefined ? [] : [opening])];
};

/** Nothing was found that leads from one mouth to the other. */
const noWayLeader = (jacket: JacketGeometry): readonly Shape[] => {
  const start = jacket.polyline[0];
  const end = jacket.polyline.at(-1);
  if (start === undefined || end === undefined) return [];
  const [x, y] = [(start.x + end.x) / 2, (start.y + end.y) / 2];
  return [
    {
      ...shape('line', {
        x1: start.x,
        y1: start.y,
        x2: end.x,
        y2: end.y,
        stroke: paint('blue'),
        strokeWidth: 2.6,
        strokeDasharray: '7 5',
      }),
      key: 'leader',
    },
    {
      ...shape(
        'text',
        {
          x,
          y: y - 8,
          fontSize: 14,
          fontWeight: 600,
          textAnchor: 'middle',
          fill: paint('blue'),
          stroke: paint('paper'),
          strokeWidth: 4,
          paintOrder: 'stroke',
        },
        ['no way through'],
      ),
      key: 'words',
    },
  ];
};

/** An association with its tunnels as lanes, or one bare tunnel: tails, jacket, tracers, cuffs, hatch and what stands out. */
export const jacketPart = (
  jacket: JacketGeometry,
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): Shape => {
  const bare = jacket.kind === 'bare';
  const ref = { collection: bare ? ('tunnels' as const) : ('associations' as const), id: jacket.id };
  const lanes = laneLooks(jacket, facts, look);
  const options = { key: `${elementKey(ref)}-${jacket.part ?? 0}`, data: { ref } };
  if (jacket.noWay || pathLength(jacket.path) === 0)
    return group([...lanes.flatMap((lane) => tails(lane, look)), ...noWayLeader(jacket)], options);
  const halos = crossingHalos(
    jacket,
    bare ? measures[look.level].casingPx : drawnWidth(jacket, geometry, look),
  );
  return group(
    bare
      ? [...halos, ...lanes.flatMap((lane) => bareCord(jacket, lane, geometry, look))]
      : [
          ...halos,
          ...lanes.flatMap((lane) => tails(lane, look)),
          ...wholeJacket(jacket, lanes, geometry, look),
        ],
    options,
  );
};
