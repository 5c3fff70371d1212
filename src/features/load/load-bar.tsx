import { useId } from 'react';
import type { LimitRow } from './limit-rows.ts';

// The limit stands at the same place in every bar, so that flanges line up in a column.
const limitPx = 132;
const mostOverPx = 44;
const widthPx = limitPx + mostOverPx + 6;
const heightPx = 20;
const barPx = 9;
const middle = heightPx / 2;

/**
 * How full a limit is, as a pipe: what is used fills it, solid where it is the row's own and striped where it is others'; what
 * is asked beyond the limit sticks out of the flange in hatched red. Without a limit the pipe has no end and nothing in it.
 */
export function LoadBar({
  row,
}: {
  readonly row: Pick<LimitRow, 'used' | 'own' | 'most' | 'sharePerMillion'>;
}) {
  const { used, own, sharePerMillion } = row;
  const hatch = useId();
  const known = sharePerMillion !== undefined;
  const share = (sharePerMillion ?? 0) / 1_000_000;
  const filledPx = Math.min(1, share) * limitPx;
  // What is there is seen to be there.
  const drawnPx = used === undefined || used === 0 ? 0 : Math.max(2, filledPx);
  const ownPx = own === undefined || used === undefined || used === 0 ? drawnPx : (own / used) * drawnPx;
  const overPx = Math.min(mostOverPx, Math.max(0, share - 1) * limitPx);
  return (
    <svg
      aria-hidden="true"
      width={widthPx}
      height={heightPx}
      viewBox={`0 0 ${widthPx} ${heightPx}`}
      className="block"
    >
      <defs>
        <pattern id={hatch} width="5" height="5" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <rect width="3" height="5" fill="var(--red)" />
        </pattern>
      </defs>
      <path
        d={`M1 ${middle - 7}H${limitPx}M1 ${middle + 7}H${limitPx}`}
        stroke={known ? 'var(--ink)' : 'var(--rule-strong)'}
        strokeWidth="1.2"
        strokeDasharray={known ? undefined : '4 4'}
      />
      <path
        d={`M${1 + ownPx} ${middle}H${1 + drawnPx}`}
        stroke="var(--ink-3)"
        strokeWidth={barPx}
        strokeDasharray="2 2"
      />
      {known && <rect x="1" y={middle - barPx / 2} width={ownPx} height={barPx} fill="var(--ink)" />}
      {overPx > 0 && (
        <rect x={limitPx} y={middle - barPx / 2} width={overPx} height={barPx} fill={`url(#${hatch})`} />
      )}
      {known && (
        <path
          d={`M${limitPx} 1V${heightPx - 1}`}
          stroke={overPx > 0 ? 'var(--red)' : 'var(--ink)'}
          strokeWidth="3.2"
        />
      )}
      {overPx >= mostOverPx && (
        // It goes on: the bar's end is left open.
        <path
          d={`M${limitPx + mostOverPx - 7} 3l5 7-5 7M${limitPx + mostOverPx - 1} 3l5 7-5 7`}
          fill="none"
          stroke="var(--red)"
          strokeWidth="1.6"
        />
      )}
    </svg>
  );
}
