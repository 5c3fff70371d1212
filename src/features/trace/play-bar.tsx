import type { CSSProperties, ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import type { Playback } from './use-playback.ts';

/** Plays a trace, steps through it and scrubs; what else can be done with it stands at the right. */
export function PlayBar({
  playback,
  count,
  children,
}: {
  readonly playback: Playback;
  readonly count: number;
  readonly children: ReactNode;
}) {
  const { at, isPlaying, play, pause, seek } = playback;
  return (
    <div className="flex min-h-34 shrink-0 flex-wrap items-center gap-x-8 gap-y-4 border-b border-rule-2 bg-panel px-10 py-4">
      <Button
        small
        icon={<Icon name={isPlaying ? 'pause' : 'play'} size={13} />}
        onClick={isPlaying ? pause : play}
        disabled={count === 0}
      >
        {isPlaying ? 'Pause' : 'Play'}
      </Button>
      <Button
        small
        iconOnly
        aria-label="One hop back"
        icon={<Icon name="chevron-left" size={13} />}
        disabled={at <= 0}
        onClick={() => seek(at - 1)}
      />
      <input
        type="range"
        aria-label="Hops passed"
        aria-valuetext={at === 0 ? 'not sent yet' : `hop ${at} of ${count}`}
        min={0}
        max={count}
        step={1}
        value={at}
        onChange={(event) => seek(Number(event.target.value))}
        style={{ '--passed': `${(at / Math.max(1, count)) * 100}%` } as CSSProperties}
        className="hop-slide h-20 w-140 min-w-60 max-md:flex-1"
      />
      <Button
        small
        iconOnly
        aria-label="One hop on"
        icon={<Icon name="chevron-right" size={13} />}
        disabled={at >= count}
        onClick={() => seek(at + 1)}
      />
      <span className="text-base whitespace-nowrap text-ink-2">
        {at === 0 ? 'Not sent yet' : `Hop ${at} of ${count}`}
      </span>
      <span className="flex min-w-0 flex-1 items-center justify-end gap-8 max-md:basis-full max-md:flex-wrap">
        {children}
      </span>
    </div>
  );
}
