import { Button } from '../../components/button.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { RunProgress } from '../../components/run-progress.tsx';
import type { LoadRun } from './use-load-report.ts';

/** How far the demands of a large design are laid, or why they are not. */
export function LoadStatus({ run: { progress, failed, cancel, again } }: { readonly run: LoadRun }) {
  if (failed !== undefined) return <ErrorNotice>{failed}</ErrorNotice>;
  if (progress !== undefined)
    return <RunProgress doing="Laying demands on their way" progress={progress} onCancel={cancel} />;
  if (again === undefined) return null;
  return (
    <div className="flex shrink-0 items-center gap-12 text-base text-ink-2">
      <span>What stands here is not of the design as it is now.</span>
      <Button small onClick={again}>
        Work it out
      </Button>
    </div>
  );
}
