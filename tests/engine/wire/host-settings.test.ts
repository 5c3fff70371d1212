import { describe, expect, it } from 'vitest';
import { hostSettings } from '#engine/wire/host-settings.ts';
import { namedStack } from './named-stacks.ts';

describe('host settings', () => {
  // RFC 9293 section 3.7.1 for the MSS, RFC 792 and RFC 4443 section 4.1 for the echo header, worked out by hand.
  it.each([
    { largest: 1396, mss: [1356, 1336], ping: [1368, 1348], ipv6: true },
    { largest: 1388, mss: [1348, 1328], ping: [1360, 1340], ipv6: true },
    { largest: 1280, mss: [1240, 1220], ping: [1252, 1232], ipv6: true },
    { largest: 1279, mss: [1239, 1219], ping: [1251, 1231], ipv6: false },
    { largest: 50, mss: [10, 0], ping: [22, 2], ipv6: false },
  ])('for packets up to $largest bytes leave room for the headers', ({ largest, mss, ping, ipv6 }) => {
    expect(hostSettings(largest, namedStack('gcm-tunnel'))).toMatchObject({
      ok: true,
      hostMtuBytes: largest,
      gatewayInterfaceMtuBytes: largest,
      tcpMssBytes: { ipv4: mss[0], ipv6: mss[1] },
      dfPingPayloadBytes: { ipv4: ping[0], ipv6: ping[1] },
      ipv6MinimumMet: ipv6,
    });
  });

  it('say which underlay would carry the usual MTUs untouched', () => {
    const answer = hostSettings(1396, { ...namedStack('gcm-tunnel'), accessOverhead: 'pppoe' });
    expect(answer.ok && answer.underlayFor).toEqual({
      standard: { transportMtuBytes: 1604, accessPayloadBytes: 1612 },
      jumbo: { transportMtuBytes: 9104, accessPayloadBytes: 9112 },
    });
  });

  it('are refused for a length that is no packet', () => {
    expect(hostSettings(19, namedStack('gcm-tunnel'))).toEqual({
      ok: false,
      problems: [
        { field: 'largestInnerPacketBytes', value: 19, expected: 'a whole number from 20 to 65535' },
      ],
    });
  });

  it('are refused for a stack that contradicts itself', () => {
    expect(hostSettings(1400, { ...namedStack('bare'), innerTags: 2 })).toMatchObject({
      ok: false,
      problems: [{ field: 'stack.innerTags' }],
    });
  });
});
