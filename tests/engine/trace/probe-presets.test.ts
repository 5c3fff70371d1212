import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { needsHost, probeOfPreset, versionsOf } from '#engine/trace/probe-of-preset.ts';
import { probePresets } from '#engine/trace/probe-presets.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, crossed, follow, reasonsOf, receivers } from './follow.ts';

const source = { host: 'h-s0-a' };
const tunnel = 'tn-s0-s1-a';
const probe = (id: string, design = pairDesign()) => probeOfPreset(design, id, { source, host: 'h-s1-a' });
const run = (id: string, design = pairDesign()) => follow(design, probe(id, design));

describe('each preset', () => {
  // Bytes of the outermost packet in the tunnel: RFC 4303 section 2.4 and RFC 7348 section 5 around the frame, AES-GCM.
  it.each([
    ['ping', 188],
    ['tcp-full-size', 1500],
    ['certificate-exchange', 1500],
    ['ospf', 172],
    ['pim', 160],
    ['igmp', 152],
    ['vrrp', 152],
    ['bfd', 156],
    ['arp', 152],
    ['dhcp', 432],
    ['ptp-ethernet', 152],
    ['ptp-udp', 176],
    ['is-is', 1500],
  ])('%s crosses a plain bridge and tunnel as a packet of %i bytes', (id, bytes) => {
    const trace = run(id);
    expect(receivers(trace)).toEqual({ 'h-s1-a': 1 });
    expect(crossed(trace, tunnel).wire?.outerIpPacketBytes).toBe(bytes);
  });

  it.each(['stp', 'lacp', 'lldp', 'ptp-peer-delay'])('%s goes no further than the first bridge', (id) => {
    expect(reasonsOf(run(id))).toMatchObject([{ code: 'reserved-group', device: 'sw-s0' }]);
  });

  it('is in one of the two lists above, and has a name, a use and a source', () => {
    expect(probePresets).toHaveLength(17);
    for (const { name, shows, source: document } of probePresets)
      expect([name, shows, document].every((text) => text.length > 2)).toBe(true);
  });

  it('with a second IP version can be followed in it', () => {
    const both = probePresets.filter((preset) => versionsOf(preset).includes('ipv6'));
    expect(both.length).toBeGreaterThan(5);
    for (const { id } of both) {
      const v6 = probeOfPreset(pairDesign(), id, { source, host: 'h-s1-a', version: 'ipv6' });
      expect(receivers(follow(pairDesign(), v6))).toEqual({ 'h-s1-a': 1 });
    }
  });
});

describe('presets of full size', () => {
  const open = changed(pairDesign(), { segments: { a: { mtu: null } } });

  it('are as large as the segment is committed to, else as the host’s port allows', () => {
    expect(probe('tcp-full-size').packet).toMatchObject({ packetBytes: 1396 });
    expect(probe('tcp-full-size', open).packet).toMatchObject({ packetBytes: 1500 });
    const unknown: MergePatch = { devices: { 'h-s0-a': { ports: { p1: { mtu: null } } } } };
    expect(probe('is-is', changed(open, unknown)).packet).toMatchObject({ frameBytes: 1518 });
  });

  it('all die in the tunnel where hosts keep to 1500: bulk TCP, certificates and padded hellos', () => {
    for (const id of ['tcp-full-size', 'certificate-exchange', 'is-is'])
      expect(reasonsOf(run(id, open))).toMatchObject([{ code: 'oversize', packetBytes: 1604 }]);
    expect(receivers(run('ping', open))).toEqual({ 'h-s1-a': 1 });
  });

  it('of certificates are cut by their sender first', () => {
    expect(run('certificate-exchange').steps[0]!.pieces?.map(({ packetBytes }) => packetBytes)).toEqual([
      1396, 1396, 1372,
    ]);
  });
});

describe('a preset asked for wrongly', () => {
  it('names what is wrong and what there is', () => {
    expect(() => probeOfPreset(pairDesign(), 'telegraph', { source })).toThrow(/expected one of ping/);
    expect(() => probeOfPreset(pairDesign(), 'ping', { source })).toThrow(/host is missing/);
    expect(() => probeOfPreset(pairDesign(), 'igmp', { source, version: 'ipv6' })).toThrow(/igmp has ipv4/);
  });

  it('can be told beforehand', () => {
    const asking = probePresets.filter(needsHost).map(({ id }) => id);
    expect(asking).toEqual(['ping', 'tcp-full-size', 'certificate-exchange', 'bfd']);
    expect(versionsOf(probePresets.find(({ id }) => id === 'arp')!)).toEqual([]);
  });
});
