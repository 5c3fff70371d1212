import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { emptyDesign, type Design, type ElementRef } from '../../../src/engine/model/design.ts';
import { failureRun } from '../../../src/features/outage/failure-run.ts';
import type { RunRequest } from '../../../src/features/outage/use-failure-run.ts';
import { useOutageTab } from '../../../src/features/outage/use-outage-tab.tsx';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { openInMemory } from '../../canvas/inspector/render-inspector.tsx';

const worker = vi.hoisted(() => ({ started: 0, ended: 0, holds: false }));
// jsdom has no workers: this one does the same work as soon as it is asked.
vi.mock('../../../src/features/outage/start-outage-worker.ts', () => ({
  startOutageWorker: () => {
    worker.started += 1;
    const self = {
      onmessage: undefined as ((event: { readonly data: unknown }) => void) | undefined,
      onerror: undefined as (() => void) | undefined,
      postMessage: ({ design, kind }: RunRequest) => {
        if (worker.holds) return self.onmessage?.({ data: { progress: { done: 7, total: 30 } } });
        const run = failureRun(design, kind);
        let step = run.next();
        while (step.done !== true) step = run.next();
        return self.onmessage?.({ data: { result: step.value } });
      },
      terminate: () => void (worker.ended += 1),
    };
    return self;
  },
}));

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');

function Desk({ presses }: { readonly presses: readonly ElementRef[] }) {
  const { panel, side, onPick, decorations } = useOutageTab(true);
  return (
    <>
      {panel}
      <aside>{side}</aside>
      {presses.map((ref) => (
        <button key={ref.id} type="button" onClick={() => onPick?.(ref)}>
          on the sheet: {ref.id}
        </button>
      ))}
      <output aria-label="failed on the sheet">
        {Object.entries(decorations?.tones ?? {})
          .filter(([, tones]) => tones.includes('failed'))
          .map(([key]) => key)
          .join(' ')}
      </output>
      <output aria-label="address">{decodeURIComponent(useLocation().search)}</output>
    </>
  );
}

const renderTab = (address = '', design: Design = demo, presses: readonly ElementRef[] = []) => {
  const open = openInMemory(design, false);
  render(
    <MemoryRouter initialEntries={[`/${address}`]}>
      <OpenDesignProvider open={() => open}>
        <ChecksProvider>
          <Desk presses={presses} />
        </ChecksProvider>
      </OpenDesignProvider>
      <ToastRegion />
    </MemoryRouter>,
  );
  return { user: userEvent.setup(), side: within(screen.getByRole('complementary')) };
};
const address = () => screen.getByLabelText('address');

beforeEach(() => Object.assign(worker, { started: 0, ended: 0, holds: false }));
afterEach(() => vi.clearAllMocks());

describe('the outage tab', () => {
  test('ranks every single failure, and a press on a row fails it on the sheet', async () => {
    const { user, side } = renderTab();
    expect(screen.getByText(/things part hosts when they fail alone/)).toBeVisible();
    await user.click(screen.getByText('Coastal access'));
    expect(address()).toHaveTextContent('failed=transports/coast');
    expect(document.querySelector('tr[aria-selected="true"]')).toHaveTextContent('Coastal access');
    expect(screen.getByLabelText('failed on the sheet')).toHaveTextContent('tunnels/tn-ho-gul-a');
    expect(side.getByText(/11 pairs of hosts parted in 3 segments/)).toBeVisible();
    expect(worker.started).toBe(1);
  });

  test('a press on the sheet fails, a second restores, and the list of what failed restores too', async () => {
    const { user, side } = renderTab('?outage=sites', demo, [
      { collection: 'devices', id: 'fw-ho', member: 1 },
      { collection: 'endpoints', id: 'lo-gul' },
    ]);
    await user.click(screen.getByRole('button', { name: 'on the sheet: fw-ho' }));
    await user.click(screen.getByRole('button', { name: 'on the sheet: lo-gul' }));
    expect(address()).toHaveTextContent('failed=devices/fw-ho@1,devices/fw-gul');
    await user.click(screen.getByRole('button', { name: 'on the sheet: fw-ho' }));
    expect(address()).toHaveTextContent('failed=devices/fw-gul');
    await user.click(side.getByRole('button', { name: 'Restore fw-gul' }));
    expect(side.getByText('Nothing has failed')).toBeVisible();
    expect(address()).not.toHaveTextContent('failed');
  });

  test('what can’t fail says so', async () => {
    const { user } = renderTab('?outage=sites', demo, [{ collection: 'segments', id: 'a' }]);
    await user.click(screen.getByRole('button', { name: 'on the sheet: a' }));
    expect(await screen.findByText(/A segment does not fail\. Press a device/)).toBeVisible();
  });

  test('an address that names what is not there says so and can be mended', async () => {
    const { user } = renderTab('?outage=sites&failed=devices/fw-gone,links/ld-ho-coast');
    expect(screen.getByText(/devices\/fw-gone is nothing of this design that can fail/)).toBeVisible();
    await user.click(screen.getByRole('button', { name: 'Leave it out' }));
    expect(address()).toHaveTextContent(/failed=links\/ld-ho-coast$/);
  });

  test('tells site by site who still reaches the others, in words', () => {
    renderTab('?outage=sites&failed=devices/fw-orr');
    const row = screen.getByRole('row', { name: /^Orrin Point/ });
    expect(row).toHaveTextContent('parted 3 of 3');
    expect(screen.getByRole('row', { name: /^Skerry/ })).toHaveTextContent('partly 1 of 3');
  });

  test('pairs are tried when asked for, with how far it is, and can be cancelled', async () => {
    worker.holds = true;
    const { user } = renderTab('?outage=pairs');
    expect(worker.started).toBe(0);
    await user.click(screen.getByRole('button', { name: 'Fail them two by two' }));
    expect(screen.getByRole('progressbar', { name: 'Failing them two by two' })).toHaveAttribute(
      'value',
      '7',
    );
    expect(screen.getByText('Failing them two by two: 7 of 30')).toBeVisible();
    await user.click(screen.getByRole('button', { name: 'Cancel' }));
    expect(worker.ended).toBe(1);
    expect(screen.getByRole('button', { name: 'Fail them two by two' })).toBeVisible();
    worker.holds = false;
    await user.click(screen.getByRole('button', { name: 'Fail them two by two' }));
    const table = await screen.findByRole('table', { name: 'Pairs of failures' });
    await user.click(within(table).getAllByRole('button', { name: 'fw-ho-1' })[0]!);
    await waitFor(() => expect(address()).toHaveTextContent('failed=devices/fw-ho@1,devices/fw-ho@2'));
  });

  test('says what a failover moves, how long it takes and what becomes of each association', async () => {
    renderTab('?outage=failovers');
    const row = await screen.findByRole('row', { name: /^fw-ho-1/ });
    expect(row).toHaveTextContent('fw-ho-2');
    expect(row).toHaveTextContent('as-ho-gul kept with its keys after 2 s');
    expect(row).toHaveTextContent('nothing');
  });

  test('gives the smallest cut of each segment, which a press fails', async () => {
    const { user } = renderTab('?outage=cuts');
    await user.click(await screen.findByRole('button', { name: 'B Berth control' }));
    expect(address()).toHaveTextContent('failed=links/cb-ho-up1');
  });

  test('an empty sheet teaches what it is for', () => {
    renderTab('', emptyDesign('Empty'));
    expect(screen.getByText('There is nothing to fail yet')).toBeVisible();
  });
});
