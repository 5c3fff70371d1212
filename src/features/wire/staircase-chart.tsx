import { paint } from '../../drawing/theme/paint.ts';
import type { Tread } from './padding-staircase.ts';
import { useWidth } from '../../lib/use-width.ts';

const HEIGHT_PX = 190;
const LEFT_PX = 6;
const RIGHT_PX = 74;
const TOP_PX = 24;
const BOTTOM_PX = 34;

/** Inner size against outer size around the limit: flat while padding gives way, then a whole step. */
export function StaircaseChart({
  treads,
  limitBytes,
  largestInnerPacketBytes,
}: {
  readonly treads: readonly Tread[];
  readonly limitBytes: number;
  readonly largestInnerPacketBytes: number;
}) {
  const { ref, widthPx } = useWidth<HTMLDivElement>(600);
  const first = treads[0];
  const last = treads.at(-1);
  if (first === undefined || last === undefined) return null;
  const fromBytes = first.fromBytes;
  const innerSpan = last.toBytes + 1 - fromBytes;
  const lowest = Math.min(first.outerBytes, limitBytes);
  const outerSpan = Math.max(1, last.outerBytes - lowest);
  const xOf = (innerBytes: number) =>
    LEFT_PX + ((innerBytes - fromBytes) / innerSpan) * (widthPx - LEFT_PX - RIGHT_PX);
  const yOf = (outerBytes: number) =>
    HEIGHT_PX - BOTTOM_PX - ((outerBytes - lowest) / outerSpan) * (HEIGHT_PX - TOP_PX - BOTTOM_PX);
  const floor = HEIGHT_PX - BOTTOM_PX + 12;
  const limitY = yOf(limitBytes);
  return (
    <div ref={ref} className="min-w-0">
      <svg
        role="img"
        aria-label={`Outer size against inner size around the limit. Inner packets up to ${largestInnerPacketBytes} B stay within ${limitBytes} B; the next step is over.`}
        width={widthPx}
        height={HEIGHT_PX}
        viewBox={`0 0 ${widthPx} ${HEIGHT_PX}`}
        className="block"
        fontSize={11}
        fontWeight={500}
      >
        <path d={`M${LEFT_PX} ${floor}H${widthPx - RIGHT_PX}`} stroke={paint('rule-strong')} />
        {treads.map((tread, at) => {
          const over = tread.outerBytes > limitBytes;
          const x = xOf(tread.fromBytes);
          const end = xOf(tread.toBytes + 1);
          const y = yOf(tread.outerBytes);
          const before = treads[at - 1];
          return (
            <g key={tread.fromBytes}>
              <path d={`M${end} ${y}V${floor + 4}`} stroke={paint('rule-2')} />
              {before !== undefined && (
                <path
                  d={`M${x} ${yOf(before.outerBytes)}V${y}`}
                  stroke={paint(over ? 'red' : 'ink')}
                  strokeWidth={1.2}
                  strokeDasharray="3 3"
                />
              )}
              <path d={`M${x} ${y}H${end}`} stroke={paint(over ? 'red' : 'ink')} strokeWidth={3.2} />
              <text
                x={(x + end) / 2}
                y={y - 6}
                textAnchor="middle"
                fontWeight={600}
                className={over ? 'fill-red' : 'fill-ink'}
              >
                {tread.outerBytes}
              </text>
              <text
                x={end}
                y={floor + 16}
                textAnchor="end"
                fontWeight={tread.toBytes === largestInnerPacketBytes ? 700 : 500}
                className={tread.toBytes === largestInnerPacketBytes ? 'fill-ink' : 'fill-ink-2'}
              >
                {tread.toBytes}
              </text>
            </g>
          );
        })}
        <path
          d={`M${LEFT_PX} ${limitY}H${widthPx - RIGHT_PX + 6}`}
          stroke={paint('ink')}
          strokeWidth={1.2}
          strokeDasharray="9 5"
        />
        <text x={widthPx - RIGHT_PX + 10} y={limitY + 4} fontWeight={600} className="fill-ink">
          {limitBytes} limit
        </text>
        <text x={widthPx - RIGHT_PX + 10} y={floor + 16} className="fill-ink-2">
          inner up to
        </text>
      </svg>
    </div>
  );
}
