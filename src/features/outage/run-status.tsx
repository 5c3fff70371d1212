import type { ReactNode } from 'react';
import { ErrorNotice } from '../../components/notice.tsx';
import { RunProgress } from '../../components/run-progress.tsx';
import type { FailureRun } from './use-failure-run.ts';
import type { RunKind } from './failure-run.ts';

interface RunStatusProps {
  readonly run: FailureRun<RunKind>;
  /** What is under way, such as 'Failing everything in turn'. */
  readonly doing: string;
  /** Absent where it takes too little to be ended. */
  readonly onCancel?: () => void;
  /** Stands above while there is no result with a place for it. */
  readonly before: ReactNode;
  /** Shown before a run is asked for. */
  readonly idle?: ReactNode;
  readonly children: ReactNode;
}

/** A run's result, with how far a new one is above it; or why there is none. */
export function RunStatus({ run, doing, onCancel, before, idle, children }: RunStatusProps) {
  const { progress, failed, result } = run;
  return (
    <div className="flex h-full min-h-0 flex-col gap-8">
      {result === undefined && <div className="flex shrink-0 flex-wrap items-center gap-8">{before}</div>}
      {result === undefined && progress === undefined && failed === undefined && idle}
      {failed !== undefined && <ErrorNotice>{failed}</ErrorNotice>}
      {progress !== undefined && <RunProgress doing={doing} progress={progress} onCancel={onCancel} />}
      {result !== undefined && <div className="min-h-0 flex-1">{children}</div>}
    </div>
  );
}
