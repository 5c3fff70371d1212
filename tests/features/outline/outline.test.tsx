import { act, fireEvent, screen, waitFor, within } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { clearDesk } from '../../../src/canvas/desk-state.ts';
import { emptyDesign } from '../../../src/engine/model/design.ts';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { pairDesign } from '../../support/designs.ts';
import { renderOutline } from './render-outline.tsx';

const pair = pairDesign({ segments: ['a', 'b'] });
const haPair = pairDesign({ segments: ['a'], hub: 'ha-pair' });
const first = <T extends object>(entries: T): string => Object.keys(entries)[0]!;

afterEach(() => act(() => clearDesk()));

describe('the keyboard in the outline', () => {
  it('stops at one row, moves by arrows and selects what it comes to', async () => {
    const { user, row, selection } = renderOutline(pair);
    await user.click(row('Sites, 2'));
    await user.keyboard('{ArrowDown}');
    expect(row('Site Gullhaven')).toHaveFocus();
    await waitFor(() => expect(selection()).toEqual([{ collection: 'sites', id: 's1' }]));
    await user.keyboard('{ArrowDown}{ArrowDown}');
    expect(row('Host h-s1-a')).toHaveFocus();
    expect(row('Host h-s1-a')).toHaveAttribute('aria-selected', 'true');
    expect(row('Site Gullhaven')).toHaveAttribute('aria-selected', 'false');
    expect(screen.getAllByRole('treeitem').filter((item) => item.tabIndex === 0)).toHaveLength(1);
  });

  it('moves on at once while a key is held, and lets the sheet follow when it rests', async () => {
    const { user, row, design } = renderOutline(pair);
    await user.click(row('Site Gullhaven'));
    const followed: string[] = [];
    design.store.subscribe(({ selection }) => followed.push(selection.map(({ id }) => id).join()));
    for (const from of ['Site Gullhaven', 'Firewall fw-s1', 'Host h-s1-a'])
      fireEvent.keyDown(row(from), { key: 'ArrowDown' });
    expect(row('Host h-s1-b')).toHaveFocus();
    expect(row('Host h-s1-b')).toHaveAttribute('aria-selected', 'true');
    await waitFor(() => expect(followed).toEqual(['h-s1-b']));
  });

  it('does to the row that it has just come to what the next key asks for', async () => {
    const { user, row, document: design } = renderOutline(pair);
    await user.click(row('Firewall fw-s1'));
    fireEvent.keyDown(row('Firewall fw-s1'), { key: 'ArrowDown' });
    fireEvent.keyDown(row('Host h-s1-a'), { key: 'Delete' });
    expect(Object.keys(design().devices)).not.toContain('h-s1-a');
    expect(Object.keys(design().devices)).toContain('fw-s1');
  });

  it('opens, goes in, goes out and shuts', async () => {
    const { user, row } = renderOutline(pair);
    await user.click(row('Firewall fw-s1'));
    expect(row('Firewall fw-s1')).toHaveAttribute('aria-expanded', 'false');
    await user.keyboard('{ArrowRight}');
    expect(row('Firewall fw-s1')).toHaveAttribute('aria-expanded', 'true');
    await user.keyboard('{ArrowRight}');
    expect(document.activeElement).toHaveAttribute('aria-level', '4');
    expect(document.activeElement).toHaveAttribute('aria-posinset', '1');
    await user.keyboard('{ArrowLeft}');
    expect(row('Firewall fw-s1')).toHaveFocus();
    await user.keyboard('{ArrowLeft}{ArrowLeft}');
    expect(row('Site Gullhaven')).toHaveFocus();
  });

  it('goes to the row that is typed', async () => {
    const { user, row } = renderOutline(pair);
    await user.click(row('Sites, 2'));
    await user.keyboard('sw-s0');
    expect(row('Switch sw-s0')).toHaveFocus();
  });

  it('extends with Shift and moves alone with Ctrl, and Ctrl with Space adds', async () => {
    const { user, row, selection } = renderOutline(pair);
    await user.click(row('Firewall fw-s1'));
    await user.keyboard('{Shift>}{ArrowDown}{ArrowDown}{/Shift}');
    await waitFor(() => expect(selection().map(({ id }) => id)).toEqual(['fw-s1', 'h-s1-a', 'h-s1-b']));
    await user.keyboard('{Shift>}{ArrowUp}{/Shift}');
    await waitFor(() => expect(selection().map(({ id }) => id)).toEqual(['fw-s1', 'h-s1-a']));
    await user.keyboard('{Control>}{ArrowDown}{ArrowDown}{/Control}');
    expect(row('Switch sw-s1')).toHaveFocus();
    expect(selection()).toHaveLength(2);
    await user.keyboard('{Control>} {/Control}');
    expect(selection().map(({ id }) => id)).toEqual(['fw-s1', 'h-s1-a', 'sw-s1']);
  });

  it('adds and takes away with Ctrl and a click, and takes a range with Shift and a click', async () => {
    const { user, row, selection } = renderOutline(pair);
    await user.click(row('Firewall fw-s1'));
    await user.keyboard('{Control>}');
    await user.click(row('Switch sw-s1'));
    await user.click(row('Firewall fw-s1'));
    await user.keyboard('{/Control}');
    expect(selection().map(({ id }) => id)).toEqual(['sw-s1']);
    await user.click(row('Firewall fw-s1'));
    await user.keyboard('{Shift>}');
    await user.click(row('Host h-s1-b'));
    await user.keyboard('{/Shift}');
    expect(selection().map(({ id }) => id)).toEqual(['fw-s1', 'h-s1-a', 'h-s1-b']);
  });

  it('opens the first field of the inspector with Enter', async () => {
    const { user, row } = renderOutline(pair);
    await user.click(row('Switch sw-s1'));
    await user.keyboard('{Enter}');
    expect(screen.getByRole('textbox', { name: 'Name' })).toHaveFocus();
    expect(screen.getByRole('textbox', { name: 'Name' })).toHaveValue('sw-s1');
  });
});

describe('the selection', () => {
  it('that is made elsewhere opens the way to its row', () => {
    const { design, row } = renderOutline(pair);
    const id = first(pair.endpoints);
    act(() => design.select([{ collection: 'endpoints', id }]));
    const shown = row(`Loopback endpoint ${pair.endpoints[id]!.name}`);
    expect(shown).toHaveAttribute('aria-selected', 'true');
    expect(shown.tabIndex).toBe(0);
    // The focus stays where the person is.
    expect(shown).not.toHaveFocus();
  });

  it('shows at every row that names the element', async () => {
    const { user, row, rows, design } = renderOutline(pair);
    const id = first(pair.tunnels);
    act(() => design.select([{ collection: 'endpoints', id: pair.tunnels[id]!.a.endpoint }]));
    await user.click(row(`Loopback endpoint ${pair.endpoints[pair.tunnels[id]!.a.endpoint]!.name}`));
    await user.keyboard('{ArrowRight}');
    act(() => design.select([{ collection: 'tunnels', id }]));
    const selected = rows().filter((each) => each.getAttribute('aria-selected') === 'true');
    expect(selected).toHaveLength(2);
  });
});

describe('changing the design in the outline', () => {
  it('renames in the row with F2: Enter keeps, Escape does not, and an empty name is refused', async () => {
    const { user, row, document: now } = renderOutline(pair);
    await user.click(row('Switch sw-s1'));
    await user.keyboard('{F2}');
    const field = screen.getByRole('textbox', { name: 'Name of sw-s1' });
    expect(field).toHaveFocus();
    await user.keyboard('pier-switch{Enter}');
    expect(now().devices['sw-s1']?.name).toBe('pier-switch');
    await waitFor(() => expect(row('Switch pier-switch')).toHaveFocus());
    await user.keyboard('{F2}other{Escape}');
    expect(now().devices['sw-s1']?.name).toBe('pier-switch');
    await waitFor(() => expect(row('Switch pier-switch')).toHaveFocus());
    await user.keyboard('{F2}{Control>}a{/Control}{Delete}{Enter}');
    expect(screen.getByRole('alert')).toHaveTextContent(/^Name is empty/);
    expect(now().devices['sw-s1']?.name).toBe('pier-switch');
  });

  it('renames a member of a pair by its own name', async () => {
    const { user, row, document: now } = renderOutline(haPair);
    await user.click(row('HA pair fw-s0'));
    await user.keyboard('{ArrowRight}{ArrowRight}{F2}north{Enter}');
    const device = now().devices['fw-s0']!;
    expect(device.kind === 'ha-pair' && device.memberNames[1]).toBe('north');
    expect(device.name).toBe('fw-s0');
  });

  it('removes with Delete, goes on from the neighbour, and takes it back from the message', async () => {
    const { user, row, document: now } = renderOutline(pair);
    await user.click(row('Host h-s1-a'));
    await user.keyboard('{Delete}');
    expect(now().devices['h-s1-a']).toBeUndefined();
    await waitFor(() => expect(row('Host h-s1-b')).toHaveFocus());
    expect(await screen.findByText('Removed h-s1-a.')).toBeInTheDocument();
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(now().devices['h-s1-a']).toBeDefined();
  });

  it('removes all that is selected', async () => {
    const { user, row, document: now } = renderOutline(pair);
    await user.click(row('Host h-s1-a'));
    await user.keyboard('{Shift>}{ArrowDown}{/Shift}{Delete}');
    expect(Object.keys(now().devices).filter((id) => id.startsWith('h-s1'))).toEqual([]);
    expect(await screen.findByText('Removed 2 elements.')).toBeInTheDocument();
  });

  it('takes a tunnel out of a bridge and leaves the tunnel', async () => {
    const { user, document: now, design } = renderOutline(pair);
    const [id, bridge] = Object.entries(pair.forwarders)[0]!;
    const circuit = Object.entries(bridge.circuits).find(([, each]) => each.kind === 'tunnel')!;
    act(() => design.select([{ collection: 'forwarders', id }]));
    const bridgeRow = screen.getAllByRole('treeitem', { selected: true })[0]!;
    await user.click(bridgeRow);
    await user.keyboard('{ArrowRight}');
    await user.click(screen.getByRole('treeitem', { name: /^Circuit Tunnel/ }));
    await user.keyboard('{Delete}');
    expect(Object.keys(now().forwarders[id]!.circuits)).not.toContain(circuit[0]);
    expect(Object.keys(now().tunnels)).toEqual(Object.keys(pair.tunnels));
    expect(await screen.findByText(/^Took .* out of /)).toBeInTheDocument();
  });

  it('does not remove one member of a pair, and says what can be done', async () => {
    const { user, row, document: now } = renderOutline(haPair);
    await user.click(row('HA pair fw-s0'));
    await user.keyboard('{ArrowRight}{ArrowRight}{Delete}');
    expect(now().devices['fw-s0']).toBeDefined();
    expect(await screen.findByText(/goes only with its pair: remove fw-s0/)).toBeInTheDocument();
  });

  it('adds sites, devices, endpoints and segments from nothing, each with the focus', async () => {
    const { user, row, document: now } = renderOutline(emptyDesign('By words'));
    await user.click(within(row('Sites, none yet')).getByRole('button', { name: 'Add a site' }));
    await waitFor(() => expect(row('Site Site 1')).toHaveFocus());
    await user.keyboard('{Shift>}{F10}{/Shift}');
    await user.click(await screen.findByRole('menuitem', { name: 'Add a firewall here' }));
    await waitFor(() => expect(row('Firewall fw-1')).toHaveFocus());
    await user.keyboard('{ContextMenu}');
    await user.click(await screen.findByRole('menuitem', { name: 'Add an endpoint' }));
    await waitFor(() => expect(row('Loopback endpoint lo-fw-1')).toHaveFocus());
    await user.click(within(row('Segments, none yet')).getByRole('button', { name: 'Add a segment' }));
    await waitFor(() => expect(row('Segment A Segment A')).toHaveFocus());
    expect(Object.values(now().devices).map(({ kind }) => kind)).toEqual(['firewall']);
    expect(Object.values(now().endpoints)).toHaveLength(1);
  });

  it('duplicates, locks and shows by the row’s menu, and gives the focus back', async () => {
    const { user, row, document: now } = renderOutline(pair);
    const choose = async (item: string): Promise<void> => {
      await user.keyboard('{ContextMenu}');
      await user.click(await screen.findByRole('menuitem', { name: new RegExp(`^${item}`) }));
    };
    await user.click(row('Switch sw-s1'));
    await choose('Lock its place');
    expect(now().layout.devices?.['sw-s1']?.locked).toBe(true);
    await waitFor(() => expect(document.activeElement).toHaveAccessibleName(/^Switch sw-s1, .*place locked/));
    await choose('Free its place');
    expect(now().layout.devices?.['sw-s1']?.locked).toBeUndefined();
    await choose('Duplicate');
    await waitFor(() => expect(row('Switch sw-s1-2')).toHaveFocus());
  });

  it('asks for the other end of a cable, a landing, a tunnel and an association', async () => {
    const { user, row } = renderOutline(pair);
    for (const [label, title] of [
      ['Cable…', 'Pull a cable'],
      ['Land…', 'Land a WAN port'],
      ['Tunnel to…', 'Pull a tunnel'],
      ['Associate…', 'Make an IPsec association'],
    ] as const) {
      await user.click(row('Firewall fw-s1'));
      await user.keyboard('{ContextMenu}');
      await user.click(await screen.findByRole('menuitem', { name: label }));
      expect(await screen.findByRole('dialog', { name: title })).toBeInTheDocument();
      await user.keyboard('{Escape}');
      await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull());
      expect(row('Firewall fw-s1')).toHaveFocus();
    }
  });
});

describe('the outline for who may only read', () => {
  it('is moved through and selects, but offers nothing that changes', async () => {
    const { user, row, document: now, selection } = renderOutline(pair, { editable: false });
    expect(screen.queryByRole('button', { name: /^(Add|Associate)/ })).toBeNull();
    await user.click(row('Switch sw-s1'));
    expect(selection()).toEqual([{ collection: 'devices', id: 'sw-s1' }]);
    await user.keyboard('{Delete}{F2}');
    expect(now()).toEqual(pair);
    expect(screen.queryByRole('textbox')).toBeNull();
    await user.keyboard('{ContextMenu}');
    const items = await screen.findAllByRole('menuitem');
    expect(items.map(({ textContent }) => textContent)).toEqual([
      'CopyCtrl C',
      'Follow',
      'Show on the sheet',
      'Open in the inspectorEnter',
    ]);
  });
});

describe('the filter field', () => {
  it('leaves what holds the words with the way there, and brings all back when it is emptied', async () => {
    const { user, row, rows } = renderOutline(pair);
    const before = rows().length;
    await user.type(screen.getByRole('searchbox'), 'switch s1');
    await waitFor(() => expect(rows().length).toBeLessThan(before));
    expect(row('Switch sw-s1')).toHaveAttribute('aria-level', '3');
    expect(screen.queryByRole('treeitem', { name: /^Host h-s1-b/ })).toBeNull();
    expect(screen.getByText(/^\d+ found$/)).toBeInTheDocument();
    await user.clear(screen.getByRole('searchbox'));
    await waitFor(() => expect(rows()).toHaveLength(before));
  });

  it('says so where nothing is found', async () => {
    const { user } = renderOutline(pair);
    await user.type(screen.getByRole('searchbox'), 'nowhere at all');
    expect(await screen.findByText('Nothing in this design says that.')).toBeInTheDocument();
  });
});

it('a row tells its findings by severity in words', () => {
  const id = first(pair.tunnels);
  const { design, row } = renderOutline(applyPatch(pair, { tunnels: { [id]: { b: { vni: 4711 } } } }));
  act(() => design.select([{ collection: 'tunnels', id }]));
  const [own] = screen.getAllByRole('treeitem', { selected: true });
  expect(own).toHaveAccessibleName(/, \d+ blocking/);
  expect(row('IPsec associations, 1').getAttribute('aria-label')).toMatch(/\d+ blocking/);
});
