import { useMemo } from 'react';
import type { DesignFacts } from '../../engine/network/network.ts';
import { useWorkerRun, type WorkerRun } from '../../lib/use-worker-run.ts';
import type { RunKind, RunResults } from './failure-run.ts';
import { startOutageWorker } from './start-outage-worker.ts';

export interface RunRequest {
  readonly design: DesignFacts;
  readonly kind: RunKind;
}
export type FailureRun<Kind extends RunKind> = WorkerRun<RunRequest, RunResults[Kind]>;

const isSame = (a: RunRequest, b: RunRequest): boolean => a.design === b.design && a.kind === b.kind;

/** Runs over failures of a design in a worker: once for every new design, not at all without one. */
export function useFailureRun<Kind extends RunKind>(
  kind: Kind,
  design: DesignFacts | undefined,
): FailureRun<Kind> {
  const request = useMemo(() => (design === undefined ? undefined : { design, kind }), [design, kind]);
  return useWorkerRun<RunRequest, RunResults[Kind]>(startOutageWorker, request, isSame);
}
