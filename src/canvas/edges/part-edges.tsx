import type { EdgeProps } from '@xyflow/react';
import { memo, useMemo } from 'react';
import { cablePart } from '../../drawing/parts/cable-part.ts';
import { jacketPart } from '../../drawing/parts/jacket-part.ts';
import { pathData } from '../../drawing/path-geometry.ts';
import type { CableEdge, CordEdge, FlowEdge, JacketEdge } from '../design-to-flow.ts';
import { useDrawing } from '../drawing-context.ts';
import { Shapes } from '../../components/shapes.tsx';

/** What the pointer meets: wider than what is drawn, so that a thin cable can be picked. */
function Reach({ d, widthPx }: { readonly d: string; readonly widthPx: number }) {
  return <path d={d} className="reach" fill="none" stroke="transparent" strokeWidth={widthPx} />;
}

const cableReachPx = 14;
const cordReachPx = 16;

const Cable = memo(function Cable({ data }: EdgeProps<CableEdge>) {
  const { look } = useDrawing();
  const cable = data!.cable;
  const shapes = useMemo(() => [cablePart(cable, look)], [cable, look]);
  return (
    <>
      <Shapes shapes={shapes} />
      <Reach d={pathData(cable.path)} widthPx={cableReachPx} />
    </>
  );
});

const Jacket = memo(function Jacket({ data }: EdgeProps<JacketEdge>) {
  const { facts, look, geometry } = useDrawing();
  const jacket = data!.jacket;
  const shapes = useMemo(() => [jacketPart(jacket, geometry, facts, look)], [jacket, geometry, facts, look]);
  return (
    <>
      <Reach d={pathData(jacket.path)} widthPx={jacket.width} />
      <Shapes shapes={shapes} />
    </>
  );
});

const Cord = memo(function Cord({ data }: EdgeProps<CordEdge>) {
  const { lane } = data!;
  return (
    <>
      {[lane.tails.a, lane.path, lane.tails.b].map((path, i) => (
        <Reach key={i} d={pathData(path)} widthPx={cordReachPx} />
      ))}
    </>
  );
});

export const edgeTypes = { cable: Cable, jacket: Jacket, cord: Cord } satisfies Record<
  FlowEdge['type'] & string,
  unknown
>;
