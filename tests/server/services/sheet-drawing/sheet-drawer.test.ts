import { describe, expect, test } from 'vitest';
import { Refusal } from '../../../../server/errors.ts';
import { createSheetDrawer } from '../../../../server/services/sheet-drawing/sheet-drawer.ts';
import type { SheetJob } from '../../../../server/services/sheet-drawing/sheet-job.ts';
import { demoDesign } from '../../../../seeds/demo-designs/demo-design.ts';

const job: SheetJob = {
  format: 'svg',
  document: demoDesign('fault-free'),
  look: 'print',
  view: { layers: [] },
  addresses: true,
  drawnAt: new Date('2026-01-05T08:00:00Z'),
};
const never = new AbortController().signal;
const textOf = (file: Uint8Array): string => Buffer.from(file).toString('utf8');

describe('the thread that draws sheets', () => {
  test('answers several in order, and leaves the process free meanwhile', async () => {
    const drawer = createSheetDrawer();
    let turns = 0;
    const ticking = setInterval(() => (turns += 1), 5);
    const [first, second] = await Promise.all([
      drawer.draw(job, never),
      drawer.draw({ ...job, look: 'slate' }, never),
    ]);
    clearInterval(ticking);
    expect(textOf(first)).toMatch(/^<svg /);
    expect(textOf(second)).toContain('#1b2327');
    expect(textOf(first)).not.toContain('#1b2327');
    expect(turns).toBeGreaterThan(5);
  });

  test('gives up what takes too long, says so, and draws the next', async () => {
    const drawer = createSheetDrawer({ timeoutMs: 1, mostWaiting: 8 });
    await expect(drawer.draw(job, never)).rejects.toThrow(/took longer than 0.001 s/);
    await expect(drawer.draw(job, never)).rejects.toBeInstanceOf(Refusal);
  });

  test('stops when nobody waits any more, and draws the next', async () => {
    const drawer = createSheetDrawer();
    const left = new AbortController();
    const drawing = drawer.draw(job, left.signal);
    const after = drawer.draw(job, never);
    setTimeout(() => left.abort(), 20);
    await expect(drawing).rejects.toThrow(/abort/i);
    expect(textOf(await after)).toMatch(/^<svg /);
  });

  test('refuses more than it can keep waiting', async () => {
    const drawer = createSheetDrawer({ timeoutMs: 30_000, mostWaiting: 0 });
    const first = drawer.draw(job, never);
    await expect(drawer.draw(job, never)).rejects.toThrow('Many sheets are being drawn');
    await first;
  });

  test('tells what went wrong inside, and draws the next', async () => {
    const drawer = createSheetDrawer();
    await expect(drawer.draw({ ...job, document: null as never }, never)).rejects.toThrow('can’t be drawn');
    expect(textOf(await drawer.draw(job, never))).toMatch(/^<svg /);
  });
});
