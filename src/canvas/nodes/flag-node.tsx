import type { NodeProps } from '@xyflow/react';
import { memo, useMemo } from 'react';
import { Shapes } from '../../components/shapes.tsx';
import { flagPart } from '../../drawing/parts/flag-part.ts';
import type { OnwardNode } from '../design-to-flow.ts';
import { useDrawing } from '../drawing-context.ts';

/** A flag at the edge of the sheet; the node's name says where it leads. */
export const FlagNode = memo(function FlagNode({ data }: NodeProps<OnwardNode>) {
  const { look } = useDrawing();
  const { flag } = data;
  const shapes = useMemo(() => [flagPart(flag, look)], [flag, look]);
  return (
    <svg className="part" width={1} height={1} aria-hidden="true">
      <g transform={`translate(${-flag.rect.x} ${-flag.rect.y})`}>
        <Shapes shapes={shapes} />
      </g>
    </svg>
  );
});
