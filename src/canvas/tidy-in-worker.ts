import type { TidyOptions } from '../drawing/tidy/tidy.ts';
import { tidy } from '../drawing/tidy/tidy.ts';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import type { TidyAnswer, TidyRequest } from './tidy-worker.ts';

/** Lays out a whole sheet; rejects with the signal's reason once it is given up. */
export type TidyWhole = (design: Design, options: TidyOptions, signal?: AbortSignal) => Promise<MergePatch>;

/** Lays out the sheet where it is asked for. */
export const tidyHere: TidyWhole = (design, options) => Promise.resolve(tidy(design, options));

/** Lays out the sheet in a worker of its own, so that the page stays at hand. Giving up ends the worker. */
export const tidyInWorker: TidyWhole = (design, options, signal) =>
  new Promise((resolve, reject) => {
    signal?.throwIfAborted();
    const worker = new Worker(new URL('./tidy-worker.ts', import.meta.url), { type: 'module' });
    const end = (settle: () => void): void => {
      worker.terminate();
      signal?.removeEventListener('abort', giveUp);
      settle();
    };
    const giveUp = (): void => end(() => reject(signal!.reason as Error));
    signal?.addEventListener('abort', giveUp);
    worker.onmessage = ({ data }: MessageEvent<TidyAnswer>) =>
      end(() => ('patch' in data ? resolve(data.patch) : reject(new Error(data.failed))));
    worker.onerror = () => end(() => reject(new Error('The program that lays out could not be fetched.')));
    const request: TidyRequest = { design, options };
    worker.postMessage(request);
  });
