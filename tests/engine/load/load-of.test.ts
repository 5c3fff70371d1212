import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { LoadOptions, LoadReport } from '#engine/load/load-of.ts';
import { loadOf } from '#engine/load/load-of.ts';
import practice from '../../reference/throughput-practice.json' with { type: 'json' };
import { hubDesign, pairDesign } from '../../support/designs.ts';

const report = (design: Design, options?: LoadOptions): LoadReport => {
  const answer = loadOf(design, options);
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
};
const full = [{ packetBytes: 1396, weight: 1 }];
const demand = (patch: MergePatch = {}): MergePatch => ({
  demands: {
    d: {
      segment: 'a',
      from: { host: 'h-s0-a' },
      to: { host: 'h-s1-a' },
      forwardBps: 100_000_000,
      reverseBps: 10_000_000,
      mix: full,
      flows: 4,
      ...patch,
    },
  },
});
const small: MergePatch = {
  profiles: {
    small: {
      name: 'Small gateway',
      encrypted: { oneFlowBps: 460_000_000, manyFlowsBps: 2_000_000_000, packetsPerSecond: 400_000 },
      plain: { oneFlowBps: 940_000_000, manyFlowsBps: 2_000_000_000, packetsPerSecond: 800_000 },
      encryption: 'offloaded',
    },
  },
  devices: { 'fw-s0': { profile: 'small' }, 'fw-s1': { profile: 'small' } },
};
const pair = (...patches: readonly MergePatch[]): Design =>
  [small, ...patches].reduce<Design>(applyPatch, pairDesign());
const elementLoad = (loads: LoadReport, id: string, direction: string) =>
  loads.elements.find(({ element, direction: own }) => element.id === id && own === direction)!.load;
const limitOf = (loads: LoadReport, key: string) => loads.limits.find(({ limit }) => limit.key === key)!;

describe('the load of a demand', () => {
  // By hand: 1396 bytes inside become 1396 + 14 + 8 + 8 + 20 = 1446 of VXLAN, ESP pads 1446 + 2 to 1448, then 8 + 8 + 1448 + 16 + 20 = 1500
  // (RFC 7348 section 5, RFC 4303 section 2, RFC 4106 section 3), and 1538 on the cable (RFC 2544 appendix B); 100 Mbit/s are 8954.15 packets/s.
  it('grows hop by hop as headers are put around its packets', () => {
    const loads = report(pair(demand()));
    const packets = 100_000_000 / (8 * 1396);
    const host = elementLoad(loads, 'cb-h-s0-a', 'a-to-b');
    expect(host).toEqual({
      innerRateBps: 100_000_000,
      packetsPerSecond: Math.ceil(packets),
      framesPerSecond: Math.ceil(packets),
      outerRateBps: 100_000_000,
      wireRateBps: Math.ceil(packets * 8 * (1396 + 38)),
    });
    // The uplink has the VLAN's tag.
    expect(elementLoad(loads, 'cb-s0-up1', 'a-to-b').wireRateBps).toBe(Math.ceil(packets * 8 * (1396 + 42)));
    const tunnel = elementLoad(loads, 'tn-s0-s1-a', 'a-to-b');
    expect(tunnel.outerRateBps).toBe(Math.ceil(packets * 8 * 1500));
    expect(tunnel.wireRateBps).toBe(Math.ceil(packets * 8 * 1538));
    expect(elementLoad(loads, 'tn-s0-s1-a', 'b-to-a').innerRateBps).toBe(10_000_000);
    expect(elementLoad(loads, 'ld-s0-coast', 'out')).toEqual(tunnel);
    expect(elementLoad(loads, 'ld-s1-coast', 'in')).toEqual(tunnel);
    // A gateway encrypts one way and decrypts the other.
    expect(elementLoad(loads, 'fw-s0', 'both').innerRateBps).toBe(110_000_000);
  });

  it('counts twice at a hub that relays it, and once at the sites', () => {
    const design = applyPatch(
      hubDesign(2),
      demand({ from: { host: 'h-s1-a' }, to: { host: 'h-s2-a' }, reverseBps: null }),
    );
    const loads = report(design);
    expect(elementLoad(loads, 'fw-s0', 'both').innerRateBps).toBe(200_000_000);
    expect(elementLoad(loads, 'fw-s1', 'both').innerRateBps).toBe(100_000_000);
    expect(elementLoad(loads, 'coast', 'both').innerRateBps).toBe(200_000_000);
  });

  it('starts at a site as at its first host', () => {
    const sites = report(pair(demand({ from: { host: null, site: 's0' }, to: { host: null, site: 's1' } })));
    expect(sites.elements).toEqual(report(pair(demand())).elements);
  });

  it('starts at a port in the VLAN where a site has no host', () => {
    const design = applyPatch(pair(demand({ from: { host: null, site: 's0' } })), {
      devices: { 'h-s0-a': null },
      links: { 'cb-h-s0-a': null },
    });
    const loads = report(design);
    expect(elementLoad(loads, 'tn-s0-s1-a', 'a-to-b').innerRateBps).toBe(100_000_000);
    expect(elementLoad(loads, 'tn-s0-s1-a', 'b-to-a').innerRateBps).toBe(10_000_000);
  });

  it('says where packets are too long for a tunnel that may not cut them, and sends two frames where it may', () => {
    const long = { mix: [{ packetBytes: 1500, weight: 1 }] };
    const whole = report(pair(demand(long))).demands[0]!.forward.direction;
    expect(whole).toMatchObject({
      tooLong: [{ tunnel: 'tn-s0-s1-a', packetBytes: 1500, largestBytes: 1396 }],
    });
    const cut = report(pair(demand(long), { associations: { 'as-s0-s1': { a: { outerDf: 'clear' } } } }));
    expect(cut.demands[0]!.forward.direction).toMatchObject({ tooLong: [] });
    const { packetsPerSecond, framesPerSecond } = elementLoad(cut, 'tn-s0-s1-a', 'a-to-b');
    expect(framesPerSecond).toBe(Math.ceil((2 * 100_000_000) / 12_000));
    expect(packetsPerSecond).toBe(Math.ceil(100_000_000 / 12_000));
  });
});

describe('limits', () => {
  it('are listed from the fullest on, with what is left of each', () => {
    const loads = report(pair(demand({ flows: 1 })));
    expect(loads.bottleneck!.limit).toMatchObject({ kind: 'gateway-one-flow', element: { id: 'fw-s0' } });
    const wan = limitOf(loads, 'devices fw-s0 wan1 out');
    expect(wan).toMatchObject({
      used: Math.ceil((100_000_000 / 8 / 1396) * 8 * 1538),
      headroom: 1_000_000_000 - wan.used,
    });
    expect(wan.sharePerMillion).toBe(Math.ceil(wan.used / 1_000));
    const shares = loads.limits.map(({ sharePerMillion }) => sharePerMillion ?? -1);
    expect(shares).toEqual([...shares].sort((a, b) => b - a));
  });

  it('take small packets to packets a second and large ones to the ordered rate', () => {
    const ordered = { links: { 'ld-s1-coast': { rateDownBps: 200_000_000 } } };
    const large = report(pair(ordered, demand()));
    expect(large.bottleneck!.limit).toMatchObject({
      kind: 'transport-rate',
      element: { collection: 'links', id: 'ld-s1-coast' },
      direction: 'in',
      most: 200_000_000,
    });
    const tiny = report(pair(demand({ mix: [{ packetBytes: 68, weight: 1 }], forwardBps: 100_000_000 })));
    expect(tiny.bottleneck!.limit).toMatchObject({ kind: 'gateway-packets', cipher: 'encrypted' });
    // 100 + 10 Mbit/s of 68-byte packets.
    expect(tiny.bottleneck!.used).toBe(Math.ceil(100_000_000 / 544) + Math.ceil(10_000_000 / 544));
  });

  it('grow with the multiplier', () => {
    const [once, twice] = [report(pair(demand())), report(pair(demand()), { multiplier: 2 })];
    const key = 'devices fw-s0 wan1 out';
    expect(limitOf(twice, key).used).toBeGreaterThanOrEqual(2 * limitOf(once, key).used - 1);
    expect(limitOf(twice, key).used).toBeLessThanOrEqual(2 * limitOf(once, key).used);
  });

  it('refuse a multiplier and a window out of bounds, and rates that outgrow them', () => {
    expect(loadOf(pair(demand()), { multiplier: 0, windowBytes: 0 })).toMatchObject({
      ok: false,
      problems: [{ field: 'multiplier', value: 0 }, { field: 'windowBytes' }],
    });
    expect(loadOf(pair(demand({ forwardBps: 10_000_000_000_000 })), { multiplier: 2 })).toMatchObject({
      ok: false,
      problems: [{ field: 'demands.d.forwardBps' }],
    });
  });
});

describe('what nobody has said', () => {
  it('is named and counted nowhere', () => {
    const loads = report(pair(demand({ mix: null }), { transports: { coast: { latencyUs: null } } }));
    expect(loads.missing).toContainEqual({ ref: { collection: 'demands', id: 'd' }, path: ['mix'] });
    expect(loads.missing).toContainEqual({
      ref: { collection: 'transports', id: 'coast' },
      path: ['latencyUs'],
    });
    expect(loads.missing).toContainEqual({
      ref: { collection: 'transports', id: 'coast' },
      path: ['rateBps'],
    });
    expect(loads.bottleneck).toBeUndefined();
    const wan = limitOf(loads, 'devices fw-s0 wan1 out');
    expect(wan).toMatchObject({ used: 0, demands: [], uncounted: ['d'] });
  });

  it('leaves a limit without a share', () => {
    const loads = report(pair(demand(), { devices: { 'fw-s0': { profile: null } } }));
    const limit = limitOf(loads, 'devices fw-s0 encrypted gateway-rate');
    expect(limit).not.toHaveProperty('sharePerMillion');
    expect(limit.limit.missing).toEqual({ ref: { collection: 'devices', id: 'fw-s0' }, path: ['profile'] });
  });

  it('is nothing where the design says all', () => {
    expect(report(pair(demand(), { transports: { coast: { rateBps: 1_000_000_000 } } })).missing).toEqual([]);
  });
});

describe('demands that don’t get there', () => {
  it('load nothing and say why', () => {
    const parted = report(pair(demand(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 7 } } } }));
    expect(parted.demands[0]!.forward.direction).toEqual({ state: 'parted' });
    expect(parted.elements).toEqual([]);
    const nowhere = report(
      pair(demand({ to: { host: null, site: 's1' } }), {
        devices: { 'h-s1-a': null, 'sw-s1': null },
        links: { 'cb-h-s1-a': null, 'cb-s1-up1': null },
        forwarders: { 'br-s1-a': { circuits: { access: null } } },
      }),
    );
    expect(nowhere.demands[0]!.forward.direction).toEqual({ state: 'no-point', end: 'to' });
  });
});

describe('latency', () => {
  it('is the sum of one-way latencies against what is allowed', () => {
    const through = (latencyAllowedUs: number) => {
      const design = applyPatch(
        hubDesign(2),
        demand({ from: { host: 'h-s1-a' }, to: { host: 'h-s2-a' }, latencyAllowedUs }),
      );
      return report(design).demands[0]!.forward;
    };
    expect(through(36_000)).toMatchObject({ isInTime: true, direction: { latencyUs: 36_000 } });
    expect(through(35_999)).toMatchObject({ isInTime: false });
    expect(
      report(pair(demand(), { transports: { coast: { latencyUs: null } } })).demands[0]!.forward,
    ).not.toHaveProperty('isInTime');
  });
});

describe('what TCP could reach', () => {
  const mbps = (bps: number): number => Math.round(bps / 100_000) / 10;
  const ideal: MergePatch = { transports: { coast: { latencyUs: 0, lossPpm: 0 } } };
  const bulk: MergePatch = { segments: { a: { mtu: 1500 } } };
  const cutting: MergePatch = {
    associations: { 'as-s0-s1': { a: { outerDf: 'clear' }, b: { outerDf: 'clear' } } },
  };

  it('between two hosts on one switch is what Ethernet leaves of the cable', () => {
    const design = applyPatch(
      applyPatch(pairDesign({ hostsPerSite: 2 }), bulk),
      demand({ to: { host: 'h-s0-a1' } }),
    );
    const { manyFlows, packetBytes } = report(design).demands[0]!.forward.reachable!;
    expect(packetBytes).toBe(1500);
    expect(manyFlows[0]).toMatchObject({ kind: 'port-speed', element: { collection: 'links' } });
    expect(mbps(manyFlows[0]!.limitBps)).toBe(941.5);
    expect(mbps(manyFlows[0]!.limitBps)).toBeGreaterThan(practice.wiredManyFlowsMbps.least);
    expect(mbps(manyFlows[0]!.limitBps)).toBeLessThan(practice.wiredManyFlowsMbps.most);
  });

  it('between two hosts on one switch is for one flow what a host does in one', () => {
    // A processor that handles 800 Mbit/s of a single flow's packets: 1448 bytes of data in each 1500.
    const host: MergePatch = {
      profiles: { desk: { name: 'Desk computer', plain: { oneFlowBps: 800_000_000 } } },
      devices: { 'h-s0-a1': { profile: 'desk' } },
    };
    const design = [bulk, host, demand({ to: { host: 'h-s0-a1' } })].reduce<Design>(
      applyPatch,
      pairDesign({ hostsPerSite: 2 }),
    );
    const { manyFlows, oneFlow } = report(design).demands[0]!.forward.reachable!;
    expect(oneFlow[0]).toMatchObject({
      kind: 'host-one-flow',
      element: { collection: 'devices', id: 'h-s0-a1' },
    });
    expect(mbps(oneFlow[0]!.limitBps)).toBe(772.3);
    expect(mbps(oneFlow[0]!.limitBps)).toBeGreaterThan(practice.wiredOneFlowMbps.least);
    expect(mbps(oneFlow[0]!.limitBps)).toBeLessThan(practice.wiredOneFlowMbps.most);
    expect(mbps(manyFlows[0]!.limitBps)).toBe(941.5);
  });

  it('through small gateways is the WAN port for many flows, and the gateway for one', () => {
    for (const [patch, expected] of [
      [cutting, practice.encryptedManyFlowsCutMbps],
      // 1396 bytes fit whole: 1344 of data in 1538 on the cable.
      [{}, 873.9],
    ] as const) {
      const { manyFlows, oneFlow } = report(pair(ideal, bulk, demand(), patch)).demands[0]!.forward
        .reachable!;
      expect(manyFlows[0]).toMatchObject({
        kind: 'port-speed',
        element: { collection: 'devices', port: 'wan1' },
      });
      expect(mbps(manyFlows[0]!.limitBps)).toBe(expected);
      expect(expected).toBeGreaterThan(practice.encryptedManyFlowsMbps.least - 1);
      expect(oneFlow[0]).toMatchObject({ kind: 'gateway-one-flow', cipher: 'encrypted' });
      expect(mbps(oneFlow[0]!.limitBps)).toBeGreaterThan(practice.encryptedOneFlowMbps.least);
      expect(mbps(oneFlow[0]!.limitBps)).toBeLessThan(practice.encryptedOneFlowMbps.most);
    }
  });

  it('through a gateway on one virtual processor is what that encrypts', () => {
    const tiny = { profiles: { small: { encryption: 'cpu', encrypted: { manyFlowsBps: 20_000_000 } } } };
    const { manyFlows } = report(pair(ideal, bulk, demand(), tiny)).demands[0]!.forward.reachable!;
    expect(manyFlows[0]).toMatchObject({ kind: 'gateway-rate', element: { collection: 'devices' } });
    expect(mbps(manyFlows[0]!.limitBps)).toBeGreaterThan(practice.oneVirtualProcessorMbps.least);
    expect(mbps(manyFlows[0]!.limitBps)).toBeLessThan(practice.oneVirtualProcessorMbps.most);
  });

  it('for one flow is held back by its window and by loss', () => {
    // RFC 7323 section 1.1: 65,535 bytes in a round trip of 36 ms are 14.563 Mbit/s.
    const forward = report(pair(demand()), { windowBytes: 65_535 }).demands[0]!.forward;
    expect(forward.reachable!.oneFlow[0]).toEqual({ kind: 'window', limitBps: 14_563_333 });
    const stated = pair(demand({ windowBytes: 65_535 }));
    expect(report(stated).demands[0]!.forward.reachable!.oneFlow[0]).toEqual({
      kind: 'window',
      limitBps: 14_563_333,
    });
    expect(report(stated, { windowBytes: 131_070 }).demands[0]!.forward.reachable!.oneFlow[0]).toMatchObject({
      kind: 'loss',
    });
    // RFC 3819 section 8.5.1 with 1356 bytes, 36 ms and 200 lost of a million: 0.93 x 1356 x 8 / (0.036 x sqrt(0.0002)).
    const unbound = report(pair(demand())).demands[0]!.forward.reachable!;
    expect(unbound.oneFlow[0]).toMatchObject({ kind: 'loss' });
    expect(mbps(unbound.oneFlow[0]!.limitBps)).toBe(19.8);
    // 460 Mbit/s of 1396-byte packets carry 442.9 of data, for 36 ms.
    expect(unbound.windowNeededBytes).toBe(Math.ceil((Math.floor((460_000_000 * 1344) / 1396) * 36) / 8_000));
  });

  it('for one flow keeps to one cable of an aggregate', () => {
    const second = (device: string, port: string): MergePatch => ({
      [device]: {
        ports: {
          [port]: { aggregation: 'up' },
          extra: {
            number: 90,
            role: 'lan',
            mode: 'trunk',
            allowedVlans: [110],
            speedBps: 1_000_000_000,
            aggregation: 'up',
          },
        },
      },
    });
    const { manyFlows, oneFlow } = report(
      pair(ideal, demand(), {
        devices: { ...second('sw-s0', 'p1'), ...second('fw-s0', 'lan1') },
        links: {
          'cb-s0-up9': {
            kind: 'cable',
            a: { device: 'sw-s0', port: 'extra' },
            b: { device: 'fw-s0', port: 'extra' },
          },
        },
      }),
    ).demands[0]!.forward.reachable!;
    const uplink = (kind: string) =>
      [...manyFlows, ...oneFlow].find((one) => one.kind === kind && one.element?.id === 'cb-s0-up1')!
        .limitBps;
    expect(uplink('port-speed')).toBe(Math.floor((2_000_000_000 * 1344) / (1396 + 42)));
    expect(uplink('one-cable')).toBe(Math.floor((1_000_000_000 * 1344) / (1396 + 42)));
  });
});
