/** The worker that lays the demands of a large design, fetched when first needed. Ending it ends its run. */
export const startLoadWorker = (): Worker =>
  new Worker(new URL('./load-worker.ts', import.meta.url), { type: 'module' });
