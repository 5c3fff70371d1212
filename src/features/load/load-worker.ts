import { loadSteps } from '../../engine/load/load-of.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { answerRuns } from '../../lib/worker-run.ts';
import type { LoadRequest } from './use-load-report.ts';

answerRuns(({ design, options }: LoadRequest) => loadSteps(indexNetwork(design), options));
