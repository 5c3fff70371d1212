import { answerRuns } from '../../lib/worker-run.ts';
import { failureRun } from './failure-run.ts';
import type { RunRequest } from './use-failure-run.ts';

answerRuns(({ design, kind }: RunRequest) => failureRun(design, kind));
