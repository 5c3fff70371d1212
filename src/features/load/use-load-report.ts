import { useMemo, useState } from 'react';
import { loadOfNetwork, type LoadOptions, type LoadReport } from '../../engine/load/load-of.ts';
import type { Design } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import type { Answer } from '../../engine/wire/problem.ts';
import { useWorkerRun } from '../../lib/use-worker-run.ts';
import type { Progress } from '../../lib/worker-run.ts';
import { startLoadWorker } from './start-load-worker.ts';

export interface LoadRequest {
  readonly design: Design;
  readonly options: LoadOptions;
}
export interface LoadRun {
  /** What the demands come to, and the design that it is of: that may be one before the newest while a run is under way. */
  readonly report?: { readonly of: LoadRequest; readonly answer: Answer<LoadReport> };
  readonly progress?: Progress;
  readonly failed?: string;
  readonly cancel: () => void;
  /** Present once the run was cancelled. */
  readonly again?: () => void;
}

// Demands along so many devices are laid before anybody feels it.
const atOnceUpTo = 150;

/** What the demands of a design put on it: worked out at once, or in a worker where that would hold up the page. */
export function useLoadReport(
  design: Design | undefined,
  multiplier: number,
  windowBytes: number | undefined,
): LoadRun {
  const [cancelled, setCancelled] = useState<LoadRequest>();
  const request = useMemo(
    (): LoadRequest | undefined =>
      design && { design, options: { multiplier, ...(windowBytes === undefined ? {} : { windowBytes }) } },
    [design, multiplier, windowBytes],
  );
  const isLarge = request !== undefined && Object.keys(request.design.devices).length > atOnceUpTo;
  const run = useWorkerRun<LoadRequest, Answer<LoadReport>>(
    startLoadWorker,
    isLarge && cancelled !== request ? request : undefined,
  );
  const here = useMemo(
    () =>
      request === undefined || isLarge
        ? undefined
        : { of: request, answer: loadOfNetwork(indexNetwork(request.design), request.options) },
    [request, isLarge],
  );
  if (!isLarge) return { ...(here === undefined ? {} : { report: here }), cancel: () => undefined };
  const { result, of, progress, failed } = run;
  return {
    ...(result === undefined || of === undefined ? {} : { report: { of, answer: result } }),
    ...(progress === undefined ? {} : { progress }),
    ...(failed === undefined ? {} : { failed }),
    cancel: () => setCancelled(request),
    ...(cancelled === request ? { again: () => setCancelled(undefined) } : {}),
  };
}
