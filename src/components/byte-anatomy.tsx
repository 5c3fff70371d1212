import type { ReactNode } from 'react';
import { paint } from '../drawing/theme/paint.ts';
import {
  HEAD_SIZE_PX,
  layOutAnatomy,
  type AnatomyGeometry,
  type PlacedRow,
} from '../lib/anatomy-geometry.ts';
import { measureOf, sentBytesOf, type AnatomyRow } from '../lib/byte-blocks.ts';
import { useWidth } from '../lib/use-width.ts';
import { ByteBarPicture } from './byte-bar-picture.tsx';
import { ByteNames } from './byte-names.tsx';

/** The packet as bytes: one column for what the host sent, headers growing to its left, trailers to its right. */
export function ByteAnatomy({
  rows,
  summary,
}: {
  readonly rows: readonly AnatomyRow[];
  /** What the picture says, for those who don't see it; the figures are in the table beside it. */
  readonly summary: string;
}) {
  const { ref, widthPx } = useWidth<HTMLDivElement>(900);
  const geometry = layOutAnatomy(rows, widthPx);
  return (
    <div ref={ref} className="min-w-0">
      <svg
        role="img"
        aria-label={summary}
        width={geometry.width}
        height={geometry.height}
        viewBox={`0 0 ${geometry.width} ${geometry.height}`}
        className="block"
      >
        {geometry.guides.map((x, at) => (
          <path key={at} d={`M${x} ${geometry.guidesFromY}V${geometry.height - 18}`} stroke={paint('rule')} />
        ))}
        <ByteNames
          names={geometry.names}
          packetSpan={geometry.packetSpan}
          sent={{ words: 'IP packet as sent', bytes: rows[0] === undefined ? 0 : sentBytesOf(rows[0]) }}
        />
        {geometry.rows.map((placed) => (
          <Row key={placed.row.title} placed={placed} geometry={geometry} />
        ))}
      </svg>
    </div>
  );
}

function Row({ placed, geometry }: { readonly placed: PlacedRow; readonly geometry: AnatomyGeometry }) {
  const { row, pipe, barY, headY, measureY } = placed;
  const over = (pipe?.overBytes ?? 0) > 0;
  return (
    <g>
      <text x={0} y={headY} fontSize={HEAD_SIZE_PX} className="fill-ink">
        <Halo>
          <tspan fontWeight={600}>{row.title}</tspan>
          <tspan dx={8} className="fill-ink-2">
            {row.note}
          </tspan>
        </Halo>
      </text>
      <text
        x={geometry.narrow ? 0 : geometry.width}
        y={measureY}
        textAnchor={geometry.narrow ? 'start' : 'end'}
        fontSize={HEAD_SIZE_PX}
        fontWeight={600}
        className={over ? 'fill-red' : 'fill-ink'}
      >
        {measureOf(row)}
      </text>
      <ByteBarPicture placed={placed} y={barY} palette="a" />
    </g>
  );
}

/** Keeps the thin lines through all rows away from words. */
const Halo = ({ children }: { readonly children: ReactNode }) => (
  <tspan stroke={paint('paper')} strokeWidth={5} strokeLinejoin="round" paintOrder="stroke">
    {children}
  </tspan>
);
