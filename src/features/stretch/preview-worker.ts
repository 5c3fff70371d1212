import { answerRuns } from '../../lib/worker-run.ts';
import { previewRun } from './preview.ts';

answerRuns(previewRun);
