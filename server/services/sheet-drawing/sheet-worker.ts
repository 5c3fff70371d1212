import { parentPort } from 'node:worker_threads';
import type { SheetJob } from './sheet-job.ts';
import { drawSheet } from './sheet-job.ts';

/** What the thread answers for one job. */
export type SheetAnswer =
  { readonly ok: true; readonly file: Uint8Array } | { readonly ok: false; readonly why: string };

parentPort?.on('message', (job: SheetJob) => {
  void drawSheet(job)
    .then((file): SheetAnswer => ({ ok: true, file }))
    .catch((error: unknown): SheetAnswer => ({ ok: false, why: String(error) }))
    .then((answer) => parentPort?.postMessage(answer));
});
