import { afterEach, expect, it, vi } from 'vitest';
import { tidyInWorker } from '../../src/canvas/tidy-in-worker.ts';
import { pairDesign } from '../support/designs.ts';

class SilentWorker {
  static ended = 0;
  onmessage: ((event: { readonly data: unknown }) => void) | undefined;
  constructor() {
    started.push(this);
  }
  postMessage(): void {}
  terminate(): void {
    SilentWorker.ended += 1;
  }
}
const started: SilentWorker[] = [];

afterEach(() => {
  vi.unstubAllGlobals();
  SilentWorker.ended = 0;
});

it('giving up ends the worker and rejects', async () => {
  vi.stubGlobal('Worker', SilentWorker);
  const working = new AbortController();
  const patch = tidyInWorker(pairDesign(), {}, working.signal);
  working.abort(new Error('given up'));
  await expect(patch).rejects.toThrow('given up');
  expect(SilentWorker.ended).toBe(1);
});

it('an answer is the patch, a failure an error, and either ends the worker', async () => {
  vi.stubGlobal('Worker', SilentWorker);
  const patch = tidyInWorker(pairDesign(), {});
  started.at(-1)!.onmessage!({ data: { patch: { layout: { sheet: 'A2' } } } });
  await expect(patch).resolves.toEqual({ layout: { sheet: 'A2' } });
  const failing = tidyInWorker(pairDesign(), {});
  started.at(-1)!.onmessage!({ data: { failed: 'no such site' } });
  await expect(failing).rejects.toThrow('no such site');
  expect(SilentWorker.ended).toBe(2);
});
