import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { Collection, Design } from '../../../src/engine/model/design.ts';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import { pairDesign } from '../../support/designs.ts';
import { renderInspector } from './render-inspector.tsx';

const changed = (patch: MergePatch): Design => applyPatch(pairDesign(), patch);
const at = (collection: Collection, id: string) => ({ selection: [{ collection, id }] });
type User = ReturnType<typeof renderInspector>['user'];
const type = async (user: User, label: string, text: string): Promise<void> => {
  const field = screen.getByLabelText(label);
  await user.clear(field);
  await user.type(field, `${text}{Enter}`);
};
const choose = (user: User, label: string, choice: string): Promise<void> =>
  user.selectOptions(screen.getByLabelText(label), choice);

const tunnel = 'tn-s0-s1-a';
const overIpv6 = (): Design =>
  changed({
    transports: { coast: { families: [6] } },
    tunnels: { [tunnel]: { family: 6 } },
    endpoints: {
      'lo-s0': { ipv4: null, ipv6: '2001:db8:ff::1/128' },
      'lo-s1': { ipv4: null, ipv6: '2001:db8:ff::2/128' },
    },
  });

describe('what the inspector asks about an association', () => {
  it('asks what becomes of packets while it is down, and marks that they leave in clear', async () => {
    const { user, document } = renderInspector(pairDesign(), at('associations', 'as-s0-s1'));
    const cell = screen.getByLabelText('While down at Gullhaven');
    expect(cell).toHaveDisplayValue('dropped');
    await user.selectOptions(cell, 'in clear');
    expect(document().associations['as-s0-s1']!.b.whenDown).toBe('clear');
    expect(cell).toHaveAccessibleDescription(/in clear while as-s0-s1 is down/);
    expect(screen.getByText('≠')).toBeInTheDocument();
    await user.selectOptions(cell, 'not stated');
    expect(document().associations['as-s0-s1']!.b).not.toHaveProperty('whenDown');
  });

  it('asks whether IKE cuts its long messages itself', async () => {
    const { user, document } = renderInspector(pairDesign(), at('associations', 'as-s0-s1'));
    expect(screen.getByText(/IKE cuts its long messages itself/)).toBeInTheDocument();
    await choose(user, 'IKE fragmentation at Head office', 'on');
    expect(document().associations['as-s0-s1']!.a.ikeFragmentation).toBe(true);
    await choose(user, 'IKE fragmentation at Head office', 'off');
    expect(document().associations['as-s0-s1']!.a.ikeFragmentation).toBe(false);
  });
});

describe('what the inspector asks about a tunnel’s UDP checksums', () => {
  it('asks over IPv6, and marks both cells where the far end refuses', async () => {
    const { user, document } = renderInspector(overIpv6(), at('tunnels', tunnel));
    await choose(user, 'UDP checksum at Head office', 'zero');
    await choose(user, 'Zero checksum at Gullhaven', 'refused');
    expect(document().tunnels[tunnel]).toMatchObject({
      a: { udpChecksum: 'zero' },
      b: { takesZeroChecksum: false },
    });
    for (const label of ['UDP checksum at Head office', 'Zero checksum at Gullhaven'])
      expect(screen.getByLabelText(label)).toHaveAccessibleDescription(
        'Zero UDP checksum from Head office, refused at Gullhaven',
      );
  });

  it('asks nothing over IPv4', () => {
    renderInspector(pairDesign(), at('tunnels', tunnel));
    expect(screen.queryByLabelText('UDP checksum at Head office')).toBeNull();
    expect(screen.queryByText(/Over IPv6 a UDP checksum/)).toBeNull();
  });

  it('shows over IPv4 what the design states all the same, so that it can be taken away', async () => {
    const stated = changed({ tunnels: { [tunnel]: { b: { takesZeroChecksum: true } } } });
    const { user, document } = renderInspector(stated, at('tunnels', tunnel));
    await choose(user, 'Zero checksum at Gullhaven', 'not stated');
    expect(document().tunnels[tunnel]!.b).not.toHaveProperty('takesZeroChecksum');
  });
});

describe('what the inspector asks about a landing’s NAT', () => {
  it('takes the time after which it forgets with its unit, and keeps it when forwarding changes', async () => {
    const { user, document } = renderInspector(pairDesign(), at('links', 'ld-s1-coast'));
    expect(screen.queryByLabelText('NAT forgets after')).toBeNull();
    await choose(user, 'NAT', 'behind NAT, not forwarded');
    await type(user, 'NAT forgets after', '2 min');
    await choose(user, 'NAT', 'behind NAT, port forwarded');
    expect(document().links['ld-s1-coast']).toMatchObject({ nat: { forwarded: true, mappingSeconds: 120 } });
    await choose(user, 'NAT', 'no NAT in front');
    expect(document().links['ld-s1-coast']).not.toHaveProperty('nat');
  });

  it('refuses a time that is none, and says the way out', async () => {
    const hidden = changed({ links: { 'ld-s1-coast': { nat: { forwarded: false } } } });
    const { user, document } = renderInspector(hidden, at('links', 'ld-s1-coast'));
    expect(screen.getByLabelText('NAT forgets after')).toHaveAccessibleDescription(/remembers a UDP flow/);
    await type(user, 'NAT forgets after', '0');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'NAT forgets after 0 does not fit: type 1 second or more.',
    );
    await type(user, 'NAT forgets after', 'soon');
    expect(screen.getByRole('alert')).toHaveTextContent('type a time with its unit');
    expect(document()).toEqual(hidden);
  });
});

describe('what the inspector asks about sites and devices', () => {
  it('takes the security zone of a site', async () => {
    const { user, document } = renderInspector(pairDesign(), at('sites', 's1'));
    const zone = screen.getByLabelText('Security zone');
    expect(zone).toHaveAccessibleDescription(/trust each other’s hosts/);
    await type(user, 'Security zone', 'x'.repeat(81));
    expect(screen.getByRole('alert')).toHaveTextContent('type at most 80 characters');
    await type(user, 'Security zone', 'harbour');
    expect(document().sites['s1']!.zone).toBe('harbour');
    await user.clear(zone);
    await user.tab();
    expect(document().sites['s1']).not.toHaveProperty('zone');
  });

  it('takes the address at which a device is administered, and nothing that is no address', async () => {
    const { user, document } = renderInspector(pairDesign(), at('devices', 'sw-s1'));
    await type(user, 'Management address', '10.9.0.300');
    expect(screen.getByRole('alert')).toHaveTextContent(
      'Management address 10.9.0.300 does not fit: type an IPv4 or IPv6 address.',
    );
    await type(user, 'Management address', '2001:db8:9::12');
    expect(document().devices['sw-s1']!.managementAddress).toBe('2001:db8:9::12');
  });

  it('asks a gateway from whom it takes VXLAN outside IPsec', async () => {
    const { user, document } = renderInspector(pairDesign(), at('devices', 'fw-s1'));
    await user.click(screen.getByRole('button', { name: 'Settings' }));
    const cell = screen.getByLabelText('VXLAN taken from');
    expect(cell).toHaveAccessibleDescription(/outside IPsec/);
    await user.selectOptions(cell, 'anyone');
    expect(document().devices['fw-s1']!.settings).toMatchObject({ vxlanFrom: 'anyone' });
    expect(cell).toHaveAccessibleDescription(/fw-s1 takes VXLAN from anyone on Coastal access/);
  });

  it('asks no switch from whom it takes VXLAN, since none does', async () => {
    const { user } = renderInspector(pairDesign(), at('devices', 'sw-s1'));
    await user.click(screen.getByRole('button', { name: 'Settings' }));
    expect(screen.getByLabelText('Spanning tree')).toBeInTheDocument();
    expect(screen.queryByLabelText('VXLAN taken from')).toBeNull();
  });
});

describe('what the inspector asks about profiles and bridges', () => {
  it('takes the bits that HMAC-SHA2-256 is cut to', async () => {
    const profiled = changed({ profiles: { mid: { name: 'Branch gateway' } } });
    const { user, document } = renderInspector(profiled, at('profiles', 'mid'));
    expect(screen.getByLabelText('HMAC-SHA2-256 cut to')).toHaveAccessibleDescription(/refuse each other/);
    await choose(user, 'HMAC-SHA2-256 cut to', '96 bits, as an early draft said');
    expect(document().profiles['mid']!.hmacSha256Bits).toBe(96);
  });

  it('takes whether a bridge asks for group members', async () => {
    const { user, document } = renderInspector(pairDesign(), at('forwarders', 'br-s1-a'));
    expect(screen.getByLabelText('Group membership querier')).toHaveAccessibleDescription(/asks the segment/);
    await choose(user, 'Group membership querier', 'yes');
    expect(document().forwarders['br-s1-a']!.querier).toBe(true);
    await choose(user, 'Group membership querier', 'no');
    expect(document().forwarders['br-s1-a']!.querier).toBe(false);
  });
});

describe('the same facts for somebody who may only read', () => {
  const stated = applyPatch(overIpv6(), {
    sites: { s1: { zone: 'harbour' } },
    devices: { 'fw-s1': { managementAddress: '10.9.0.12', settings: { vxlanFrom: 'peers' } } },
    links: { 'ld-s1-coast': { nat: { forwarded: false, mappingSeconds: 90 } } },
    associations: { 'as-s0-s1': { b: { ikeFragmentation: true } } },
    tunnels: { [tunnel]: { a: { udpChecksum: 'zero' }, b: { takesZeroChecksum: true } } },
    forwarders: { 'br-s1-a': { querier: true } },
    profiles: { mid: { name: 'Branch gateway', hmacSha256Bits: 96 } },
  });
  it.each([
    ['associations', 'as-s0-s1', 'IKE fragmentation at Gullhaven', 'on'],
    ['associations', 'as-s0-s1', 'While down at Gullhaven', 'dropped'],
    ['tunnels', tunnel, 'UDP checksum at Head office', 'zero'],
    ['tunnels', tunnel, 'Zero checksum at Gullhaven', 'taken'],
    ['links', 'ld-s1-coast', 'NAT forgets after', '90 s'],
    ['sites', 's1', 'Security zone', 'harbour'],
    ['devices', 'fw-s1', 'Management address', '10.9.0.12'],
    ['devices', 'fw-s1', 'VXLAN taken from', 'its peers only'],
    ['profiles', 'mid', 'HMAC-SHA2-256 cut to', '96 bits, as an early draft said'],
    ['forwarders', 'br-s1-a', 'Group membership querier', 'yes'],
  ] as const)('are written out: %s %s, %s: %s', async (collection, id, label, words) => {
    const { user } = renderInspector(stated, { ...at(collection, id), editable: false });
    const settings = screen.queryByRole('button', { name: 'Settings' });
    if (settings !== null) await user.click(settings);
    const cells = screen.getAllByText((_text, element) => element?.textContent === label);
    expect(cells.map((cell) => cell.parentElement?.textContent)).toContain(`${label}${words}`);
    expect(screen.queryByRole('combobox')).toBeNull();
    expect(screen.queryByRole('textbox')).toBeNull();
  });
});
