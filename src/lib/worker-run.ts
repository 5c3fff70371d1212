/** How far a run is, in whatever it counts. */
export interface Progress {
  readonly done: number;
  readonly total: number;
}
export type RunMessage<Result> =
  { readonly progress: Progress } | { readonly result: Result } | { readonly failed: string };

const betweenMessagesMs = 60;
// So few steps are long ones: each is told.
const fewSteps = 20;

/** In a worker: does a run for the request that comes, and tells how far it is. Ending the worker ends the run. */
export const answerRuns = <Request, Result>(run: (request: Request) => Generator<Progress, Result>): void => {
  const post = (message: RunMessage<Result>): void => self.postMessage(message);
  self.onmessage = ({ data }: MessageEvent<Request>): void => {
    try {
      const steps = run(data);
      let told = performance.now();
      for (let step = steps.next(); ; step = steps.next()) {
        if (step.done === true) return post({ result: step.value });
        if (step.value.total > fewSteps && performance.now() - told < betweenMessagesMs) continue;
        told = performance.now();
        post({ progress: step.value });
      }
    } catch (error) {
      post({ failed: error instanceof Error ? error.message : String(error) });
    }
  };
};

/** The end of a run, for who does it where it is asked for. */
export const endOf = <Result>(run: Generator<Progress, Result>): Result => {
  for (let step = run.next(); ; step = run.next()) if (step.done === true) return step.value;
};
