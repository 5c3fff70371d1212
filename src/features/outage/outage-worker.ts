import type { DesignFacts } from '../../engine/network/network.ts';
import { failureRun, type Progress, type RunKind, type RunResults } from './failure-run.ts';

export interface RunRequest {
  readonly design: DesignFacts;
  readonly kind: RunKind;
}
export type RunMessage =
  { readonly progress: Progress } | { readonly result: RunResults[RunKind] } | { readonly failed: string };

const betweenMessagesMs = 60;
const post = (message: RunMessage): void => self.postMessage(message);

self.onmessage = ({ data: { design, kind } }: MessageEvent<RunRequest>): void => {
  try {
    const run = failureRun(design, kind);
    let told = performance.now();
    for (let step = run.next(); ; step = run.next()) {
      if (step.done === true) return post({ result: step.value });
      if (performance.now() - told < betweenMessagesMs) continue;
      told = performance.now();
      post({ progress: step.value });
    }
  } catch (error) {
    post({ failed: error instanceof Error ? error.message : String(error) });
  }
};
