import { useCallback, useEffect, useMemo, useState } from 'react';

const hopMs = 140;
const mostMs = 900;
// Of many hops several light up at once: more often than this nobody sees them change.
const leastMs = 1000 / 30;

export interface Playback {
  /** Hops that the frame has passed; all of them at rest. */
  readonly at: number;
  readonly isPlaying: boolean;
  /** From the sender on; with motion reduced all at once. */
  readonly play: () => void;
  readonly pause: () => void;
  readonly seek: (at: number) => void;
}

interface State {
  readonly of: unknown;
  readonly at: number;
  readonly isPlaying: boolean;
}

/** Hop by hop through a trace, 140 ms each, 900 ms at most. Another trace stands complete until it is played. */
export function usePlayback(trace: unknown, count: number): Playback {
  const [state, setState] = useState<State>({ of: trace, at: count, isPlaying: false });
  const current = state.of === trace ? state : { of: trace, at: count, isPlaying: false };
  const { at, isPlaying } = current;
  useEffect(() => {
    if (!isPlaying) return;
    const perHopMs = Math.min(hopMs, mostMs / Math.max(1, count));
    const start = performance.now();
    const timer = setInterval(
      () => {
        const passed = Math.min(count, Math.floor((performance.now() - start) / perHopMs) + 1);
        setState({ of: trace, at: passed, isPlaying: passed < count });
      },
      Math.max(leastMs, perHopMs),
    );
    return () => clearInterval(timer);
  }, [isPlaying, trace, count]);
  const seek = useCallback(
    (to: number) => setState({ of: trace, at: Math.max(0, Math.min(count, to)), isPlaying: false }),
    [trace, count],
  );
  const play = useCallback(() => {
    const isStill = window.matchMedia('(prefers-reduced-motion: reduce)').matches;
    setState({ of: trace, at: isStill ? count : 0, isPlaying: !isStill && count > 0 });
  }, [trace, count]);
  const pause = useCallback(() => setState((before) => ({ ...before, isPlaying: false })), []);
  return useMemo(() => ({ at, isPlaying, play, pause, seek }), [at, isPlaying, play, pause, seek]);
}
