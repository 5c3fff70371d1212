import type { ConnectionLineComponentProps } from '@xyflow/react';

/** What is being pulled from a pip or a ring, in blue pencil until it is plugged in. */
export function PullLine({
  fromX,
  fromY,
  toX,
  toY,
  fromNode,
  connectionStatus,
}: ConnectionLineComponentProps) {
  const isCord = fromNode.type === 'ring';
  return (
    <g className="pull-line" data-status={connectionStatus ?? 'open'}>
      <line
        x1={fromX}
        y1={fromY}
        x2={toX}
        y2={toY}
        strokeWidth={isCord ? 9 : 2.6}
        strokeDasharray={isCord ? '14 6' : '7 5'}
      />
      <circle cx={toX} cy={toY} r={5} />
    </g>
  );
}
