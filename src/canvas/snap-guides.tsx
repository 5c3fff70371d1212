import { ViewportPortal } from '@xyflow/react';
import type { Guide } from '../workspace/operations/snap-move.ts';
import { useView } from './use-view.ts';

/** Blue-pencil lines through what a drag has come into line with. */
export function SnapGuides({ guides }: { readonly guides: readonly Guide[] }) {
  const { zoom } = useView();
  if (guides.length === 0) return null;
  return (
    <ViewportPortal>
      <svg className="snap-guides" width={1} height={1} aria-hidden="true">
        {guides.map(({ from, to }) => (
          <line
            key={`${from.x} ${from.y} ${to.x} ${to.y}`}
            x1={from.x}
            y1={from.y}
            x2={to.x}
            y2={to.y}
            stroke="var(--blue)"
            // One pixel on screen, from however far it is looked at.
            strokeWidth={1 / zoom}
            strokeDasharray={`${6 / zoom} ${3 / zoom}`}
          />
        ))}
      </svg>
    </ViewportPortal>
  );
}
