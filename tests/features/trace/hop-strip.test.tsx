import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, it } from 'vitest';
import { HopStrip } from '../../../src/features/trace/hop-strip.tsx';
import { rowsInView } from '../../../src/features/trace/strip-layout.ts';
import type { TraceResult } from '../../../src/features/trace/trace-result.ts';
import { chainDesign, hubDesign } from '../../support/designs.ts';
import { resultOf } from './answers.ts';

function Strip({ result }: { readonly result: TraceResult }) {
  const count = result.hops.length;
  const [at, seek] = useState(count);
  const nothing = (): void => undefined;
  return (
    <HopStrip
      label="Hops"
      rows={result.rows}
      hopCount={count}
      palette="a"
      sentWords="IP packet as sent"
      playback={{ at, isPlaying: false, play: nothing, pause: nothing, seek }}
    />
  );
}
const list = () => within(screen.getByRole('list', { name: 'Hops' }));

describe('a strip of hundreds of hops', () => {
  it('draws those in view alone, and tells how many there are', () => {
    const result = resultOf(chainDesign(90), { send: 'ping', from: { host: 'h-s0-a' }, to: 'h-s89-a' }, []);
    render(<Strip result={result} />);
    const items = list().getAllByRole('listitem');
    expect(result.hops.length).toBeGreaterThan(180);
    expect(items.length).toBeLessThan(40);
    for (const item of items) expect(item).toHaveAttribute('aria-setsize', String(result.rows.length));
  });

  it('has at first only those branches open in which something is amiss', async () => {
    const result = resultOf(hubDesign(40), { send: 'arp', from: { host: 'h-s0-a' } }, []);
    render(<Strip result={result} />);
    const folded = list().getAllByRole('button', { expanded: false });
    expect(folded.length).toBeGreaterThan(10);
    const before = list().getAllByRole('listitem').length;
    await userEvent.setup().click(folded[0]!);
    expect(list().getAllByRole('button', { expanded: true })).toHaveLength(1);
    expect(Number(list().getAllByRole('listitem')[0]!.getAttribute('aria-setsize'))).toBeGreaterThan(42);
    expect(before).toBeGreaterThan(0);
  });
});

describe('the rows in view', () => {
  const tops = Array.from({ length: 501 }, (_, at) => at * 52);

  it('are those that the box shows with some to spare, wherever it is scrolled', () => {
    for (const scrolledPx of [0, 1, 5_000, 26_000 - 300]) {
      const { from, to } = rowsInView(tops, scrolledPx, 300);
      expect(tops[from]!).toBeLessThanOrEqual(scrolledPx);
      expect(tops[to]!).toBeGreaterThanOrEqual(Math.min(26_000, scrolledPx + 300));
      expect(to - from).toBeLessThan(24);
    }
  });

  it('are none of an empty strip', () => {
    expect(rowsInView([0], 0, 300)).toEqual({ from: 0, to: 0 });
  });
});
