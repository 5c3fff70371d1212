import type { Path } from '../../drawing/geometry.ts';
import type { CordSegment } from '../../drawing/parts/drawing-facts.ts';
import { cordStrokes, palettesOf } from '../../drawing/parts/cord.ts';
import { ferrulePart } from '../../drawing/parts/ferrule.ts';
import { ferrule, ferruleWidth } from '../../drawing/parts/sizes.ts';
import type { Shape } from '../../drawing/shape.ts';
import { shape } from '../../drawing/shape.ts';
import { paint } from '../../drawing/theme/paint.ts';
import { Shapes } from '../../components/shapes.tsx';

const size = { width: 274, height: 26 } as const;
const middle = size.height / 2;
// A severed cord: how much of it is missing, and how far its ends lean.
const gapPx = 22;
const leanPx = 8;

const line = (from: number, to: number): Path => [
  { kind: 'move', to: { x: from, y: middle } },
  { kind: 'line', to: { x: to, y: middle } },
];

const severedEnd = (x: number): Shape =>
  shape('path', {
    d: `M${x - leanPx / 2} ${middle + 12}L${x + leanPx / 2} ${middle - 12}`,
    stroke: paint('red'),
    strokeWidth: 3,
    fill: 'none',
  });

interface TunnelCordProps {
  readonly segments: readonly CordSegment[];
  readonly vni: { readonly a?: number; readonly b?: number };
}

/** A tunnel as its cord between its ferrules; cut where the VNIs differ. */
export function TunnelCord({ segments, vni }: TunnelCordProps) {
  const cut = vni.a !== undefined && vni.b !== undefined && vni.a !== vni.b;
  const widthOf = (number: number | undefined): number => ferruleWidth(String(number ?? '–').length);
  const [widthA, widthB] = [widthOf(vni.a), widthOf(vni.b)];
  const [from, to] = [1 + widthA, size.width - 1 - widthB];
  const centre = (from + to) / 2;
  const runs = cut ? [line(from, centre - gapPx / 2), line(centre + gapPx / 2, to)] : [line(from, to)];
  const end = (
    x: number,
    width: number,
    own: number | undefined,
    far: number | undefined,
    side: 'left' | 'right',
  ) =>
    ferrulePart({
      rect: { x, y: middle - ferrule.height / 2, width, height: ferrule.height },
      capSide: side,
      segments,
      level: 'near',
      fault: cut,
      ...(own === undefined ? {} : { vni: own }),
      ...(cut && far !== undefined ? { farVni: far } : {}),
    });
  const said = (number: number | undefined): string => (number === undefined ? 'not stated' : String(number));
  return (
    <svg
      role="img"
      aria-label={
        cut
          ? `The cord is cut: VNI ${vni.a} at one end, ${vni.b} at the other`
          : `A cord with VNI ${said(vni.a)} and ${said(vni.b)}`
      }
      viewBox={`0 0 ${size.width} ${size.height}`}
      width={size.width}
      height={size.height}
      className="max-w-full"
    >
      {runs.map((run, at) => (
        <Shapes key={at} shapes={cordStrokes(run, palettesOf(segments))} />
      ))}
      {cut && <Shapes shapes={[severedEnd(centre - gapPx / 2), severedEnd(centre + gapPx / 2)]} />}
      <Shapes
        shapes={[
          end(1, widthA, vni.a, vni.b, 'right'),
          end(size.width - 1 - widthB, widthB, vni.b, vni.a, 'left'),
        ]}
      />
    </svg>
  );
}
