import { paint } from '../drawing/theme/paint.ts';
import { NAME_SIZE_PX, type PlacedName } from '../lib/bar-geometry.ts';

/** Names above the bytes, and the dimension line over what the host sent. Part of an SVG. */
export function ByteNames({
  names,
  packetSpan,
  sent,
}: {
  readonly names: readonly PlacedName[];
  readonly packetSpan: { readonly x: number; readonly end: number; readonly y: number };
  /** What the dimension is of, in words where there is room, and in bytes. */
  readonly sent: { readonly words: string; readonly bytes: number };
}) {
  const { x, end, y } = packetSpan;
  const words = end - x > 150 ? sent.words : 'As sent';
  return (
    <>
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
        <text x={(x + end) / 2} y={y - 7}>
          {end - x > 90 ? `${words}, ${sent.bytes} B` : `${sent.bytes} B`}
        </text>
      </g>
    </>
  );
}
