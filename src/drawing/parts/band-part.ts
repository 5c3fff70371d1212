import { elementKey } from '../decorations.ts';
import type { BandGeometry, Point, SheetFrame } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import { bandText } from './band-text.ts';
import type { DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, tonesOf } from './look.ts';
import type { OutlineEdge } from './rectilinear-outline.ts';
import { insetLoop, loopEdges, rectilinearOutline } from './rectilinear-outline.ts';

const tickEveryPx = 46;
const tickPx = 7;
const tickStepPx = 6;
const innerLinePx = 5;

/** A band's end that lies all along the frame or the furniture needs no line of its own; its long sides are drawn everywhere. */
const isHiddenEnd = (
  { from, to }: OutlineEdge,
  orientation: BandGeometry['orientation'],
  { frame, titleBlock, legend }: SheetFrame,
): boolean => {
  const level = from.y === to.y;
  if (level !== (orientation === 'vertical')) return false;
  const [low, high] = level
    ? [Math.min(from.x, to.x), Math.max(from.x, to.x)]
    : [Math.min(from.y, to.y), Math.max(from.y, to.y)];
  return [frame, titleBlock, legend].some((rect) => {
    const [start, size] = level ? [rect.x, rect.width] : [rect.y, rect.height];
    const sides = level ? [rect.y, rect.y + rect.height] : [rect.x, rect.x + rect.width];
    return (
      low >= start - 1 &&
      high <= start + size + 1 &&
      sides.some((side) => Math.abs(side - (level ? from.y : from.x)) < 1)
    );
  });
};

const edgePath = (edges: readonly OutlineEdge[]): string =>
  edges.map(({ from, to }) => `M${from.x} ${from.y}L${to.x} ${to.y}`).join('');

/** Three strokes at 45° every 46 px along the inside of an edge; all of them rise to the right. */
const ticks = (edges: readonly OutlineEdge[]): string =>
  edges
    .map(({ from, to }) => {
      const length = Math.hypot(to.x - from.x, to.y - from.y);
      const along = { x: (to.x - from.x) / length, y: (to.y - from.y) / length };
      const into = { x: -along.y, y: along.x };
      // A stroke rising to the right either starts on the edge or ends there.
      const starts = into.x - into.y > 0 ? 1 : -1;
      const strokes: string[] = [];
      for (let middle = tickEveryPx / 2; middle < length - tickPx - tickStepPx; middle += tickEveryPx)
        for (const step of [-1, 0, 1]) {
          const x = from.x + along.x * (middle + step * tickStepPx);
          const y = from.y + along.y * (middle + step * tickStepPx);
          strokes.push(`M${x} ${y}l${starts * tickPx} ${-starts * tickPx}`);
        }
      return strokes.join('');
    })
    .join('');

/** A transport: ground, edges that say whether it is trusted, and its words where routing found room. */
export const bandPart = (band: BandGeometry, sheet: SheetFrame, facts: DrawingFacts, look: Look): Shape => {
  const ref = { collection: 'transports', id: band.id } as const;
  const tones = tonesOf(look, ref);
  const words = facts.transports[band.id];
  const rects = [...band.limbs, ...(band.header === undefined ? [] : [band.header])];
  const loops = rectilinearOutline(rects);
  const trusted = words?.trusted ?? false;
  // Each edge with its twin on the inner line, which runs through to a hidden end.
  const sides = loops.flatMap((loop) => {
    const outer = loopEdges(loop);
    const inset = loopEdges(insetLoop(loop, innerLinePx));
    const hidden = (i: number): boolean => {
      const edge = outer[(i + outer.length) % outer.length];
      return edge !== undefined && isHiddenEnd(edge, band.orientation, sheet);
    };
    return outer.flatMap((edge, i) => {
      const twin = inset[i];
      if (twin === undefined || hidden(i)) return [];
      const level = edge.from.y === edge.to.y;
      const reach = (inner: Point, end: Point): Point =>
        level ? { x: end.x, y: inner.y } : { x: inner.x, y: end.y };
      return [
        {
          edge,
          twin: {
            from: hidden(i - 1) ? reach(twin.from, edge.from) : twin.from,
            to: hidden((i + 1) % outer.length) ? reach(twin.to, edge.to) : twin.to,
          },
        },
      ];
    });
  });
  const edges = sides.map((side) => side.edge);
  const failed = tones.includes('failed');
  const marked = tones.includes('selected') || tones.includes('hovered');
  const far = look.level === 'far';
  const edgeColour = failed || tones.includes('fault') ? 'red' : 'band-edge';
  return group(
    [
      marked && {
        ...shape('path', {
          d: edgePath(edges),
          fill: 'none',
          stroke: paint('blue-soft'),
          strokeWidth: 9,
        }),
        key: 'pencil',
      },
      {
        ...shape('path', {
          d: loops.map((loop) => `M${loop.map(({ x, y }) => `${x} ${y}`).join('L')}z`).join(''),
          fill: paint(marked ? 'blue-wash' : tones.includes('lit') ? 'lamp' : 'band'),
          ...(tones.includes('lit') && !marked ? { fillOpacity: 0.45 } : {}),
        }),
        key: 'ground',
      },
      {
        ...shape('path', {
          d: edgePath(edges),
          fill: 'none',
          stroke: paint(marked ? 'blue' : edgeColour),
          strokeWidth: far ? 4 : 2.2,
          ...(trusted && !failed ? {} : { strokeDasharray: far ? '26 12' : '16 7' }),
        }),
        key: 'edge',
      },
      !far &&
        (trusted
          ? {
              ...shape('path', {
                d: edgePath(sides.map((side) => side.twin)),
                fill: 'none',
                stroke: paint(edgeColour),
                strokeWidth: 1,
              }),
              key: 'inner',
            }
          : {
              ...shape('path', {
                d: ticks(edges),
                fill: 'none',
                stroke: paint('band-tick'),
                strokeWidth: 1.6,
              }),
              key: 'ticks',
            }),
      words !== undefined && bandText(band, words, look.level, tones.includes('dimmed')),
    ],
    {
      key: elementKey(ref),
      data: { ref, part: 'band' },
      ...(tones.includes('dimmed') || tones.includes('removed') ? { attrs: { opacity: dimmedOpacity } } : {}),
    },
  );
};
