import { useEffect, useReducer, useRef } from 'react';
import type { DesignFacts } from '../../engine/network/network.ts';
import type { Progress, RunKind, RunResults } from './failure-run.ts';
import type { RunMessage, RunRequest } from './outage-worker.ts';
import { startOutageWorker } from './start-outage-worker.ts';

export interface FailureRun<Kind extends RunKind> {
  /** Of the design that was asked about last, or while a new run is under way of the one before. */
  readonly result?: RunResults[Kind];
  /** While it runs. */
  readonly progress?: Progress;
  /** Why there is no result. */
  readonly failed?: string;
}

type Event = RunMessage | { readonly is: 'started' | 'stopped' };

const next = (run: FailureRun<RunKind>, event: Event): FailureRun<RunKind> => {
  const kept = run.result === undefined ? {} : { result: run.result };
  if ('result' in event) return { result: event.result };
  if ('failed' in event) return { ...kept, failed: event.failed };
  if ('progress' in event) return { ...kept, progress: event.progress };
  return event.is === 'started' ? { ...kept, progress: { done: 0, total: 0 } } : kept;
};

/**
 * Runs over failures of a design in a worker: once for every new design, not at all without one. A new run ends the one
 * before, and so does taking the design away.
 */
export function useFailureRun<Kind extends RunKind>(
  kind: Kind,
  design: DesignFacts | undefined,
): FailureRun<Kind> {
  const [run, tell] = useReducer(next, {});
  const doneFor = useRef<DesignFacts>(undefined);
  useEffect(() => {
    if (design === undefined || doneFor.current === design) return;
    const worker = startOutageWorker();
    tell({ is: 'started' });
    worker.onmessage = ({ data }: MessageEvent<RunMessage>) => {
      if ('result' in data) doneFor.current = design;
      tell(data);
    };
    worker.onerror = () =>
      tell({
        failed: 'What tries the failures could not be fetched. Check the connection and open the tab again.',
      });
    const request: RunRequest = { design, kind };
    worker.postMessage(request);
    return () => {
      worker.terminate();
      if (doneFor.current !== design) tell({ is: 'stopped' });
    };
  }, [design, kind]);
  return run as FailureRun<Kind>;
}
