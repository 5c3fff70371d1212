import { fireEvent, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { beforeEach, describe, expect, test, vi } from 'vitest';
import { ToastRegion } from '../../../src/components/toast.tsx';
import type { Design } from '../../../src/engine/model/design.ts';
import type { LoadRequest } from '../../../src/features/load/use-load-report.ts';
import { useLoadTab } from '../../../src/features/load/use-load-tab.tsx';
import { loadSteps } from '../../../src/engine/load/load-of.ts';
import { indexNetwork } from '../../../src/engine/network/index-network.ts';
import { endOf } from '../../../src/lib/worker-run.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { openInMemory } from '../../canvas/inspector/render-inspector.tsx';
import { pairDesign } from '../../support/designs.ts';

const worker = vi.hoisted(() => ({ started: 0, ended: 0, holds: false }));
// jsdom has no workers: this one does the same work as soon as it is asked, or says how far it is.
vi.mock('../../../src/features/load/start-load-worker.ts', () => ({
  startLoadWorker: () => {
    worker.started += 1;
    const self = {
      onmessage: undefined as ((event: { readonly data: unknown }) => void) | undefined,
      postMessage: (request: LoadRequest) => {
        if (worker.holds) return self.onmessage?.({ data: { progress: { done: 7, total: 40 } } });
        const { design, options } = structuredClone(request);
        const result = structuredClone(endOf(loadSteps(indexNetwork(design), options)));
        return self.onmessage?.({ data: { result } });
      },
      terminate: () => void (worker.ended += 1),
    };
    return self;
  },
}));
beforeEach(() => Object.assign(worker, { started: 0, ended: 0, holds: false }));

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');

function Desk() {
  const { panel, side, decorations } = useLoadTab(true);
  return (
    <>
      {panel}
      <aside>{side}</aside>
      <output aria-label="tags">{decorations?.tags?.map(({ text }) => text).join(', ')}</output>
      <output aria-label="address">{useLocation().search}</output>
    </>
  );
}

const renderTab = (
  address: string,
  { design = demo, editable = true }: { readonly design?: Design; readonly editable?: boolean } = {},
) => {
  const open = openInMemory(design, editable);
  render(
    <MemoryRouter initialEntries={[`/${address}`]}>
      <OpenDesignProvider open={() => open}>
        <ChecksProvider>
          <Desk />
        </ChecksProvider>
      </OpenDesignProvider>
      <ToastRegion />
    </MemoryRouter>,
  );
  return { user: userEvent.setup(), open, side: within(screen.getByRole('complementary')) };
};
const address = () => screen.getByLabelText('address');

describe('the load tab', () => {
  test('names the first bottleneck, shows it on the sheet and how it adds up', () => {
    const { side } = renderTab('?limits-of=transports');
    expect(
      screen.getByText(
        /^The rate ordered for fw-ske wan1 on Coastal access, out, fills first: 65 % of 10 Mbit\/s/,
      ),
    ).toBeVisible();
    expect(screen.getByLabelText('tags')).toHaveTextContent(/^first full, 65 %/);
    expect(side.getByText('Camera pictures')).toBeVisible();
    expect(side.getByText('6 Mbit/s of packets, grown')).toBeVisible();
  });

  test('the working follows the row that is pressed', async () => {
    const { user, side } = renderTab('?limits-of=gateways');
    await user.click(screen.getAllByText('packets/s, encrypted')[0]!);
    expect(side.getByText(/A gateway handles frames one by one/)).toBeVisible();
  });

  test('what-if goes by slider and by number, and stands in the address', async () => {
    const { user } = renderTab('?limits-of=transports');
    const slider = screen.getByRole('slider', { name: 'What if all demands were' });
    fireEvent.change(slider, { target: { value: '130' } });
    expect(slider).toHaveAttribute('aria-valuetext', '2 times as much');
    expect(
      screen.getByText(/is asked for 13 Mbit\/s and has 10 Mbit\/s: only 77 % of this fits/),
    ).toBeVisible();
    expect(address()).toHaveTextContent('limits-of=transports');
    fireEvent.pointerUp(slider);
    expect(address()).toHaveTextContent('times=2');
    const times = screen.getByRole('textbox', { name: 'Times' });
    await user.clear(times);
    await user.type(times, '1001{Enter}');
    expect(screen.getByText('Times 1001 is not possible. Type a number above 0, up to 1000.')).toBeVisible();
    await user.clear(times);
    await user.type(times, '1,5{Enter}');
    expect(address()).toHaveTextContent('times=1.5');
  });

  test('an address that can’t be says so and leads back', async () => {
    const { user } = renderTab('?times=lots');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'Times lots is not possible: expected a number above 0, up to 1000.',
    );
    await user.click(screen.getByRole('button', { name: 'Start from the demands as they are' }));
    expect(screen.getByText(/fills first/)).toBeVisible();
  });

  test('a window holds a single flow back, by the formula and its source', async () => {
    const { user, side } = renderTab('?load=demands');
    expect(side.getByText(/Reckoned without a window/)).toBeVisible();
    await user.type(screen.getByRole('textbox', { name: 'TCP window, bytes' }), '65535{Enter}');
    // RFC 7323 section 1.1: 65,535 B in a round trip of 36 ms are 14.56 Mbit/s; what was ordered at the terminal is less.
    expect(
      side.getByText(/Window \/ round trip: 65\.5 kB \/ 36 ms\. RFC 7323, section 1\.1\./),
    ).toBeVisible();
    expect(side.getByText('14.6 Mbit/s')).toBeVisible();
  });

  test('an edit to a demand shows at once', async () => {
    const { user, open } = renderTab('?load=demands');
    const rate = screen.getByRole('textbox', { name: 'Rate there of Camera pictures' });
    await user.clear(rate);
    await user.type(rate, '12 Mbit/s{Enter}');
    expect(open.store.getState().document.demands['dm-cctv']?.forwardBps).toBe(12_000_000);
    expect(await screen.findByText(/is asked for 13 Mbit\/s and has 10 Mbit\/s/)).toBeVisible();
  });

  test('who may only read has figures and no fields', () => {
    renderTab('?load=demands', { editable: false });
    expect(screen.queryByRole('textbox', { name: /^Rate/ })).not.toBeInTheDocument();
    expect(screen.queryByRole('button', { name: 'Add demands' })).not.toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Show the demand' })).toBeVisible();
  });

  test('without demands it teaches what one is, and adds one for each segment', async () => {
    const { user, open } = renderTab('', { design: pairDesign({ segments: ['a', 'b'] }) });
    expect(screen.getByText('No demand is stated')).toBeVisible();
    await user.click(screen.getByRole('button', { name: 'Add a demand for each of 2 segments' }));
    const demands = Object.values(open.store.getState().document.demands);
    expect(demands.map(({ segment }) => segment).sort()).toEqual(['a', 'b']);
    expect(
      await screen.findByText(/Nothing can be counted yet: a demand needs its rate and its frame mix/),
    ).toBeVisible();
    expect(screen.getByRole('table', { name: 'Demands on their way' })).toBeVisible();
  });

  test('the focus goes on in the inspector, where the first of them waits for its rate', async () => {
    const { user, open } = renderTab('', { design: pairDesign({ segments: ['a', 'b'] }) });
    const aside = document.createElement('aside');
    aside.setAttribute('aria-label', 'Inspector');
    const field = aside.appendChild(document.createElement('input'));
    document.body.append(aside);
    await user.click(screen.getByRole('button', { name: 'Add a demand for each of 2 segments' }));
    expect(open.store.getState().selection).toMatchObject([{ collection: 'demands' }]);
    expect(field).toHaveFocus();
    aside.remove();
  });

  test('without demands a reader is taught and offered nothing', () => {
    renderTab('', { design: pairDesign(), editable: false });
    expect(screen.getByText('No demand is stated')).toBeVisible();
    expect(screen.queryByRole('button', { name: /Add a demand/ })).not.toBeInTheDocument();
  });
});

describe('the load of a large design', () => {
  /** The demo among so many hosts that nobody waits for it on the page. */
  const large: Design = {
    ...demo,
    devices: {
      ...demo.devices,
      ...Object.fromEntries(
        Array.from({ length: 160 }, (_, i) => [
          `spare-${i}`,
          { kind: 'host' as const, name: `spare-${i}`, site: Object.keys(demo.sites)[0]!, ports: {} },
        ]),
      ),
    },
  };

  test('comes from a worker, and is the same', () => {
    const { side } = renderTab('?limits-of=transports', { design: large });
    expect(worker.started).toBe(1);
    expect(
      screen.getByText(/^The rate ordered for fw-ske wan1 on Coastal access, out, fills first: 65 %/),
    ).toBeVisible();
    expect(side.getByText('6 Mbit/s of packets, grown')).toBeVisible();
  });

  test('says how far it is, and ends when it is cancelled', async () => {
    worker.holds = true;
    const { user } = renderTab('', { design: large });
    expect(screen.getByRole('progressbar', { name: 'Laying demands on their way' })).toHaveValue(7);
    await user.click(screen.getByRole('button', { name: 'Cancel' }));
    expect(worker.ended).toBe(worker.started);
    expect(screen.queryByRole('progressbar')).toBeNull();
    worker.holds = false;
    await user.click(screen.getByRole('button', { name: 'Work it out' }));
    expect(screen.getByText(/fills first: 65 %/)).toBeVisible();
  });
});
