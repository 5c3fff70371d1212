import { describe, expect, it } from 'vitest';
import { unreached } from '#engine/trace/unreached.ts';
import { whatFits } from '#engine/trace/what-fits.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import reference from '../../reference/largest-inner-packet.json' with { type: 'json' };
import { changed, follow, groupFrom, packetTo } from './follow.ts';

const gcmTunnel = (transportMtuBytes: number): number =>
  reference.rows.find((row) => row.transportMtuBytes === transportMtuBytes)!['gcm-tunnel'];

describe('what fits', () => {
  it('is what goes whole through the tightest tunnel on the way, however long the probe', () => {
    for (const packetBytes of [84, 1500, 9000])
      expect(whatFits(pairDesign(), packetTo('h-s1-a', packetBytes))).toMatchObject({
        largestBytes: gcmTunnel(1500),
        limitedBy: { collection: 'tunnels', id: 'tn-s0-s1-a' },
        // RFC 9293 section 3.7.1 and RFC 792: 1396 − 20 − 20, 1396 − 20 − 8.
        tcpMssBytes: 1356,
        pingPayloadBytes: 1368,
        transportMtuFor1500Bytes: 1604,
      });
  });

  it('follows the transport’s MTU, and a port that is tighter still', () => {
    const narrow = changed(pairDesign(), { transports: { coast: { mtu: 1492 } } });
    expect(whatFits(narrow, packetTo('h-s1-a', 84))?.largestBytes).toBe(gcmTunnel(1492));
    const port = changed(pairDesign(), { devices: { 'h-s1-a': { ports: { p1: { mtu: 1280 } } } } });
    expect(whatFits(port, packetTo('h-s1-a', 84))).toMatchObject({
      largestBytes: 1280,
      limitedBy: { collection: 'links', id: 'cb-h-s1-a' },
    });
  });

  it('is of all ways together for a frame to many', () => {
    const hub = hubDesign(3);
    const fits = whatFits(hub, groupFrom('h-s0-a', '224.0.0.5'));
    expect(fits).toMatchObject({ largestBytes: gcmTunnel(1500) });
    expect(fits?.reached).toEqual(['h-s1-a', 'h-s2-a', 'h-s3-a']);
  });

  it('names the devices on the way in their order', () => {
    expect(whatFits(pairDesign(), packetTo('h-s1-a', 84))?.devices).toEqual([
      'h-s0-a',
      'sw-s0',
      'fw-s0',
      'fw-s1',
      'sw-s1',
      'h-s1-a',
    ]);
  });

  it('is undefined where nothing gets through whatever its length, and for a probe that is refused', () => {
    const apart = changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { a: { vni: 99 } } } });
    expect(whatFits(apart, packetTo('h-s1-a', 84))).toBeUndefined();
    expect(whatFits(pairDesign(), packetTo('nobody', 84))).toBeUndefined();
  });
});

describe('who is not reached', () => {
  const missedBy = (design = pairDesign(), probe = packetTo('h-s1-a', 1500, { dontFragment: true })) =>
    unreached(design, probe, follow(design, probe), whatFits(design, probe));

  it('is on the way to one host everybody beyond where the frame ends', () => {
    expect(missedBy()).toEqual(['fw-s1', 'sw-s1', 'h-s1-a']);
    expect(missedBy(pairDesign(), packetTo('h-s1-a', 1396))).toEqual([]);
  });

  it('is the host alone where no frame finds a way to it', () => {
    const apart = changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { a: { vni: 99 } } } });
    expect(missedBy(apart)).toEqual(['h-s1-a']);
  });

  it('is of a frame to many whoever of the sender’s segment goes without', () => {
    const hub = changed(hubDesign(2), { tunnels: { 'tn-s0-s2-a': { a: { vni: 99 } } } });
    expect(missedBy(hub, groupFrom('h-s0-a', '224.0.0.5'))).toEqual(['h-s2-a']);
  });
});
