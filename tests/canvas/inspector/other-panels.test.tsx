import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { Collection, Design, ElementRef } from '../../../src/engine/model/design.ts';
import { collections } from '../../../src/engine/model/design.ts';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import { kindOf } from '../../../src/workspace/operations/name-of.ts';
import { pairDesign } from '../../support/designs.ts';
import { renderInspector } from './render-inspector.tsx';

/** Two sites with one entry at least in every collection. */
const fullDesign = (patch: MergePatch = {}): Design =>
  applyPatch(
    applyPatch(pairDesign({ segments: ['a', 'b'] }), {
      profiles: { mid: { name: 'Branch gateway' } },
      demands: { dm: { name: 'Ticket sales', segment: 'a', from: { site: 's0' }, to: { site: 's1' } } },
      notes: { n1: { text: 'Keys are in the vault.', target: { collection: 'devices', id: 'fw-s1' } } },
    }),
    patch,
  );
const at = (collection: Collection, id: string) => ({ selection: [{ collection, id }] });
const type = async (
  user: ReturnType<typeof renderInspector>['user'],
  label: string,
  text: string,
): Promise<void> => {
  const field = screen.getByLabelText(label);
  await user.clear(field);
  await user.type(field, `${text}{Enter}`);
};

describe('the inspector of every kind of element', () => {
  const design = fullDesign();
  const refs = collections.flatMap((collection): readonly ElementRef[] =>
    Object.keys(design[collection]).map((id) => ({ collection, id })),
  );
  const kinds = new Map(refs.map((ref) => [kindOf(design, ref), ref]));

  it.each([...kinds])('has something to change for a %s', (kind, ref) => {
    renderInspector(design, { selection: [ref] });
    expect(screen.getByText(kind, { selector: 'p' })).toBeInTheDocument();
    expect(
      screen.queryAllByRole('textbox').length + screen.queryAllByRole('combobox').length,
    ).toBeGreaterThan(0);
  });

  it.each([...kinds])('has nothing to change for a %s where one may only read', (kind, ref) => {
    renderInspector(design, { selection: [ref], editable: false });
    expect(screen.getByText(kind, { selector: 'p' })).toBeInTheDocument();
    for (const role of ['textbox', 'combobox', 'checkbox', 'radio'])
      expect(screen.queryAllByRole(role), role).toHaveLength(0);
    expect(screen.queryByRole('button', { name: /^(Add|Remove|Take over|State:|Make it)/ })).toBeNull();
  });
});

describe('the inspector of a transport', () => {
  it('keeps latency in microseconds, loss in parts per million and rates in bit/s', async () => {
    const { user, document } = renderInspector(fullDesign(), at('transports', 'coast'));
    await type(user, 'Latency, one way', '18.5');
    await type(user, 'Loss', '0.05');
    await type(user, 'Rate limit', '100 Mbit/s');
    expect(document().transports['coast']).toMatchObject({
      latencyUs: 18_500,
      lossPpm: 500,
      rateBps: 100_000_000,
    });
    await type(user, 'MTU', '67');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'MTU 67 does not fit: type an MTU of 68 to 65535 bytes.',
    );
  });

  it('tells filters that nobody stated from filters that are none', async () => {
    const { user, document } = renderInspector(fullDesign(), at('transports', 'coast'));
    await user.click(screen.getByRole('button', { name: 'What it filters' }));
    await user.click(screen.getByRole('button', { name: 'State: it filters nothing' }));
    expect(document().transports['coast']!.filters).toEqual([]);
    await user.click(screen.getByLabelText('UDP 4789'));
    expect(document().transports['coast']!.filters).toEqual(['udp-4789']);
    await user.click(screen.getByRole('button', { name: 'Make it unknown' }));
    expect(document().transports['coast']).not.toHaveProperty('filters');
  });

  it('routes one family or both', async () => {
    const { user, document } = renderInspector(fullDesign(), at('transports', 'coast'));
    await user.selectOptions(screen.getByLabelText('Address families'), 'IPv4 and IPv6');
    expect(document().transports['coast']!.families).toEqual([4, 6]);
  });
});

describe('the inspector of a landing', () => {
  it('knows four kinds of NAT', async () => {
    const { user, document } = renderInspector(fullDesign(), at('links', 'ld-s1-coast'));
    const nat = screen.getByLabelText('NAT');
    await user.selectOptions(nat, 'behind NAT, not forwarded');
    expect(document().links['ld-s1-coast']).toMatchObject({ nat: { forwarded: false } });
    await user.selectOptions(nat, 'behind NAT, forwarding unknown');
    expect(document().links['ld-s1-coast']).toMatchObject({ nat: {} });
    await user.selectOptions(nat, 'no NAT in front');
    expect(document().links['ld-s1-coast']).not.toHaveProperty('nat');
  });

  it('asks for the name that follows a changing address, and drops it with a fixed one', async () => {
    const { user, document } = renderInspector(fullDesign(), at('links', 'ld-s1-coast'));
    await user.selectOptions(screen.getByLabelText('Address'), 'changes');
    await type(user, 'Name that follows it', 'gul.saltmarsh.example');
    expect(document().links['ld-s1-coast']).toMatchObject({
      dynamic: true,
      dynamicName: 'gul.saltmarsh.example',
    });
    await user.selectOptions(screen.getByLabelText('Address'), 'fixed');
    expect(document().links['ld-s1-coast']).not.toHaveProperty('dynamicName');
  });

  it('takes PPPoE or bytes as access overhead, and an address as an address', async () => {
    const { user, document } = renderInspector(fullDesign(), at('links', 'ld-s1-coast'));
    await type(user, 'Access overhead', 'pppoe');
    expect(document().links['ld-s1-coast']).toMatchObject({ accessOverhead: 'pppoe' });
    await type(user, 'Outside IPv4', '198.51.100.300');
    expect(screen.getByRole('alert')).toHaveTextContent('type an IPv4 address such as 192.0.2.10');
  });
});

describe('the inspector of a cable', () => {
  it('moves a plug to a free port of the same kind', async () => {
    const { user, document } = renderInspector(fullDesign(), at('links', 'cb-s1-up1'));
    await user.selectOptions(screen.getByLabelText('Port of fw-s1'), 'lan2, trunk');
    expect(document().links['cb-s1-up1']).toMatchObject({ b: { device: 'fw-s1', port: 'lan2' } });
  });

  it('puts both its ports into an aggregation group', async () => {
    const { user, document } = renderInspector(fullDesign(), at('links', 'cb-s1-up1'));
    await type(user, 'Aggregation group at fw-s1', 'lag1');
    expect(document().devices['fw-s1']!.ports['lan1']!.aggregation).toBe('lag1');
  });
});

describe('the inspector of an endpoint', () => {
  it('checks addresses, docks the ring and moves to another gateway', async () => {
    const { user, document } = renderInspector(fullDesign(), at('endpoints', 'lo-s1'));
    await type(user, 'IPv4 with prefix', '10.255.0.99');
    expect(screen.getByRole('alert')).toHaveTextContent('such as 10.255.0.1/32');
    await user.selectOptions(screen.getByLabelText('Docks at'), 'top');
    expect(document().layout.endpoints!['lo-s1']).toEqual({ side: 'top' });
    await user.selectOptions(screen.getByLabelText('Device'), 'fw-s0');
    expect(document().endpoints['lo-s1']!.device).toBe('fw-s0');
  });
});

describe('the inspector of a forwarder', () => {
  it('edits circuits: VLANs, isolation, order', async () => {
    const { user, document } = renderInspector(fullDesign(), at('forwarders', 'br-s1-a'));
    await type(user, 'VLANs', '110, 120-122');
    expect(document().forwarders['br-s1-a']!.circuits['access']).toMatchObject({
      vlans: [110, 120, 121, 122],
    });
    await type(user, 'VLANs', 'untagged');
    expect(document().forwarders['br-s1-a']!.circuits['access']).toMatchObject({ vlans: 'untagged' });
    await user.click(screen.getByRole('button', { name: 'Remove circuit 2' }));
    expect(Object.keys(document().forwarders['br-s1-a']!.circuits)).toEqual(['access']);
    await user.click(screen.getByRole('button', { name: 'Add a tunnel of br-110' }));
    expect(Object.values(document().forwarders['br-s1-a']!.circuits)).toContainEqual(
      expect.objectContaining({ kind: 'tunnel', tunnel: 'tn-s0-s1-a' }),
    );
  });

  it('takes pairs of VLANs away that a new translation leaves out', async () => {
    const translated = fullDesign({
      forwarders: { 'br-s1-a': { circuits: { access: { translate: { '110': 210, '120': 220 } } } } },
    });
    const { user, document } = renderInspector(translated, at('forwarders', 'br-s1-a'));
    await type(user, 'Translated, wire > inside', '110 > 310');
    expect(document().forwarders['br-s1-a']!.circuits['access']).toMatchObject({ translate: { '110': 310 } });
    expect(document().forwarders['br-s1-a']!.circuits['access']).not.toHaveProperty('translate.120');
  });

  it('gives a cross-connect ordered rules and takes them away with the kind', async () => {
    const { user, document } = renderInspector(fullDesign(), at('forwarders', 'br-s1-a'));
    await user.selectOptions(screen.getByLabelText('Kind'), 'cross-connect');
    const rules = screen.getByRole('group', { name: 'rules of br-110' });
    await user.click(within(rules).getByRole('button', { name: /Add a rule/ }));
    await type(user, 'Ports', '554, 8554');
    await user.selectOptions(within(rules).getByLabelText('Frames'), 'an EtherType');
    await type(user, 'EtherType', '0x88f7');
    const [rule] = Object.values(document().forwarders['br-s1-a']!.policy!);
    expect(rule).toMatchObject({ action: 'permit', frames: 'ethertype', ethertype: 0x88f7 });
    expect(rule).not.toHaveProperty('ports');
    await user.selectOptions(screen.getByLabelText('Kind'), 'bridge');
    expect(document().forwarders['br-s1-a']).not.toHaveProperty('policy');
  });

  it('gives a bridge an inside interface with first-hop redundancy', async () => {
    const { user, document } = renderInspector(fullDesign(), at('forwarders', 'br-s1-a'));
    await user.click(screen.getByRole('button', { name: 'Inside interface' }));
    await user.click(screen.getByRole('button', { name: 'Give it an interface' }));
    await type(user, 'Addresses', '10.110.1.1/22');
    await user.click(screen.getByRole('button', { name: 'Add first-hop redundancy' }));
    await type(user, 'Redundancy group', '256');
    expect(screen.getByRole('alert')).toHaveTextContent('type a group from 1 to 255');
    await type(user, 'Redundancy group', '7');
    expect(document().forwarders['br-s1-a']!.gateway).toEqual({
      addresses: ['10.110.1.1/22'],
      redundancy: { group: 7 },
    });
  });

  it('drops the priority with the spanning tree', async () => {
    const { user, document } = renderInspector(fullDesign(), at('forwarders', 'br-s1-a'));
    await user.selectOptions(screen.getByLabelText('Spanning tree'), 'on');
    await type(user, 'Bridge priority', '4096');
    expect(document().forwarders['br-s1-a']!.spanningTree).toEqual({ mode: 'on', priority: 4096 });
    await user.selectOptions(screen.getByLabelText('Spanning tree'), 'off');
    expect(document().forwarders['br-s1-a']!.spanningTree).toEqual({ mode: 'off' });
  });
});

describe('the inspector of a segment', () => {
  it('lands at a further site on the VLAN that all others have', async () => {
    const { user, document } = renderInspector(
      fullDesign({ sites: { s9: { name: 'Skerry' } } }),
      at('segments', 'a'),
    );
    await user.selectOptions(screen.getByLabelText('Lands also at'), 'Skerry');
    expect(document().segments['a']!.sites['s9']).toEqual({ vlan: 110 });
    await user.click(screen.getByRole('button', { name: 'No longer lands at Skerry' }));
    expect(document().segments['a']!.sites).not.toHaveProperty('s9');
  });

  it('lists what carries it and takes a new demand', async () => {
    const { user, document, design } = renderInspector(fullDesign(), at('segments', 'a'));
    expect(screen.getByRole('button', { name: 'Select tn-s0-s1-a' })).toBeInTheDocument();
    expect(screen.queryByRole('button', { name: 'Select tn-s0-s1-b' })).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Add a demand' }));
    expect(Object.values(document().demands)).toHaveLength(2);
    expect(design.store.getState().selection[0]).toMatchObject({ collection: 'demands' });
  });

  it('refuses a letter that is none', async () => {
    const { user } = renderInspector(fullDesign(), at('segments', 'a'));
    await type(user, 'Letter', 'abc');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'Letter abc does not fit: type one or two capital letters.',
    );
  });
});

describe('the inspector of a demand', () => {
  it('goes from a site or a host, with its frame mix', async () => {
    const { user, document } = renderInspector(fullDesign(), at('demands', 'dm'));
    await user.selectOptions(screen.getByLabelText('From'), 'h-s0-a');
    expect(document().demands['dm']!.from).toEqual({ host: 'h-s0-a' });
    await user.click(screen.getByRole('button', { name: 'Add a packet length to the frame mix' }));
    await type(user, 'IP packet, bytes at line 1', '576');
    expect(document().demands['dm']!.mix).toEqual([{ packetBytes: 576, weight: 1 }]);
    await type(user, 'Weight at line 1', '0');
    expect(screen.getByRole('alert')).toHaveTextContent('Weight 0 does not fit');
    await user.click(screen.getByRole('button', { name: 'Remove line 1' }));
    expect(document().demands['dm']).not.toHaveProperty('mix');
  });
});

describe('the inspector of a note', () => {
  it('changes its text, its pin and where it stands', async () => {
    const { user, document } = renderInspector(fullDesign(), at('notes', 'n1'));
    await user.clear(screen.getByLabelText('Text'));
    await user.tab();
    expect(screen.getByRole('alert')).toHaveTextContent('Text is empty: it has to be given.');
    await user.type(screen.getByLabelText('Text'), 'None is written here.');
    await user.tab();
    await user.selectOptions(screen.getByLabelText('Pinned to'), 'tn-s0-s1-a (tunnel)');
    await user.selectOptions(screen.getByLabelText('Where it stands'), 'numbered, at the head of the sheet');
    expect(document().notes['n1']).toEqual({
      text: 'None is written here.',
      target: { collection: 'tunnels', id: 'tn-s0-s1-a' },
      standing: true,
    });
  });
});

describe('the inspector with nothing or several selected', () => {
  it('shows the title block, and refuses what is no date', async () => {
    const { user, document } = renderInspector(fullDesign());
    await type(user, 'Date of issue', 'tomorrow');
    expect(screen.getByRole('alert')).toHaveTextContent('type a date such as 2026-03-18');
    await type(user, 'Date of issue', '2026-03-18');
    expect(document().meta.dateOfIssue).toBe('2026-03-18');
    await user.selectOptions(screen.getByLabelText('Sheet'), 'A2');
    expect(document().layout.sheet).toBe('A2');
  });

  it('adds a segment from the design', async () => {
    const { user, document } = renderInspector(fullDesign());
    await user.click(screen.getByRole('button', { name: 'Add a segment' }));
    expect(Object.values(document().segments).map(({ letter }) => letter)).toContain('C');
  });

  it('counts several by kind, locks those with a place and removes all in one step', async () => {
    const placed = fullDesign({ layout: { devices: { 'fw-s1': { x: 0, y: 0 }, 'sw-s1': { x: 0, y: 99 } } } });
    const { user, document, steps } = renderInspector(placed, {
      selection: [
        { collection: 'devices', id: 'fw-s1' },
        { collection: 'devices', id: 'sw-s1' },
        { collection: 'tunnels', id: 'tn-s0-s1-a' },
      ],
    });
    expect(screen.getByRole('heading', { name: '3 elements' })).toBeInTheDocument();
    await user.click(screen.getByRole('button', { name: 'Lock their places' }));
    expect(document().layout.devices).toMatchObject({ 'fw-s1': { locked: true }, 'sw-s1': { locked: true } });
    await user.click(screen.getByRole('button', { name: 'Remove 3 elements' }));
    expect(document().devices).not.toHaveProperty('fw-s1');
    expect(steps()).toBe(2);
  });

  it('forgets what was begun to be typed when something else is selected', async () => {
    const { user, design } = renderInspector(fullDesign(), at('tunnels', 'tn-s0-s1-a'));
    await user.type(screen.getByLabelText('VNI at Gullhaven'), '9');
    design.select([{ collection: 'tunnels', id: 'tn-s0-s1-b' }]);
    expect(await screen.findByDisplayValue('tn-s0-s1-b')).toBeInTheDocument();
    expect(screen.getByLabelText('VNI at Gullhaven')).toHaveValue('10001');
  });
});
