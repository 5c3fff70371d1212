import { ByteBarPicture } from '../../components/byte-bar-picture.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import type { CorePalette } from '../../drawing/theme/paint.ts';
import { paint } from '../../drawing/theme/paint.ts';
import { placeBar } from '../../lib/bar-geometry.ts';
import { classNames } from '../../lib/class-names.ts';
import type { HopRow, Leaf, LeafCounts } from './hop-rows.ts';
import type { StripLayout } from './strip-layout.ts';

const indentPx = 14;
// Deeper branches are told by their heads; the words need the room.
const mostIndents = 5;
export const indentOf = (depth: number): number => Math.min(depth, mostIndents) * indentPx;

const leafInks: Readonly<Record<Leaf['tone'], string>> = {
  arrives: 'text-ok',
  pieces: 'text-degr',
  lost: 'text-red',
  meant: 'text-advi',
  endless: 'text-red',
  again: 'text-advi',
};

/** Shape of an end: never told by colour alone. */
export function LeafShape({ tone, size = 13 }: { readonly tone: Leaf['tone']; readonly size?: number }) {
  if (tone === 'arrives') return <Icon name="check" size={size} className="shrink-0 text-ok" />;
  const severity =
    tone === 'pieces' ? 'degrading' : tone === 'lost' || tone === 'endless' ? 'blocking' : 'advisory';
  return <SeverityShape severity={severity} size={size} />;
}

interface HopLineProps {
  readonly row: HopRow;
  readonly layout: StripLayout;
  readonly palette: CorePalette;
  /** The frame has not got here yet. */
  readonly isAhead: boolean;
  /** The lamp is here just now. */
  readonly isLampHere: boolean;
  /** The strip has no other end: the verdict beneath it says how it ends. */
  readonly isOnlyEnd: boolean;
}

/** One hop: number, from and to, what happens and how it fits; beneath it the frame's bytes in their pipe. */
export function HopLine({ row, layout, palette, isAhead, isLampHere, isOnlyEnd }: HopLineProps) {
  const { number, title, note, measure, bar, isFailing, isCut, depth } = row;
  const leaf = isOnlyEnd ? undefined : row.leaf;
  const { isNarrow, scale } = layout;
  const over = bar?.pipeBytes !== undefined && bar.ipPacketBytes > bar.pipeBytes;
  const barY = isNarrow ? 39 : 22;
  const measureInk = over ? (isCut ? 'text-degr' : 'text-red') : 'text-ink';
  return (
    <span
      aria-hidden="true"
      className={classNames('absolute inset-x-0 top-0 block', isAhead && 'opacity-45')}
    >
      {bar !== undefined && (
        <svg
          width={scale.widthPx}
          height={barY + 34}
          className={classNames('absolute top-0 left-0', isLampHere && 'hop-grows')}
        >
          {layout.guides.map((x, at) => (
            <path key={at} d={`M${x} ${barY - 7}V${barY}`} stroke={paint('rule')} />
          ))}
          <ByteBarPicture placed={placeBar(bar, scale)} y={barY} palette={palette} isCut={isCut} />
        </svg>
      )}
      <span className="relative flex h-16 items-center gap-8" style={{ paddingLeft: indentOf(depth) }}>
        <span
          className={classNames(
            'inline-flex h-17 min-w-17 shrink-0 items-center justify-center rounded-full px-4 text-label font-bold',
            isFailing ? 'bg-red text-red-ink' : 'bg-strip text-strip-ink',
            isLampHere && 'ring-3 ring-lamp',
          )}
        >
          {number}
        </span>
        <span className="min-w-0 shrink-[1] truncate  text-base font-semibold text-ink">{title}</span>
        <span className="min-w-0 flex-1 shrink-[4] truncate text-base text-ink-2">{note}</span>
        {!isNarrow && (
          <>
            {leaf !== undefined && <LeafWords leaf={leaf} />}
            <span className={classNames('shrink-0 text-base font-semibold', measureInk)}>{measure}</span>
          </>
        )}
      </span>
      {isNarrow && (
        <span className="relative flex h-19 items-center gap-8" style={{ paddingLeft: indentOf(depth) }}>
          <span className={classNames('shrink-0 text-base font-semibold', measureInk)}>{measure}</span>
          {leaf !== undefined && <LeafWords leaf={leaf} />}
        </span>
      )}
    </span>
  );
}

function LeafWords({ leaf }: { readonly leaf: Leaf }) {
  return (
    <span
      className={classNames(
        'inline-flex max-w-[46%] min-w-0 shrink-[2] items-center gap-5 text-base font-medium',
        leafInks[leaf.tone],
      )}
    >
      <LeafShape tone={leaf.tone} />
      <span className="truncate">{leaf.words}</span>
    </span>
  );
}

const countWords: readonly (readonly [keyof LeafCounts, Leaf['tone'], string])[] = [
  ['arrives', 'arrives', 'received'],
  ['lost', 'lost', 'dropped'],
  ['endless', 'endless', 'without end'],
  ['meant', 'meant', 'stopped as it should be'],
];

/** How the copies of a branch end, those that are none left out. */
export function LeafTally({ counts }: { readonly counts: LeafCounts }) {
  return (
    <span className="flex shrink-0 items-center gap-12">
      {countWords.map(
        ([name, tone, words]) =>
          counts[name] > 0 && (
            <span
              key={name}
              className={classNames('inline-flex items-center gap-4 font-medium', leafInks[tone])}
            >
              <LeafShape tone={tone} size={12} />
              {counts[name]} <span className="max-md:sr-only">{words}</span>
            </span>
          ),
      )}
    </span>
  );
}
