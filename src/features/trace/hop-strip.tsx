import { useEffect, useLayoutEffect, useMemo, useRef, useState, type KeyboardEvent } from 'react';
import { ByteNames } from '../../components/byte-names.tsx';
import { Icon } from '../../components/icon.tsx';
import type { CorePalette } from '../../drawing/theme/paint.ts';
import { paint } from '../../drawing/theme/paint.ts';
import { classNames } from '../../lib/class-names.ts';
import { useWidth } from '../../lib/use-width.ts';
import { HopLine, indentOf, LeafTally } from './hop-line.tsx';
import type { BranchRow, StripRow } from './hop-rows.ts';
import { rowHeight, rowsInView, stripLayout } from './strip-layout.ts';
import type { Playback } from './use-playback.ts';

// With more rows only branches in which something is amiss stand open at first.
const mostOpenRows = 60;

const foldedAtFirst = (rows: readonly StripRow[]): ReadonlySet<string> =>
  new Set(
    rows.length <= mostOpenRows
      ? []
      : rows.flatMap((row) =>
          row.kind === 'branch' && row.counts.lost === 0 && row.counts.endless === 0 ? [row.key] : [],
        ),
  );

interface HopStripProps {
  /** Names the list to a screen reader. */
  readonly label: string;
  readonly rows: readonly StripRow[];
  readonly palette: CorePalette;
  /** What the column is that stays the same: the packet as sent, or the longest piece of it. */
  readonly sentWords: string;
  readonly playback: Playback;
  readonly hopCount: number;
}

/** All hops of a trace under each other, what the host sent in one column. Of long ones only what is in view is drawn. */
export function HopStrip({ label, rows, palette, sentWords, playback, hopCount }: HopStripProps) {
  const { ref: widthRef, widthPx } = useWidth<HTMLDivElement>(900);
  const box = useRef<HTMLDivElement>(null);
  const list = useRef<HTMLOListElement>(null);
  const [view, setView] = useState({ scrolledPx: 0, boxPx: 400 });
  const [folded, setFolded] = useState<{ readonly of: unknown; readonly keys: ReadonlySet<string> }>();
  const first = useMemo(() => foldedAtFirst(rows), [rows]);
  const keys = folded?.of === rows ? folded.keys : first;
  const shown = useMemo(() => rows.filter(({ under }) => !under.some((key) => keys.has(key))), [rows, keys]);
  const layout = useMemo(() => stripLayout(rows, widthPx), [rows, widthPx]);
  const isNarrow = layout?.isNarrow ?? false;
  const tops = useMemo(() => {
    let y = 0;
    const all = [0];
    for (const row of shown) all.push((y += rowHeight(row, isNarrow)));
    return all;
  }, [shown, isNarrow]);

  useLayoutEffect(() => {
    const element = box.current;
    if (element === null) return;
    const measure = (): void =>
      setView({ scrolledPx: element.scrollTop, boxPx: element.clientHeight || 400 });
    measure();
    element.addEventListener('scroll', measure, { passive: true });
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => {
      element.removeEventListener('scroll', measure);
      observer.disconnect();
    };
  }, []);

  const { at, seek } = playback;
  const current = shown.findIndex((row) => row.kind !== 'branch' && row.number === at);
  const isComplete = at >= hopCount;
  // What ends once ends in the verdict.
  const isOnlyEnd = useMemo(
    () => rows.filter((row) => row.kind !== 'branch' && row.leaf !== undefined).length < 2,
    [rows],
  );
  const wantsFocus = useRef(false);
  useEffect(() => {
    const element = box.current;
    if (element === null || current < 0) return;
    // A complete trace is read from its start, unless somebody stepped to its end.
    if (isComplete && !wantsFocus.current && !playback.isPlaying) return;
    const [top, bottom] = [tops[current]!, tops[current + 1]!];
    if (top < element.scrollTop) element.scrollTop = top;
    else if (bottom > element.scrollTop + element.clientHeight)
      element.scrollTop = bottom - element.clientHeight;
  }, [current, tops, isComplete, playback.isPlaying]);
  useLayoutEffect(() => {
    if (!wantsFocus.current) return;
    const button = list.current?.querySelector<HTMLElement>('[aria-current="step"]');
    if (button == null) return;
    wantsFocus.current = false;
    button.focus({ preventScroll: true });
  });

  const onKeyDown = (event: KeyboardEvent): void => {
    const isHop = event.target instanceof Element && event.target.closest('[data-hop]') !== null;
    const to: number | undefined = {
      ArrowDown: at + 1,
      ArrowUp: Math.max(1, at - 1),
      Home: 1,
      End: hopCount,
    }[event.key];
    if (!isHop || to === undefined) return;
    event.preventDefault();
    wantsFocus.current = true;
    seek(to);
  };
  const toggle = (key: string): void => {
    const next = new Set(keys);
    if (!next.delete(key)) next.add(key);
    setFolded({ of: rows, keys: next });
  };

  const { from, to } = rowsInView(tops, view.scrolledPx, view.boxPx);
  const drawn = layout === undefined ? shown.slice(0, 200) : shown.slice(from, to);
  return (
    <div className="flex h-full min-h-0 min-w-0 flex-col bg-raise px-10 max-md:px-8">
      <div ref={widthRef} className="min-w-0 shrink-0 border-b border-rule [scrollbar-gutter:stable]">
        {layout !== undefined && (
          <svg aria-hidden="true" width={layout.scale.widthPx} height={layout.headPx} className="block">
            {layout.guides.map((x, index) => (
              <path key={index} d={`M${x} ${layout.headPx - 5}V${layout.headPx}`} stroke={paint('rule-2')} />
            ))}
            <ByteNames
              names={layout.names}
              packetSpan={layout.packetSpan}
              sent={{ words: sentWords, bytes: layout.sentBytes }}
            />
          </svg>
        )}
      </div>
      <div
        ref={box}
        className="-mr-10 min-h-0 flex-1 overflow-x-hidden overflow-y-auto pr-10 max-md:-mr-8 max-md:pr-8"
      >
        {/* The rows' buttons take the keys; the list only hears of them. */}
        {/* eslint-disable-next-line jsx-a11y/no-noninteractive-element-interactions */}
        <ol
          ref={list}
          aria-label={label}
          className="relative mt-6 mb-8"
          style={{ height: tops.at(-1) }}
          onKeyDown={onKeyDown}
        >
          {drawn.map((row, index) => {
            const place = (layout === undefined ? 0 : from) + index;
            return (
              <li
                key={row.key}
                aria-posinset={place + 1}
                aria-setsize={shown.length}
                className="absolute inset-x-0"
                style={{ top: tops[place], height: tops[place + 1]! - tops[place]! }}
              >
                {row.kind === 'branch' ? (
                  <BranchHead row={row} isOpen={!keys.has(row.key)} onToggle={() => toggle(row.key)} />
                ) : (
                  <button
                    type="button"
                    data-hop
                    aria-current={row.number === at ? 'step' : undefined}
                    tabIndex={row.number === Math.max(1, at) || (current < 0 && index === 0) ? 0 : -1}
                    onClick={() => seek(row.number)}
                    className="block h-full w-full text-left -outline-offset-2"
                  >
                    <span className="sr-only">
                      Hop {row.number}, {row.sentences}
                    </span>
                    {layout !== undefined && (
                      <HopLine
                        row={row}
                        layout={layout}
                        palette={palette}
                        isAhead={row.number > at}
                        isLampHere={row.number === at && (playback.isPlaying || !isComplete)}
                        isOnlyEnd={isOnlyEnd}
                      />
                    )}
                    {layout === undefined && (
                      <span aria-hidden="true" className="text-base text-ink">
                        <span className="font-semibold">{row.title}</span> {row.leaf?.words}
                      </span>
                    )}
                  </button>
                )}
              </li>
            );
          })}
        </ol>
      </div>
    </div>
  );
}

function BranchHead({
  row,
  isOpen,
  onToggle,
}: {
  readonly row: BranchRow;
  readonly isOpen: boolean;
  readonly onToggle: () => void;
}) {
  return (
    <button
      type="button"
      aria-expanded={isOpen}
      onClick={onToggle}
      className="flex h-24 w-full items-center gap-6 border-y border-rule bg-panel pr-6 text-left text-base text-ink -outline-offset-2 hover:bg-hover"
      style={{ paddingLeft: indentOf(row.depth - 1) + 2 }}
    >
      <Icon name={isOpen ? 'chevron-down' : 'chevron-right'} size={13} />
      <span className="min-w-0 truncate font-semibold">{row.title}</span>
      <span className={classNames('min-w-0 flex-1 truncate text-ink-2')}>
        {row.hops} {row.hops === 1 ? 'hop' : 'hops'}
      </span>
      <LeafTally counts={row.counts} />
    </button>
  );
}
