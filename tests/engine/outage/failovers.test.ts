import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { failovers } from '#engine/outage/failovers.ts';
import type { Failover } from '#engine/outage/failovers.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';

const pairAt = (patch: MergePatch = {}): Design => applyPatch(hubDesign(1, { hub: 'ha-pair' }), patch);
const only = (design: Design): Failover => {
  const all = failovers(design);
  expect(all).toHaveLength(1);
  return all[0]!;
};
const device = (patch: MergePatch): MergePatch => ({ devices: { 'fw-s0': patch } });
const association = (patch: MergePatch): MergePatch => ({ associations: { 'as-s0-s1': patch } });

describe('a failover', () => {
  it('moves what both members share, keeps associations where state is shared, and parts nobody', () => {
    const found = only(pairAt());
    expect(found).toMatchObject({ device: 'fw-s0', lost: 1, active: 2, leftBehind: [], totalUs: 2_000_000 });
    expect(found.moves).toEqual([
      { collection: 'endpoints', id: 'lo-s0' },
      { collection: 'links', id: 'ld-s0-coast' },
    ]);
    expect(found.recoveries).toEqual([
      {
        association: 'as-s0-s1',
        fate: 'kept',
        parts: [{ what: 'takeover', us: 2_000_000, missing: [] }],
        totalUs: 2_000_000,
      },
    ]);
    expect(found.outage).toMatchObject({ pairCount: 0, failedOver: [{ device: 'fw-s0', active: 2 }] });
  });

  // RFC 7296 section 1.2: four messages, each 18 ms on its way.
  it('takes a fresh key exchange where state isn’t shared', () => {
    expect(only(pairAt(device({ stateSync: false })))).toMatchObject({
      totalUs: 2_072_000,
      recoveries: [
        {
          fate: 'renewed',
          parts: [
            { what: 'takeover', us: 2_000_000 },
            { what: 'key-exchange', us: 72_000 },
          ],
        },
      ],
    });
  });

  it('waits for the far end to notice where the pair only answers: its interval times its tries', () => {
    const answers = association({ a: { start: 'answers' }, b: { start: 'starts' } });
    const design = applyPatch(pairAt(device({ stateSync: false })), answers);
    expect(only(design)).toMatchObject({
      // 10 s, three times, beside the takeover.
      totalUs: 30_072_000,
      recoveries: [{ parts: [{ us: 2_000_000 }, { what: 'detection', us: 30_000_000 }, { us: 72_000 }] }],
    });
    const off = only(applyPatch(design, association({ b: { liveness: 'off' } })));
    expect(off).not.toHaveProperty('totalUs');
    expect(off.recoveries[0]!.parts[1]).toEqual({
      what: 'detection',
      missing: [{ ref: { collection: 'associations', id: 'as-s0-s1' }, path: ['b', 'liveness'] }],
    });
  });

  // RFC 2409 sections 5 and 5.5: nine messages.
  it('takes longer with IKE version 1', () => {
    const first = association({ a: { ikeVersion: 1 }, b: { ikeVersion: 1 } });
    expect(only(applyPatch(pairAt(device({ stateSync: false })), first)).totalUs).toBe(2_162_000);
  });

  it('names what nobody has said instead of taking it for nothing', () => {
    const unknown = only(pairAt(device({ stateSync: null, failoverUs: null })));
    expect(unknown).not.toHaveProperty('totalUs');
    expect(unknown.recoveries).toMatchObject([
      {
        fate: 'unknown',
        parts: [
          {
            what: 'takeover',
            missing: [
              { ref: { collection: 'devices', id: 'fw-s0' }, path: ['failoverUs'] },
              { ref: { collection: 'devices', id: 'fw-s0' }, path: ['stateSync'] },
            ],
          },
        ],
      },
    ]);
    const distant = pairAt({ ...device({ stateSync: false }), transports: { coast: { latencyUs: null } } });
    expect(only(distant).recoveries[0]!.parts[1]!.missing).toEqual([
      { ref: { collection: 'transports', id: 'coast' }, path: ['latencyUs'] },
    ]);
  });

  it('leaves behind an endpoint, a landing and a switch that hang on the lost member', () => {
    const endpoint = only(pairAt({ endpoints: { 'lo-s0': { member: 1 } } }));
    expect(endpoint.leftBehind).toEqual([
      { ref: { collection: 'endpoints', id: 'lo-s0' }, because: 'endpoint-of-member' },
    ]);
    expect(endpoint.outage.tunnelsDown).toMatchObject([{ reasons: [{ code: 'endpoint-on-standby' }] }]);
    expect(endpoint.outage.pairCount).toBe(1);

    const landing = only(pairAt({ links: { 'ld-s0-coast': { members: '1' } } }));
    expect(landing.leftBehind).toEqual([
      { ref: { collection: 'links', id: 'ld-s0-coast' }, because: 'landing-of-member' },
    ]);
    expect(landing.recoveries).toMatchObject([{ fate: 'lost', parts: [] }]);
    expect(landing.outage.pairCount).toBe(1);

    const uplink = only(pairAt({ links: { 'cb-s0-up2': null } }));
    expect(uplink.leftBehind).toEqual([
      { ref: { collection: 'devices', id: 'sw-s0' }, because: 'cabled-to-member' },
    ]);
    expect(uplink.outage.pairCount).toBe(1);
  });

  it('is looked at for each member that forwards, and for no single gateway', () => {
    expect(failovers(pairDesign())).toEqual([]);
    const both = failovers(pairAt(device({ mode: 'active-active' })));
    expect(both.map(({ lost, active }) => [lost, active])).toEqual([
      [1, 2],
      [2, 1],
    ]);
    const second = failovers(pairAt(device({ active: 2 })));
    expect(second.map(({ lost }) => lost)).toEqual([2]);
  });
});
