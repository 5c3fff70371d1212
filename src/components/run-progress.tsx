import type { Progress } from '../lib/worker-run.ts';
import { Button } from './button.tsx';

interface RunProgressProps {
  /** What is under way, such as 'Failing everything in turn'. */
  readonly doing: string;
  readonly progress: Progress;
  /** Absent where it takes too little to be ended. */
  readonly onCancel?: (() => void) | undefined;
}

/** How far something is that takes its time, and the way to end it. */
export function RunProgress({ doing, progress, onCancel }: RunProgressProps) {
  const isCounted = progress.total > 0;
  return (
    <div className="flex shrink-0 items-center gap-12 text-base text-ink-2">
      <progress
        aria-label={doing}
        className="h-8 w-180 appearance-none border border-ink bg-field [&::-moz-progress-bar]:bg-ink [&::-webkit-progress-bar]:bg-field [&::-webkit-progress-value]:bg-ink"
        max={Math.max(1, progress.total)}
        value={progress.done}
      />
      <span>
        {doing}
        {isCounted && `: ${progress.done} of ${progress.total}`}
      </span>
      {onCancel !== undefined && (
        <Button small onClick={onCancel}>
          Cancel
        </Button>
      )}
    </div>
  );
}
