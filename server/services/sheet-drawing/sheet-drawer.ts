import { Worker } from 'node:worker_threads';
import { Refusal } from '../../errors.ts';
import type { SheetJob } from './sheet-job.ts';
import type { SheetAnswer } from './sheet-worker.ts';

/** Draws sheets on a thread of its own, one after the other, so that a big design holds nobody else up. */
export interface SheetDrawer {
  /** Rejects with a refusal when it takes too long or too many wait, and with the signal's reason when that aborts. */
  draw(job: SheetJob, signal: AbortSignal): Promise<Uint8Array>;
}

export interface SheetDrawerLimits {
  readonly timeoutMs: number;
  readonly mostWaiting: number;
}
const usualLimits: SheetDrawerLimits = { timeoutMs: 30_000, mostWaiting: 8 };
const heapMegabytes = 512;

function startWorker(): Worker {
  const worker = new Worker(new URL('./sheet-thread.mjs', import.meta.url), {
    // What the process itself was started with is not for threads.
    execArgv: [],
    resourceLimits: { maxOldGenerationSizeMb: heapMegabytes },
  });
  // An idle thread keeps no process alive.
  worker.unref();
  return worker;
}

export function createSheetDrawer({ timeoutMs, mostWaiting }: SheetDrawerLimits = usualLimits): SheetDrawer {
  let worker: Worker | undefined;
  let last: Promise<unknown> = Promise.resolve();
  let waiting = 0;

  const giveUp = (): void => {
    const stopped = worker;
    worker = undefined;
    void stopped?.terminate();
  };

  const drawNow = (job: SheetJob, signal: AbortSignal): Promise<Uint8Array> =>
    new Promise((resolve, reject) => {
      const thread = (worker ??= startWorker());
      const settle = (): void => {
        clearTimeout(timer);
        signal.removeEventListener('abort', aborted);
        thread.off('message', answered).off('error', failWith).off('exit', ended);
      };
      const failWith = (error: unknown): void => {
        settle();
        // A thread that is still busy, or broken, is of no use to the next.
        giveUp();
        reject(error as Error);
      };
      const aborted = (): void => failWith(signal.reason);
      const ended = (code: number): void => failWith(new Error(`The drawing thread ended with ${code}.`));
      const answered = (answer: SheetAnswer): void => {
        if (!answer.ok) return failWith(new Error(`The sheet can’t be drawn: ${answer.why}`));
        settle();
        resolve(answer.file);
      };
      const timer = setTimeout(
        () =>
          failWith(
            new Refusal(
              'unavailable',
              `The drawing took longer than ${timeoutMs / 1000} s and was given up. Leave findings, layers or segments out of it, or try again later.`,
            ),
          ),
        timeoutMs,
      );
      signal.addEventListener('abort', aborted);
      thread.once('message', answered).once('error', failWith).once('exit', ended);
      thread.postMessage(job);
    });

  return {
    async draw(job, signal) {
      if (waiting > mostWaiting)
        throw new Refusal('unavailable', 'Many sheets are being drawn just now; try again in a moment.');
      waiting += 1;
      const turn = last.then(() => {
        signal.throwIfAborted();
        return drawNow(job, signal);
      });
      last = turn.catch(() => undefined);
      try {
        return await turn;
      } finally {
        waiting -= 1;
      }
    },
  };
}
