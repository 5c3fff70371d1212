import { describe, expect, it } from 'vitest';
import type { ProbeInput } from '#engine/trace/probe.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import { pairDesign } from '../../support/designs.ts';
import { packetTo } from './follow.ts';

const ping = packetTo('h-s1-a', 84);
const nonIp = { kind: 'non-ip', frameBytes: 64 } as const;
const refused = (probe: unknown): readonly (readonly [string, string])[] => {
  const answer = traceFrame(pairDesign(), probe as ProbeInput);
  return answer.ok ? [] : answer.problems.map(({ field, expected }) => [field, expected]);
};

describe('a probe', () => {
  it.each<readonly [string, unknown, string, RegExp]>([
    ['an unknown host', { ...ping, source: { host: 'nobody' } }, 'probe.source.host', /such as h-s0-a/],
    ['a switch as a host', { ...ping, source: { host: 'sw-s0' } }, 'probe.source.host', /a host/],
    ['an unknown device', { ...ping, source: { device: 'x', port: 'p1' } }, 'probe.source.device', /such as/],
    ['an unknown port', { ...ping, source: { device: 'sw-s0', port: 'p9' } }, 'probe.source.port', /p1, p2/],
    ['itself as its destination', packetTo('h-s0-a', 84), 'probe.destination.host', /another host/],
    [
      'an unknown destination',
      { ...ping, destination: { kind: 'host', host: 'x' } },
      'probe.destination.host',
      /such as/,
    ],
    [
      'an IPv6 packet shorter than its header',
      packetTo('h-s1-a', 39, { version: 'ipv6' }),
      'probe.packet.packetBytes',
      /40/,
    ],
    [
      'an IPv6 broadcast',
      {
        ...ping,
        destination: { kind: 'broadcast' },
        packet: { kind: 'ip', version: 'ipv6', packetBytes: 84 },
      },
      'probe.destination.kind',
      /ff02::1/,
    ],
    [
      'a group of the other version',
      { ...ping, destination: { kind: 'multicast', group: 'ff02::5' } },
      'probe.destination.group',
      /224\.0\.0\.5/,
    ],
    [
      'a group that is none',
      { ...ping, destination: { kind: 'multicast', group: '192.0.2.1' } },
      'probe.destination.group',
      /multicast group/,
    ],
    [
      'IP to a reserved group',
      { ...ping, destination: { kind: 'reserved', octet: '00' } },
      'probe.packet.kind',
      /non-ip/,
    ],
    [
      'a frame without IP to an IP group',
      { ...ping, destination: { kind: 'multicast', group: '224.0.0.5' }, packet: nonIp },
      'probe.packet.kind',
      /kind ip/,
    ],
    [
      'a reserved address as another group',
      { ...ping, destination: { kind: 'layer-2-group', mac: '01-80-C2-00-00-0E' }, packet: nonIp },
      'probe.destination.mac',
      /kind reserved/,
    ],
    ['a hop limit of zero', packetTo('h-s1-a', 84, { hopLimit: 0 }), 'probe.packet.hopLimit', /1 to 255/],
    [
      'a frame below the least',
      { ...ping, packet: { ...nonIp, frameBytes: 63 } },
      'probe.packet.frameBytes',
      /64/,
    ],
    ['three tags', { ...ping, tags: [1, 2, 3] }, 'probe.tags', /two/],
  ])('is refused with %s, the field named with a way out', (_case, probe, field, expected) => {
    expect(refused(probe)).toEqual([[field, expect.stringMatching(expected) as string]]);
  });

  it('is never more than refused, whatever it is', () => {
    for (const probe of [undefined, null, 7, 'x', [], {}, { source: {} }])
      expect(refused(probe)).not.toEqual([]);
  });
});
