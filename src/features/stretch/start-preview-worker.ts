/** The worker that draws a large plan while it is filled in, fetched when first needed. Ending it ends its run. */
export const startPreviewWorker = (): Worker =>
  new Worker(new URL('./preview-worker.ts', import.meta.url), { type: 'module' });
