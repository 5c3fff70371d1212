import { describe, expect, it } from 'vitest';
import {
  connectEnds,
  endOf,
  refOfEnd,
  whyNotConnect,
  type ConnectEnd,
} from '../../src/canvas/connect-ends.ts';
import { pairDesign, sitesOnCoast } from '../support/designs.ts';

const design = pairDesign({ hub: 'ha-pair' });
const ids = () => {
  let n = 0;
  return (prefix: string) => `${prefix}-x${(n += 1)}`;
};
const ring = (id: string): ConnectEnd => ({ kind: 'endpoint', id });
const device = (id: string, port?: string, member?: 1 | 2): ConnectEnd => ({
  kind: 'device',
  id,
  port,
  member,
});
const band: ConnectEnd = { kind: 'transport', id: 'coast' };

describe('what is pulled to what', () => {
  it('is read off nodes and handles of the canvas', () => {
    expect(endOf('devices/fw-s0', 'port:lan2@2')).toEqual({
      kind: 'device',
      id: 'fw-s0',
      port: 'lan2',
      member: 2,
    });
    expect(endOf('devices/sw-s0', 'port:p1')).toEqual({ kind: 'device', id: 'sw-s0', port: 'p1' });
    expect(endOf('devices/sw-s0', 'body')).toEqual({ kind: 'device', id: 'sw-s0' });
    expect(endOf('endpoints/lo-s0', 'body')).toEqual(ring('lo-s0'));
    expect(endOf('transports/coast', 'body')).toEqual(band);
    expect(endOf('sheet', null)).toBeUndefined();
    expect(refOfEnd({ kind: 'device', id: 'fw-s0', port: 'lan2', member: 2 })).toEqual({
      collection: 'devices',
      id: 'fw-s0',
      port: 'lan2',
      member: 2,
    });
  });

  it('asks for a VNI between two rings', () => {
    expect(connectEnds(design, ring('lo-s0'), ring('lo-s1'), ids())).toEqual({
      ask: 'tunnel',
      a: 'lo-s0',
      b: 'lo-s1',
    });
  });

  it('makes a cable, a landing or a docking of the rest, whichever end came first', () => {
    const bare = sitesOnCoast(2)
      .add('devices', 'rt', {
        kind: 'router',
        site: 's0',
        name: 'rt',
        ports: { w: { number: 1, role: 'wan' } },
      })
      .build();
    expect(connectEnds(design, device('sw-s1'), device('fw-s1', 'lan2'), ids())).toMatchObject({
      ok: true,
      created: [{ collection: 'links' }],
    });
    for (const [a, b] of [
      [device('rt'), band],
      [band, device('rt')],
    ] as const)
      expect(connectEnds(bare, a, b, ids())).toMatchObject({
        ok: true,
        patch: { links: { 'ld-x1': { kind: 'landing', port: 'w' } } },
      });
    expect(connectEnds(design, device('fw-s1'), ring('lo-s0'), ids())).toMatchObject({
      ok: true,
      patch: { endpoints: { 'lo-s0': { device: 'fw-s1' } } },
    });
  });

  it.each<[string, ConnectEnd, ConnectEnd, RegExp]>([
    ['a ring and a transport', ring('lo-s0'), band, /lands on no transport/],
    ['a transport and a ring', band, ring('lo-s0'), /lands on no transport/],
    ['two transports', band, band, /not joined by a cable/],
    ['a ring and a switch', ring('lo-s0'), device('sw-s0'), /docks on a firewall/],
    [
      'members of different pairs by a member link',
      device('fw-s0', 'sync1', 1),
      device('sw-s0'),
      /already holds a cable|two members of one HA pair/,
    ],
  ])('is refused between %s, with the reason', (_what, a, b, why) => {
    expect(whyNotConnect(design, a, b)).toMatch(why);
    expect(connectEnds(design, a, b, ids())).toMatchObject({ ok: false });
  });
});
