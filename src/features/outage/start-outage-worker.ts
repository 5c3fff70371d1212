/** The worker that fails things one after the other, fetched when first needed. Ending it ends its run. */
export const startOutageWorker = (): Worker =>
  new Worker(new URL('./outage-worker.ts', import.meta.url), { type: 'module' });
