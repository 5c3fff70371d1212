import { screen, within } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { pairDesign } from '../../support/designs.ts';
import { renderInspector } from './render-inspector.tsx';

const device = (id: string, port?: string) => ({
  selection: [{ collection: 'devices' as const, id, ...(port === undefined ? {} : { port }) }],
});

describe('the inspector of a device', () => {
  it('opens a port of its table and changes it', async () => {
    const { user, document, design } = renderInspector(pairDesign(), device('sw-s1'));
    await user.click(screen.getByRole('button', { name: /access 110/ }));
    const port = screen.getByRole('group', { name: 'Port 2' });
    const vlan = within(port).getByLabelText('VLAN');
    await user.clear(vlan);
    await user.type(vlan, '4095{Enter}');
    expect(within(port).getByRole('alert')).toHaveTextContent(
      'VLAN 4095 does not fit: type a VLAN from 1 to 4094; 4095 is reserved.',
    );
    await user.clear(vlan);
    await user.type(vlan, '120{Enter}');
    expect(document().devices['sw-s1']!.ports['p2']!.vlan).toBe(120);
    expect(design.undo()).toBe('VLAN of sw-s1 2');
  });

  it('removes what only the old mode had', async () => {
    const { user, document } = renderInspector(pairDesign(), device('sw-s1', 'p1'));
    await user.selectOptions(screen.getByLabelText('Mode'), 'access');
    expect(document().devices['sw-s1']!.ports['p1']).toMatchObject({ mode: 'access' });
    expect(document().devices['sw-s1']!.ports['p1']).not.toHaveProperty('allowedVlans');
  });

  it('takes VLANs as a list and a speed with its unit, and keeps whole numbers', async () => {
    const { user, document } = renderInspector(pairDesign(), device('sw-s1', 'p1'));
    const allowed = screen.getByLabelText('Allowed VLANs');
    await user.clear(allowed);
    await user.type(allowed, '110, 120-122{Enter}');
    const speed = screen.getByLabelText('Speed');
    await user.clear(speed);
    await user.type(speed, '2.5 Gbit/s{Enter}');
    expect(document().devices['sw-s1']!.ports['p1']).toMatchObject({
      allowedVlans: [110, 120, 121, 122],
      speedBps: 2_500_000_000,
    });
    await user.clear(speed);
    await user.type(speed, '100{Enter}');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'Speed 100 does not fit: add the unit, such as 100 Mbit/s.',
    );
  });

  it('adds a port behind the others and removes it again with what hung on it', async () => {
    const { user, document } = renderInspector(pairDesign(), device('sw-s1'));
    await user.click(screen.getByRole('button', { name: 'Add a port' }));
    const added = Object.values(document().devices['sw-s1']!.ports).find(({ number }) => number === 3);
    expect(added).toMatchObject({ role: 'lan', mode: 'trunk' });
    await user.click(screen.getByRole('button', { name: /access 110/ }));
    await user.click(screen.getByRole('button', { name: 'Remove port 2' }));
    expect(document().devices['sw-s1']!.ports).not.toHaveProperty('p2');
    expect(document().links).not.toHaveProperty('cb-h-s1-a');
  });

  it('leads to what a port is cabled to', async () => {
    const { user, design } = renderInspector(pairDesign(), device('sw-s1'));
    await user.click(screen.getByRole('button', { name: 'Select fw-s1 lan1' }));
    expect(design.store.getState().selection).toEqual([
      { collection: 'devices', id: 'fw-s1', port: 'lan1', member: undefined },
    ]);
    expect(screen.getByRole('heading', { name: 'fw-s1 lan1' })).toBeInTheDocument();
  });

  it('asks for the other end from a free port, an endpoint and a gateway, where something can answer', async () => {
    const onConnect = vi.fn();
    const { user } = renderInspector(pairDesign(), { ...device('fw-s1'), onConnect });
    await user.click(screen.getByRole('button', { name: 'Cable… at port lan2' }));
    await user.click(screen.getByRole('button', { name: 'Tunnel to… from lo-s1' }));
    await user.click(screen.getByRole('button', { name: 'Associate…' }));
    expect(onConnect.mock.calls.map(([request]) => request)).toEqual([
      { kind: 'cable', from: { collection: 'devices', id: 'fw-s1', port: 'lan2' } },
      { kind: 'tunnel', from: { collection: 'endpoints', id: 'lo-s1' } },
      { kind: 'association', from: { collection: 'devices', id: 'fw-s1' } },
    ]);
  });

  it('offers to land a WAN port that has not landed', async () => {
    const onConnect = vi.fn();
    const unlanded = applyPatch(pairDesign(), { links: { 'ld-s1-coast': null } });
    const { user } = renderInspector(unlanded, { ...device('fw-s1', 'wan1'), onConnect });
    await user.click(screen.getByRole('button', { name: 'Land… at port wan1' }));
    expect(onConnect).toHaveBeenCalledWith({
      kind: 'landing',
      from: { collection: 'devices', id: 'fw-s1', port: 'wan1' },
    });
  });

  it('says what a change of kind removes before it does', async () => {
    const { user, document, steps } = renderInspector(pairDesign(), device('fw-s1'));
    await user.selectOptions(screen.getByLabelText('Kind'), 'Switch');
    const dialog = screen.getByRole('dialog', { name: 'fw-s1: change to Switch?' });
    expect(dialog).toHaveTextContent('1 loopback endpoint, 1 IPsec association, 1 tunnel');
    expect(document().devices['fw-s1']!.kind).toBe('firewall');
    await user.click(within(dialog).getByRole('button', { name: 'Change to Switch' }));
    expect(document().devices['fw-s1']!.kind).toBe('switch');
    expect(steps()).toBe(1);
  });

  it('shows each socket of a pair and names its members', async () => {
    const { user, document } = renderInspector(pairDesign({ hub: 'ha-pair' }), device('fw-s0'));
    expect(screen.getByRole('button', { name: 'Select sw-s0 1' })).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Select sw-s0 2' })).toBeInTheDocument();
    await user.selectOptions(screen.getByLabelText('Active member'), 'fw-s0-2');
    const failover = screen.getByLabelText(/Failover takes/);
    await user.clear(failover);
    await user.type(failover, '1.5 s{Enter}');
    expect(document().devices['fw-s0']).toMatchObject({ active: 2, failoverUs: 1_500_000 });
  });

  it('keeps a host’s segment and addresses', async () => {
    const { user, document } = renderInspector(pairDesign(), device('h-s1-a'));
    const addresses = screen.getByLabelText('Addresses');
    await user.clear(addresses);
    await user.type(addresses, '10.110.1.20{Enter}');
    expect(screen.getByRole('alert')).toHaveTextContent('type a prefix such as 10.110.0.0/22');
    await user.type(addresses, '/22{Enter}');
    expect(document().devices['h-s1-a']).toMatchObject({ addresses: ['10.110.1.20/22'] });
    await user.selectOptions(screen.getByLabelText('Face'), 'camera');
    expect(document().devices['h-s1-a']).toMatchObject({ face: 'camera' });
  });

  it('locks the place of a device that a person placed, and makes a copy of it', async () => {
    const placed = applyPatch(pairDesign(), { layout: { devices: { 'sw-s1': { x: 10, y: 20 } } } });
    const { user, document } = renderInspector(placed, device('sw-s1'));
    await user.click(screen.getByRole('button', { name: 'Lock its place' }));
    expect(document().layout.devices!['sw-s1']).toEqual({ x: 10, y: 20, locked: true });
    await user.click(screen.getByRole('button', { name: 'More for sw-s1' }));
    await user.click(await screen.findByRole('menuitem', { name: 'Duplicate' }));
    expect(Object.values(document().devices).map(({ name }) => name)).toContain('sw-s1-2');
  });

  it('adds an endpoint and a bridge to a gateway', async () => {
    const { user, document, design } = renderInspector(pairDesign(), device('fw-s1'));
    await user.click(screen.getByRole('button', { name: 'Add an endpoint' }));
    expect(Object.values(document().endpoints).filter(({ device: on }) => on === 'fw-s1')).toHaveLength(2);
    design.select([{ collection: 'devices', id: 'fw-s1' }]);
    await user.click(await screen.findByRole('button', { name: 'Add a bridge' }));
    expect(Object.values(document().forwarders).filter(({ device: on }) => on === 'fw-s1')).toHaveLength(2);
  });
});
