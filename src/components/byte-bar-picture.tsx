import { useId } from 'react';
import { textWidth } from '../drawing/text-width.ts';
import type { CorePalette } from '../drawing/theme/paint.ts';
import { paint, segmentPaint } from '../drawing/theme/paint.ts';
import { BAR_PX, WALL_OFF_PX, type PlacedBar, type PlacedPipe } from '../lib/bar-geometry.ts';
import type { ByteLook } from '../lib/byte-blocks.ts';

const numberSizePx = 11.5;

const fillOf = (look: ByteLook, core: string): string =>
  ({
    plain: paint('plate'),
    tag: paint('brass'),
    access: paint('band'),
    vxlan: `color-mix(in srgb, ${core} 24%, ${paint('plate')})`,
    esp: paint('jacket'),
    packet: core,
  })[look];

/** What is written on a block. The jacket is dark in both themes, and brass and the segments' colours bring their own ink. */
const inkOf = (look: ByteLook, on: string): { readonly fill?: string; readonly className?: string } => {
  if (look === 'packet') return { fill: on };
  if (look === 'tag') return { fill: 'var(--on-brass)' };
  return { className: look === 'esp' ? 'fill-paper in-data-[theme=slate]:fill-ink' : 'fill-ink' };
};

interface ByteBarPictureProps {
  readonly placed: PlacedBar;
  /** Top of the bar. */
  readonly y: number;
  /** Whose colour the host's packet wears. */
  readonly palette: CorePalette;
  /** What is over is cut off and goes on in pieces, instead of being lost. */
  readonly isCut?: boolean;
}

/** One frame as a bar of its bytes, in the pipe that its outermost packet has to fit. Part of an SVG. */
export function ByteBarPicture({ placed, y, palette, isCut = false }: ByteBarPictureProps) {
  const hatchId = useId();
  const { bar, blocks, payload, pipe } = placed;
  const { core, on } = segmentPaint(palette);
  const over = (pipe?.overBytes ?? 0) > 0;
  const breakX = payload.breakX ?? payload.x;
  const numberEnd = over ? (pipe?.end ?? 0) : payload.x + payload.width;
  return (
    <>
      <g stroke={paint('jacket-edge')} strokeWidth={1.2}>
        {blocks.map(({ block, x, width }) => (
          <rect key={block.id} x={x} y={y} width={width} height={BAR_PX} fill={fillOf(block.look, core)} />
        ))}
        <rect x={payload.x} y={y} width={payload.width} height={BAR_PX} fill={core} />
      </g>
      {payload.breakX !== undefined && <LongBreak x={payload.breakX} y={y} />}
      {pipe !== undefined && <Pipe pipe={pipe} barY={y} hatchId={hatchId} isCut={isCut} />}
      <g fontSize={numberSizePx} fontWeight={600} textAnchor="middle">
        {blocks.map(({ block, x, width }) => (
          <BlockNumber key={block.id} {...{ bytes: block.bytes, x, y, width, look: block.look, core, on }} />
        ))}
        <BlockNumber
          {...{ bytes: bar.payloadBytes, x: breakX, y, width: numberEnd - breakX, look: 'packet', core, on }}
        />
      </g>
      {pipe?.overEnd !== undefined && (
        <OverLabel
          text={`${pipe.overBytes} B over`}
          from={pipe.end}
          to={payload.x + payload.width}
          y={y + 3}
          isCut={isCut}
        />
      )}
    </>
  );
}

function BlockNumber({
  bytes,
  x,
  y,
  width,
  look,
  core,
  on,
}: {
  readonly bytes: number;
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly look: ByteLook;
  readonly core: string;
  readonly on: string;
}) {
  const text = String(bytes);
  if (textWidth(text, numberSizePx, 600) > width - 1) return null;
  return (
    <text
      x={x + width / 2}
      y={y + BAR_PX / 2 + 4}
      // Numbers of what hangs over stand on its hatching.
      stroke={fillOf(look, core)}
      strokeWidth={3}
      strokeLinejoin="round"
      paintOrder="stroke"
      {...inkOf(look, on)}
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
  hatchId,
  isCut,
}: {
  readonly pipe: PlacedPipe;
  readonly barY: number;
  readonly hatchId: string;
  readonly isCut: boolean;
}) {
  const top = barY - WALL_OFF_PX;
  const bottom = barY + BAR_PX + WALL_OFF_PX;
  const { x, end, overEnd } = pipe;
  const tone = paint(isCut ? 'degr' : 'red');
  return (
    <>
      {overEnd !== undefined && (
        <>
          <pattern
            id={hatchId}
            width={9}
            height={9}
            patternUnits="userSpaceOnUse"
            patternTransform="rotate(45)"
          >
            <rect width={4.5} height={9} fill={tone} />
          </pattern>
          <rect
            x={end}
            y={barY}
            width={overEnd - end}
            height={BAR_PX}
            fill={`url(#${hatchId})`}
            stroke={tone}
            strokeWidth={2}
          />
        </>
      )}
      <path d={`M${x} ${top}H${end}M${x} ${bottom}H${end}`} stroke={paint('ink')} strokeWidth={2.6} />
      <path d={`M${x} ${top - 3}V${bottom + 3}`} stroke={paint('ink')} strokeWidth={3.6} />
      <path
        d={`M${end} ${top - 3}V${bottom + 3}`}
        stroke={overEnd === undefined ? paint('ink') : tone}
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
  isCut,
}: {
  readonly text: string;
  readonly from: number;
  readonly to: number;
  readonly y: number;
  readonly isCut: boolean;
}) {
  const width = textWidth(text, numberSizePx, 600) + 14;
  const x = to - from >= width + 8 ? (from + to - width) / 2 : Math.min(from - 7, to) - width;
  return (
    <>
      <rect x={x} y={y} width={width} height={BAR_PX - 6} rx={2} fill={paint(isCut ? 'degr' : 'red')} />
      <text
        x={x + width / 2}
        y={y + 13}
        textAnchor="middle"
        fontSize={numberSizePx}
        fontWeight={600}
        fill={paint(isCut ? 'paper' : 'red-ink')}
      >
        {text}
      </text>
    </>
  );
}
