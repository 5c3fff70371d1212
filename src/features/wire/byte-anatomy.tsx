import { useId, type ReactNode } from 'react';
import { textWidth } from '../../drawing/text-width.ts';
import { paint, segmentPaint } from '../../drawing/theme/paint.ts';
import {
  BAR_PX,
  HEAD_SIZE_PX,
  layOutAnatomy,
  NAME_SIZE_PX,
  WALL_OFF_PX,
  type AnatomyGeometry,
  type PlacedPipe,
  type PlacedRow,
} from './anatomy-geometry.ts';
import type { AnatomyRow, ByteLook } from './anatomy-rows.ts';
import { useWidth } from './use-width.ts';

const segment = segmentPaint('a');

const fills: Readonly<Record<ByteLook, string>> = {
  plain: paint('plate'),
  tag: paint('brass'),
  access: paint('band'),
  vxlan: `color-mix(in srgb, ${segment.core} 24%, ${paint('plate')})`,
  esp: paint('jacket'),
  packet: segment.core,
};

/** What is written on a block. The jacket is dark in both themes. */
const textClasses: Readonly<Record<ByteLook, string>> = {
  plain: 'fill-ink',
  tag: 'fill-[var(--on-brass)]',
  access: 'fill-ink',
  vxlan: 'fill-ink',
  esp: 'fill-paper in-data-[theme=slate]:fill-ink',
  packet: 'fill-[var(--seg-a-on)]',
};

const numberSizePx = 11.5;

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
  const hatchId = useId();
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
        <pattern
          id={hatchId}
          width={9}
          height={9}
          patternUnits="userSpaceOnUse"
          patternTransform="rotate(45)"
        >
          <rect width={4.5} height={9} fill={paint('red')} />
        </pattern>
        <Names geometry={geometry} sentBytes={sentBytesOf(rows)} />
        {geometry.rows.map((placed) => (
          <Row key={placed.row.title} placed={placed} geometry={geometry} hatch={`url(#${hatchId})`} />
        ))}
      </svg>
    </div>
  );
}

function sentBytesOf([first]: readonly AnatomyRow[]): number {
  const header = first?.before.find(({ id }) => id === 'inner-ip')?.bytes ?? 0;
  return header + (first?.payloadBytes ?? 0);
}

function Names({ geometry, sentBytes }: { readonly geometry: AnatomyGeometry; readonly sentBytes: number }) {
  const { names, guides, guidesFromY, packetSpan, height } = geometry;
  const { x, end, y } = packetSpan;
  const middle = (x + end) / 2;
  const words = end - x > 150 ? 'IP packet as sent' : 'As sent';
  return (
    <>
      {guides.map((guideX, at) => (
        <path key={at} d={`M${guideX} ${guidesFromY}V${height - 18}`} stroke={paint('rule')} />
      ))}
      <g fontSize={NAME_SIZE_PX} fontWeight={500} textAnchor="middle">
        {names.map((name, at) => (
          <text key={at} x={name.x} y={name.y} className="fill-ink-2">
            {name.text}
          </text>
        ))}
      </g>
      <g fontSize={NAME_SIZE_PX} fontWeight={600} textAnchor="middle" className="fill-ink">
        <path d={`M${x} ${y}H${end}`} stroke={paint('ink')} strokeWidth={1.2} />
        <path d={`M${x} ${y}l8 -3.2v6.4zM${end} ${y}l-8 -3.2v6.4z`} />
        <text x={middle} y={y - 7}>
          {end - x > 90 ? `${words}, ${sentBytes} B` : `${sentBytes} B`}
        </text>
      </g>
    </>
  );
}

function Row({
  placed,
  geometry,
  hatch,
}: {
  readonly placed: PlacedRow;
  readonly geometry: AnatomyGeometry;
  readonly hatch: string;
}) {
  const { row, blocks, payload, pipe, barY, headY, measureY } = placed;
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
      <g stroke={paint('jacket-edge')} strokeWidth={1.2}>
        {blocks.map(({ block, x, width }) => (
          <rect key={block.id} x={x} y={barY} width={width} height={BAR_PX} fill={fills[block.look]} />
        ))}
        <rect x={payload.x} y={barY} width={payload.width} height={BAR_PX} fill={fills.packet} />
      </g>
      {payload.breakX !== undefined && <LongBreak x={payload.breakX} y={barY} />}
      {pipe !== undefined && <Pipe pipe={pipe} barY={barY} hatch={hatch} />}
      <g fontSize={numberSizePx} fontWeight={600} textAnchor="middle">
        {blocks.map(({ block, x, width }) => (
          <BlockNumber key={block.id} bytes={block.bytes} x={x} y={barY} width={width} look={block.look} />
        ))}
        <BlockNumber
          bytes={row.payloadBytes}
          x={payload.breakX ?? payload.x}
          y={barY}
          width={(over ? (pipe?.end ?? 0) : payload.x + payload.width) - (payload.breakX ?? payload.x)}
          look="packet"
        />
      </g>
      {pipe?.overEnd !== undefined && (
        <OverLabel
          text={`${pipe.overBytes} B over`}
          from={pipe.end}
          to={payload.x + payload.width}
          y={barY + 3}
        />
      )}
    </g>
  );
}

/** Keeps the thin lines through all rows away from words. */
const Halo = ({ children }: { readonly children: ReactNode }) => (
  <tspan stroke={paint('paper')} strokeWidth={5} strokeLinejoin="round" paintOrder="stroke">
    {children}
  </tspan>
);

function measureOf({ ipPacketBytes, pipeBytes }: AnatomyRow): string {
  return pipeBytes === undefined ? `${ipPacketBytes} B` : `${ipPacketBytes} B in a ${pipeBytes} B pipe`;
}

function BlockNumber({
  bytes,
  x,
  y,
  width,
  look,
}: {
  readonly bytes: number;
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly look: ByteLook;
}) {
  const text = String(bytes);
  if (textWidth(text, numberSizePx, 600) > width - 1) return null;
  return (
    <text
      x={x + width / 2}
      y={y + BAR_PX / 2 + 4}
      // Numbers of what hangs over stand on its hatching.
      stroke={fills[look]}
      strokeWidth={3}
      strokeLinejoin="round"
      paintOrder="stroke"
      className={textClasses[look]}
    >
      {text}
    </text>
  );
}

/** Two parallel jagged lines across the bar: here it is longer than drawn. */
const LongBreak = ({ x, y }: { readonly x: number; readonly y: number }) => (
  <path
    d={`M${x - 4} ${y - 2}l6 9l-5 5l6 16h7l-6 -16l5 -5l-6 -9z`}
    fill={paint('paper')}
    stroke={paint('jacket-edge')}
    strokeWidth={1.2}
  />
);

function Pipe({
  pipe,
  barY,
  hatch,
}: {
  readonly pipe: PlacedPipe;
  readonly barY: number;
  readonly hatch: string;
}) {
  const top = barY - WALL_OFF_PX;
  const bottom = barY + BAR_PX + WALL_OFF_PX;
  const { x, end, overEnd } = pipe;
  return (
    <>
      {overEnd !== undefined && (
        <rect
          x={end}
          y={barY}
          width={overEnd - end}
          height={BAR_PX}
          fill={hatch}
          stroke={paint('red')}
          strokeWidth={2}
        />
      )}
      <path d={`M${x} ${top}H${end}M${x} ${bottom}H${end}`} stroke={paint('ink')} strokeWidth={2.6} />
      <path d={`M${x} ${top - 3}V${bottom + 3}`} stroke={paint('ink')} strokeWidth={3.6} />
      <path
        d={`M${end} ${top - 3}V${bottom + 3}`}
        stroke={paint(overEnd === undefined ? 'ink' : 'red')}
        strokeWidth={3.6}
      />
    </>
  );
}

/** Over the hatching of the payload; where that is too short to be seen beneath, at the payload's end. */
function OverLabel({
  text,
  from,
  to,
  y,
}: {
  readonly text: string;
  readonly from: number;
  readonly to: number;
  readonly y: number;
}) {
  const width = textWidth(text, numberSizePx, 600) + 14;
  const x = to - from >= width + 8 ? (from + to - width) / 2 : Math.min(from - 7, to) - width;
  return (
    <>
      <rect x={x} y={y} width={width} height={BAR_PX - 6} rx={2} fill={paint('red')} />
      <text
        x={x + width / 2}
        y={y + 13}
        textAnchor="middle"
        fontSize={numberSizePx}
        fontWeight={600}
        fill={paint('red-ink')}
      >
        {text}
      </text>
    </>
  );
}
