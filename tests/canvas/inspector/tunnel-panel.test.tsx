import { screen, within } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import type { Design } from '../../../src/engine/model/design.ts';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import { pairDesign } from '../../support/designs.ts';
import { renderInspector } from './render-inspector.tsx';

const id = 'tn-s0-s1-a';
const selection = [{ collection: 'tunnels', id }] as const;
const changed = (patch: MergePatch): Design => applyPatch(pairDesign(), patch);
const differing = (): Design => changed({ tunnels: { [id]: { b: { vni: 10_210 } } } });

describe('the inspector of a tunnel', () => {
  it('shows both ends side by side with their places named', () => {
    renderInspector(pairDesign(), { selection });
    const mirror = screen.getByRole('group', { name: 'Both ends' });
    expect(within(mirror).getByLabelText('VNI at Head office')).toHaveValue('10000');
    expect(within(mirror).getByLabelText('VNI at Gullhaven')).toHaveValue('10000');
    expect(within(mirror).getAllByText('10.255.0.1')).toHaveLength(2);
    expect(within(mirror).queryByText('≠')).toBeNull();
    expect(screen.getByRole('img', { name: 'Segment A' })).toBeInTheDocument();
  });

  it('changes a value in one undo step named after it', async () => {
    const { user, design, document, steps } = renderInspector(pairDesign(), { selection });
    const field = screen.getByLabelText('VNI at Gullhaven');
    await user.clear(field);
    await user.type(field, '10001{Enter}');
    await user.tab();
    expect(document().tunnels[id]!.b.vni).toBe(10_001);
    expect(steps()).toBe(1);
    expect(design.undo()).toBe(`VNI of ${id}`);
    expect(document()).toEqual(pairDesign());
  });

  it('makes a value unknown when its cell is emptied', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.clear(screen.getByLabelText('UDP port at Gullhaven'));
    await user.tab();
    expect(document().tunnels[id]!.b).not.toHaveProperty('udpPort');
    expect(screen.getByLabelText('UDP port at Gullhaven')).toHaveValue('');
  });

  it('refuses a VNI of more than 24 bits where it is typed, and says the way out', async () => {
    const { user, document, steps } = renderInspector(pairDesign(), { selection });
    const field = screen.getByLabelText('VNI at Gullhaven');
    await user.clear(field);
    await user.type(field, '16777216{Enter}');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'VNI at Gullhaven 16777216 does not fit: type a VNI from 0 to 16777215; the field has 24 bits.',
    );
    expect(field).toBeInvalid();
    expect(steps()).toBe(0);
    await user.type(field, '{Escape}');
    expect(field).toHaveValue('10000');
    expect(document()).toEqual(pairDesign());
  });

  it('says on the rail, the cord and the fields that the VNIs differ', () => {
    renderInspector(differing(), { selection });
    expect(screen.getByText('≠')).toBeInTheDocument();
    expect(screen.getByRole('img', { name: /cord is cut: VNI 10000 at one end, 10210/ })).toBeInTheDocument();
    expect(screen.getByLabelText('VNI at Gullhaven')).toHaveAccessibleDescription(
      'VNI 10000 at Head office, 10210 at Gullhaven',
    );
  });

  it('offers a fix with what it will do, and applies it as one step', async () => {
    const { user, document, design } = renderInspector(differing(), { selection });
    const button = screen.getByRole('button', { name: 'Set Gullhaven to 10000' });
    expect(button).toHaveAccessibleDescription(/Sets the VNI of tn-s0-s1-a at Gullhaven to 10000/);
    await user.click(button);
    expect(document().tunnels[id]!.b.vni).toBe(10_000);
    expect(screen.queryByText('≠')).toBeNull();
    expect(design.undo()).toBe('Set Gullhaven to 10000');
  });

  it('leads to the finding in the list', async () => {
    const onShowFinding = vi.fn();
    const { user } = renderInspector(differing(), { selection, onShowFinding });
    await user.click(screen.getAllByRole('button', { name: 'Show in the list of findings' })[0]!);
    expect(onShowFinding).toHaveBeenCalledWith(expect.stringContaining('tunnel-vni-mismatch'));
  });

  it('computes what fits and what is added', () => {
    renderInspector(pairDesign(), { selection });
    const computed = screen.getByRole('region', { name: 'Computed' });
    // The largest packet over 1500 bytes with AES-GCM-16 in tunnel mode, as tests/reference holds it.
    expect(within(computed).getByText('1396 B')).toBeInTheDocument();
    expect(within(computed).getByText('104 B')).toBeInTheDocument();
    expect(within(computed).getByText('18 ms')).toBeInTheDocument();
  });

  it('says that it is unknown what fits while the transport has no MTU', () => {
    renderInspector(changed({ transports: { coast: { mtu: null } } }), { selection });
    const computed = screen.getByRole('region', { name: 'Computed' });
    expect(within(computed).getAllByText('unknown')).toHaveLength(3);
  });

  it('takes an end out of its bridge and puts it back', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    const bridge = screen.getByLabelText('Bridge, VLAN at Gullhaven');
    expect(bridge).toHaveDisplayValue('br-110, 110');
    await user.selectOptions(bridge, 'in none');
    expect(document().forwarders['br-s1-a']!.circuits).not.toHaveProperty(id);
    await user.selectOptions(bridge, 'br-110, 110');
    expect(document().forwarders['br-s1-a']!.circuits[id]).toMatchObject({ kind: 'tunnel', tunnel: id });
  });

  it('drops the ways of a bare tunnel when an association takes it in', async () => {
    const bare = changed({
      tunnels: { [id]: { association: null, a: { via: { x: { rank: 'a0', landing: 'ld-s0-coast' } } } } },
    });
    const { user, document } = renderInspector(bare, { selection });
    await user.selectOptions(screen.getByLabelText('Protected by'), 'as-s0-s1');
    expect(document().tunnels[id]).toMatchObject({ association: 'as-s0-s1' });
    expect(document().tunnels[id]!.a).not.toHaveProperty('via');
  });

  it('renames it in its head and refuses an empty name', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    const name = screen.getByLabelText('Name');
    await user.clear(name);
    await user.tab();
    expect(screen.getByRole('alert')).toHaveTextContent('Name is empty: it has to be given.');
    await user.type(name, 'tn-ho-gul{Enter}');
    expect(document().tunnels[id]!.name).toBe('tn-ho-gul');
  });

  it('removes it from its menu', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.click(screen.getByRole('button', { name: `More for ${id}` }));
    await user.click(await screen.findByRole('menuitem', { name: 'Remove' }));
    expect(document().tunnels).toEqual({});
  });

  it('has nothing to type into for somebody who may only read', () => {
    renderInspector(differing(), { selection, editable: false });
    expect(screen.queryByRole('textbox')).toBeNull();
    expect(screen.queryByRole('combobox')).toBeNull();
    expect(screen.queryByRole('button', { name: /^Set / })).toBeNull();
    expect(screen.queryByRole('button', { name: /^More for/ })).toBeNull();
    const mirror = screen.getByRole('group', { name: 'Both ends' });
    expect(within(mirror).getByText(/^10210/)).toBeInTheDocument();
    expect(within(mirror).getByText('≠')).toBeInTheDocument();
  });
});
