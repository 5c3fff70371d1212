import { ReactFlowProvider } from '@xyflow/react';
import { act, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import type { DeskTab } from '../../../src/canvas/desk-tab.ts';
import { GeometryProvider } from '../../../src/canvas/geometry-context.tsx';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { TooltipProvider } from '../../../src/components/tooltip.tsx';
import { elementKey } from '../../../src/drawing/decorations.ts';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { useTraceFromHere } from '../../../src/features/trace/use-trace-from-here.ts';
import { useTraceTab } from '../../../src/features/trace/use-trace-tab.tsx';
import { useSearchValues } from '../../../src/lib/use-search-values.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { openInMemory } from '../../canvas/inspector/render-inspector.tsx';
import { meshDesign, pairDesign } from '../../support/designs.ts';

interface Desk {
  readonly tab: () => DeskTab;
  readonly address: () => URLSearchParams;
  readonly traceFromHere: (ref: ElementRef) => void;
}

/** The tab with its panel and its side, on a desk without a sheet. */
const renderTab = (
  document: Design,
  query: string,
  {
    onShowFinding = () => undefined,
    editable = false,
  }: { readonly onShowFinding?: (key: string) => void; readonly editable?: boolean } = {},
) => {
  const design = openInMemory(document, editable);
  const desk: { current: Desk | undefined } = { current: undefined };
  function Surface() {
    const { valueOf } = useSearchValues();
    const { search } = useLocation();
    const tab = useTraceTab(valueOf('drawer') === 'trace', { onShowFinding });
    const { traceFromHere } = useTraceFromHere();
    // Tests look at what the desk would be given.
    desk.current = { tab: () => tab, address: () => new URLSearchParams(search), traceFromHere };
    return (
      <>
        <div>{tab.panel}</div>
        <aside aria-label="Frame trace">{tab.side}</aside>
      </>
    );
  }
  render(
    <TooltipProvider>
      <MemoryRouter initialEntries={[`/?${query}`]}>
        <OpenDesignProvider open={() => design}>
          <ChecksProvider>
            <ReactFlowProvider>
              <GeometryProvider>
                <Surface />
              </GeometryProvider>
            </ReactFlowProvider>
          </ChecksProvider>
        </OpenDesignProvider>
      </MemoryRouter>
      <ToastRegion />
    </TooltipProvider>,
  );
  return { design, desk: () => desk.current!, user: userEvent.setup() };
};

const failing = 'drawer=trace&from=h-s0-a&to=h-s1-a&send=tcp-full-size&bytes=1500';
const side = () => within(screen.getByRole('complementary', { name: 'Frame trace' }));
const hopList = () => within(screen.getByRole('list', { name: /^Hops/ }));
const verdict = () => screen.getByText(/^(Dropped|Reaches)/).closest('p');

describe('the empty tab', () => {
  it('teaches by questions about this design, each asked by one press', async () => {
    const { user, desk } = renderTab(pairDesign(), 'drawer=trace');
    expect(screen.getByText('Follow one frame, hop by hop')).toBeInTheDocument();
    expect(desk().tab().decorations).toBeUndefined();
    await user.click(screen.getByRole('button', { name: /^A ping from h-s1-a to h-s0-a/ }));
    expect(desk().address().get('from')).toBe('h-s1-a');
    expect(verdict()).toHaveTextContent('Reaches h-s0-a.');
  });

  it('asks for the host that a frame goes to', () => {
    renderTab(pairDesign(), 'drawer=trace&from=h-s0-a&send=ping');
    expect(screen.getByText(/h-s0-a sends it to whom\?/)).toBeInTheDocument();
  });

  it('computes nothing and shows nothing while another tab is open', () => {
    const { desk } = renderTab(pairDesign(), failing.replace('drawer=trace', 'drawer=outline'));
    expect(desk().tab()).toEqual({
      value: 'trace',
      label: 'Frame trace',
      usualHeightPx: 318,
      panel: null,
    });
  });
});

describe('a probe in the address', () => {
  it('is followed, its hops told in sentences and its verdict said', () => {
    const { desk } = renderTab(pairDesign(), failing);
    const hops = hopList().getAllByRole('button');
    expect(hops).toHaveLength(4);
    expect(hops[3]).toHaveTextContent(
      /Hop 4, fw-s0 to Coastal access .*1604 bytes in a pipe of 1500, 104 over/,
    );
    expect(verdict()).toHaveTextContent('Dropped at fw-s0 without a word.');
    expect(side().getByText('Not reached: fw-s1, sw-s1, h-s1-a.')).toBeInTheDocument();
    const { decorations } = desk().tab();
    expect(decorations?.hops).toHaveLength(4);
    expect(decorations?.tones?.[elementKey({ collection: 'devices', id: 'sw-s0' })]).toEqual(['lit']);
  });

  it('shows what fits and what would help', () => {
    renderTab(pairDesign(), failing);
    for (const [label, value] of [
      ['Largest IP packet', '1396 B'],
      ['TCP MSS to set', '1356 B'],
      ['MTU for 1500 whole', '1604 B'],
      ['Ping to test, DF', '1368 B'],
    ] as const)
      expect(side().getByText(label).parentElement).toHaveTextContent(value);
    expect(side().getByText('Hosts at MTU 1396, by DHCP option 26')).toBeInTheDocument();
  });

  it('is named where it can’t be read, and can be taken out of the address', async () => {
    const { user, desk } = renderTab(pairDesign(), `${failing}&ttl=soon`);
    const notice = screen.getByText('TTL is soon: expected a whole number of hops from 1 to 255.', {
      selector: 'div',
    });
    expect(notice).toBeInTheDocument();
    expect(screen.queryByRole('list', { name: /^Hops/ })).not.toBeInTheDocument();
    await user.click(screen.getByRole('button', { name: 'Take it out' }));
    expect(desk().address().has('ttl')).toBe(false);
    expect(verdict()).toHaveTextContent('Dropped at fw-s0');
  });

  it('is refused with the engine’s own words where it contradicts itself', () => {
    renderTab(pairDesign(), 'drawer=trace&from=h-s0-a&to=h-s0-a&send=ping');
    expect(screen.getAllByText(/another host than the source/).length).toBeGreaterThan(0);
  });

  it('says so once its host is deleted meanwhile', async () => {
    const { design } = renderTab(pairDesign(), failing, { editable: true });
    expect(verdict()).toBeInTheDocument();
    act(() => void design.commit('Remove', { devices: { 'h-s0-a': null }, links: { 'cb-h-s0-a': null } }));
    expect(
      await screen.findByText(/From is h-s0-a: expected a host of this design.*removed/, { selector: 'div' }),
    ).toBeInTheDocument();
  });
});

describe('the form', () => {
  it('puts every change into the address and follows it at once', async () => {
    const { user, desk } = renderTab(pairDesign(), failing);
    const bytes = side().getByLabelText('IP packet, bytes');
    await user.clear(bytes);
    await user.type(bytes, '1396{Enter}');
    expect(desk().address().get('bytes')).toBe('1396');
    expect(verdict()).toHaveTextContent('Reaches h-s1-a.');
    await user.click(within(side().getByRole('radiogroup', { name: 'DF' })).getByText('clear'));
    expect(desk().address().get('df')).toBe('no');
  });

  it('says what is missing beside its button, and in the cell once it is pressed all the same', async () => {
    const { user } = renderTab(pairDesign(), 'drawer=trace&from=h-s0-a&send=ping');
    const button = side().getByRole('button', { name: 'Send it' });
    expect(button).toHaveAccessibleDescription(/^To is empty: choose a host/);
    expect(side().getByRole('combobox', { name: 'To' })).not.toBeInvalid();
    await user.click(button);
    expect(side().getByRole('combobox', { name: 'To' })).toBeInvalid();
    expect(side().getByRole('combobox', { name: 'To' })).toHaveFocus();
    await user.keyboard('h-s1{Enter}');
    expect(button).not.toHaveAccessibleDescription();
    expect(verdict()).toHaveTextContent('Reaches h-s1-a.');
  });

  it('refuses a length that no packet has where it is typed', async () => {
    const { user, desk } = renderTab(pairDesign(), failing);
    const bytes = side().getByLabelText('IP packet, bytes');
    await user.clear(bytes);
    await user.type(bytes, '12{Enter}');
    expect(side().getByRole('alert')).toHaveTextContent('IP packet, bytes 12 is out of range');
    expect(desk().address().get('bytes')).toBe('1500');
  });

  it('finds an end by a few letters, with the keyboard alone', async () => {
    const { user, desk } = renderTab(pairDesign(), 'drawer=trace&send=ping');
    await user.click(side().getByRole('combobox', { name: 'From' }));
    await user.keyboard('gullhaven h-{ArrowDown}{ArrowUp}{Enter}');
    expect(desk().address().get('from')).toBe('h-s1-a');
    await user.click(side().getByRole('combobox', { name: 'To' }));
    await user.keyboard('zzz');
    expect(side().getByText('No host of that name')).toBeInTheDocument();
    await user.keyboard('{Escape}');
    expect(side().queryByRole('listbox', { name: 'To' })).not.toBeInTheDocument();
  });

  it('takes an end from the sheet, and says why a part is none', async () => {
    const { user, desk } = renderTab(pairDesign(), 'drawer=trace&send=ping');
    expect(desk().tab().onPick).toBeUndefined();
    await user.click(side().getByRole('button', { name: 'Pick From on the sheet' }));
    act(() => desk().tab().onPick?.({ collection: 'tunnels', id: 'tn-s0-s1-a' }));
    expect(await screen.findByText(/tn-s0-s1-a can’t be an end of a trace/)).toBeInTheDocument();
    act(() => desk().tab().onPick?.({ collection: 'devices', id: 'sw-s0', port: 'p2' }));
    expect(desk().address().get('from')).toBe('sw-s0/p2');
    expect(desk().tab().onPick).toBeUndefined();
    await user.click(side().getByRole('button', { name: 'Pick To on the sheet' }));
    await user.keyboard('{Escape}');
    expect(desk().tab().onPick).toBeUndefined();
  });

  it('starts from what is selected when the tab is opened', () => {
    const { desk } = renderTab(pairDesign(), '');
    act(() => desk().traceFromHere({ collection: 'devices', id: 'h-s1-a' }));
    expect(desk().address().get('drawer')).toBe('trace');
    expect(desk().address().get('from')).toBe('h-s1-a');
  });

  it('keeps the host and drops the sizes when something else is sent', async () => {
    const { user, desk } = renderTab(pairDesign(), `${failing}&df=yes&ttl=9`);
    await user.selectOptions(side().getByLabelText('What is sent'), 'BFD');
    const address = desk().address();
    expect([address.get('send'), address.get('to'), address.get('bytes'), address.get('ttl')]).toEqual([
      'bfd',
      'h-s1-a',
      null,
      null,
    ]);
    expect(side().getByLabelText('TTL')).toHaveDisplayValue('255');
  });
});

describe('playing', () => {
  it('steps and scrubs, by keys as well, and the sheet goes along', async () => {
    const { user, desk } = renderTab(pairDesign(), failing);
    const lit = () => desk().tab().decorations?.hops?.length;
    await user.click(screen.getByRole('button', { name: 'One hop back' }));
    expect(screen.getByText('Hop 3 of 4')).toBeInTheDocument();
    expect(lit()).toBe(3);
    const slide = screen.getByRole('slider', { name: 'Hops passed' });
    expect(slide).toHaveAttribute('aria-valuetext', 'hop 3 of 4');
    await user.click(hopList().getAllByRole('button')[0]!);
    expect(lit()).toBe(1);
    await user.keyboard('{ArrowDown}');
    expect(lit()).toBe(2);
    expect(hopList().getAllByRole('button')[1]).toHaveFocus();
    await user.keyboard('{End}');
    expect(lit()).toBe(4);
  });

  it('runs hop by hop from the sender to the end', async () => {
    const { user, desk } = renderTab(pairDesign(), failing);
    await user.click(side().getByRole('button', { name: 'Send it' }));
    expect(desk().tab().decorations?.hops?.length).toBeLessThan(4);
    await waitFor(() => expect(desk().tab().decorations?.hops).toHaveLength(4));
    expect(screen.getByRole('button', { name: 'Play' })).toBeInTheDocument();
  });

  it('lights all at once where motion is unwanted', async () => {
    const still = vi
      .spyOn(window, 'matchMedia')
      .mockImplementation((media) => ({ ...matching(media), matches: media.includes('reduce') }));
    const { user, desk } = renderTab(pairDesign(), failing);
    await user.click(side().getByRole('button', { name: 'Send it' }));
    expect(desk().tab().decorations?.hops).toHaveLength(4);
    still.mockRestore();
  });
});

const matching = (media: string): MediaQueryList => ({
  media,
  matches: false,
  onchange: null,
  addEventListener: () => undefined,
  removeEventListener: () => undefined,
  addListener: () => undefined,
  removeListener: () => undefined,
  dispatchEvent: () => false,
});

describe('what comes of it', () => {
  it('leads to the finding that would have told', async () => {
    const shown = vi.fn();
    const { user } = renderTab(meshDesign(3), 'drawer=trace&from=h-s0-a&send=arp', {
      onShowFinding: shown,
    });
    expect(screen.getByText('A storm: copies go round for ever.')).toBeInTheDocument();
    expect(screen.getByRole('region', { name: 'The storm' })).toHaveTextContent('The cycle, 3 hops');
    await user.click(screen.getByRole('button', { name: 'Show the finding' }));
    expect(shown).toHaveBeenCalledWith(expect.stringMatching(/^storm-any-to-any-mesh/));
  });

  it('can be sent again at the length that passes', async () => {
    const { user, desk } = renderTab(pairDesign(), failing);
    await user.click(screen.getByRole('button', { name: 'Send 1396 B instead' }));
    expect(desk().address().get('bytes')).toBe('1396');
    expect(verdict()).toHaveTextContent('Reaches h-s1-a.');
  });

  it('stands in a table as well', async () => {
    const { user } = renderTab(pairDesign(), failing);
    await user.click(screen.getByRole('button', { name: 'Table' }));
    const table = within(screen.getByRole('table', { name: /^Hops/ }));
    expect(table.getByText('fw-s0 to Coastal access').closest('tr')).toHaveTextContent(
      '16041500104Eth 14 + IP 20',
    );
  });

  it('folds branches, and says how their copies end', async () => {
    const { user } = renderTab(
      meshDesign(3, { join: { isolation: 'mesh' } }),
      'drawer=trace&from=h-s0-a&send=arp',
    );
    const heads = hopList().getAllByRole('button', { expanded: true });
    expect(heads[0]).toHaveTextContent(/^To Gullhaven through tn-s0-s1-a.*1 received/);
    const before = hopList().getAllByRole('listitem').length;
    await user.click(heads[0]!);
    expect(hopList().getAllByRole('listitem').length).toBeLessThan(before);
  });
});

describe('a second probe', () => {
  it('is a variation of the first, both verdicts side by side and the hop where they part', async () => {
    const { user, desk } = renderTab(pairDesign(), `${failing}&vs-bytes=1396`);
    expect(screen.getByText('Second with Bytes 1396.')).toBeInTheDocument();
    expect(screen.getByText(/They share 3 hops and part at hop 4/)).toBeInTheDocument();
    expect(screen.getByText('Dropped at fw-s0 without a word.')).toBeInTheDocument();
    expect(screen.getByText('Reaches h-s1-a.')).toBeInTheDocument();
    expect(desk().tab().decorations?.hops).toHaveLength(4);
    await user.click(
      within(screen.getByRole('radiogroup', { name: 'Probe that the sheet shows' })).getByText('Second'),
    );
    expect(desk().tab().decorations?.hops).toHaveLength(6);
    expect(side().getByLabelText('IP packet, bytes')).toHaveDisplayValue('1396');
    await user.click(screen.getByRole('button', { name: 'Compare' }));
    expect(desk().address().has('vs-bytes')).toBe(false);
  });

  it('differs in DF at first, and follows the first in all else', async () => {
    const { user, desk } = renderTab(pairDesign(), failing);
    await user.click(screen.getByRole('button', { name: 'Compare' }));
    expect(desk().address().get('vs-df')).toBe('no');
    expect(screen.getByText('Second with DF clear.')).toBeInTheDocument();
    const bytes = side().getByLabelText('IP packet, bytes');
    await user.clear(bytes);
    await user.type(bytes, '900{Enter}');
    expect(desk().address().get('bytes')).toBe('900');
    expect(desk().address().has('vs-bytes')).toBe(false);
    expect(screen.getByText('Both take the same way to the same end.')).toBeInTheDocument();
  });
});
