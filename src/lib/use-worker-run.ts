import { useEffect, useReducer, useRef } from 'react';
import type { Progress, RunMessage } from './worker-run.ts';

export interface WorkerRun<Request, Result> {
  /** Of what was asked last, or while a new run is under way of what was asked before. */
  readonly result?: Result;
  /** What the result is of. */
  readonly of?: Request;
  /** While it runs. */
  readonly progress?: Progress;
  /** Why there is no result. */
  readonly failed?: string;
}

type Event<Request, Result> =
  | { readonly is: 'told'; readonly message: RunMessage<Result>; readonly request: Request }
  | { readonly is: 'started' }
  | { readonly is: 'stopped' };

const next = <Request, Result>(
  run: WorkerRun<Request, Result>,
  event: Event<Request, Result>,
): WorkerRun<Request, Result> => {
  const { progress: _progress, failed: _failed, ...kept } = run;
  if (event.is === 'started') return { ...kept, progress: { done: 0, total: 0 } };
  if (event.is === 'stopped') return kept;
  const { message, request } = event;
  return 'result' in message ? { result: message.result, of: request } : { ...kept, ...message };
};

/**
 * Does a run in a worker: once for every new request, not at all without one. A new request ends the run before, and so
 * does taking the request away. `isSame` says of two requests that the answer to one is that to the other.
 */
export function useWorkerRun<Request extends object, Result>(
  start: () => Worker,
  request: Request | undefined,
  isSame: (a: Request, b: Request) => boolean = (a, b) => a === b,
): WorkerRun<Request, Result> {
  const [run, tell] = useReducer(next<Request, Result>, {});
  const doneFor = useRef<Request>(undefined);
  const sameness = useRef(isSame);
  useEffect(() => {
    const isDone = (): boolean =>
      request !== undefined && doneFor.current !== undefined && sameness.current(doneFor.current, request);
    if (request === undefined || isDone()) return;
    const worker = start();
    tell({ is: 'started' });
    worker.onmessage = ({ data }: MessageEvent<RunMessage<Result>>) => {
      if ('result' in data) doneFor.current = request;
      tell({ is: 'told', message: data, request });
    };
    worker.onerror = () =>
      tell({
        is: 'told',
        message: { failed: 'What works this out could not be fetched. Check the connection and try again.' },
        request,
      });
    worker.postMessage(request);
    return () => {
      worker.terminate();
      if (!isDone()) tell({ is: 'stopped' });
    };
  }, [start, request]);
  return run;
}
