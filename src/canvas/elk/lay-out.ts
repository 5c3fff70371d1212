import type { ELK, ElkNode } from 'elkjs/lib/elk-api.js';

let engine: Promise<ELK> | undefined;

/** The layout engine, fetched and started in its worker the first time that something asks for it. */
const layoutEngine = (): Promise<ELK> => {
  engine ??= import('elkjs/lib/elk-api.js').then(
    ({ default: Elk }) =>
      new Elk({
        workerFactory: () => new Worker(new URL('./elk-worker.ts', import.meta.url), { type: 'module' }),
      }),
  );
  return engine;
};

/** Lays out a graph in the worker; rejects when the engine can't be fetched or refuses the graph. */
export const layOut = async (graph: ElkNode): Promise<ElkNode> => (await layoutEngine()).layout(graph);
