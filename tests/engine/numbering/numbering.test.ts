import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { allocateUnset } from '#engine/numbering/allocate-unset.ts';
import { freeLoopbacks, freeTunnelName, freeVlans, freeVnis } from '#engine/numbering/free-numbers.ts';
import { networkOverlaps, numberClashes } from '#engine/numbering/number-clashes.ts';
import type { NumberingContext } from '#engine/numbering/numbering-context.ts';
import { numberingContextSchema } from '#engine/numbering/numbering-context.ts';
import { numbersOf } from '#engine/numbering/numbers-of.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { generatedDesign } from '../../support/generated-designs.ts';

const vnis = (design: Design, count: number, context?: NumberingContext) => {
  const answer = freeVnis(design, count, context);
  return answer.ok ? answer.vnis : answer.problems;
};
const loopbacks = (design: Design, family: 4 | 6, count: number, context?: NumberingContext) => {
  const answer = freeLoopbacks(design, family, count, context);
  return answer.ok ? answer.loopbacks : answer.problems;
};

describe('free numbers', () => {
  // VNIs 10000 to 10002 and loopbacks 10.255.0.1 to 10.255.0.3 are in use.
  const design = meshDesign(3);

  it('are the lowest of the usual ranges', () => {
    expect(vnis(design, 2)).toEqual([10_003, 10_004]);
    expect(loopbacks(design, 4, 2)).toEqual(['10.255.0.4/32', '10.255.0.5/32']);
    expect(freeVlans(design, 2)).toEqual({ ok: true, vlans: [111, 112] });
    expect(freeVlans(design, 2, { step: 10 })).toEqual({ ok: true, vlans: [120, 130] });
    expect(freeTunnelName(design, 'tn-s0-s1-a')).toBe('tn-s0-s1-a-2');
    expect(freeTunnelName(design, 'tn-s0-s1-b')).toBe('tn-s0-s1-b');
  });

  it('come from the pools in their order, around reservations and other designs', () => {
    const context: NumberingContext = {
      pools: {
        vnis: [
          { from: 10_001, to: 10_006 },
          { from: 20, to: 30 },
        ],
        loopbacks: ['192.0.2.0/29', '198.51.100.0/24'],
      },
      reserved: { vnis: [{ from: 10_003, to: 10_004 }], networks: ['192.0.2.2/31'] },
      otherDesigns: [{ name: 'Ferry lights', vnis: [10_005, 20], loopbacks: ['192.0.2.5'] }],
    };
    expect(vnis(design, 3, context)).toEqual([10_006, 21, 22]);
    expect(loopbacks(design, 4, 5, context)).toEqual([
      '192.0.2.1/32',
      '192.0.2.4/32',
      '192.0.2.6/32',
      '192.0.2.7/32',
      // Its landings have 198.51.100.10 to 12; what ends in 0 looks like a network.
      '198.51.100.1/32',
    ]);
  });

  it('keep out of subnets and networks in use, of whichever length', () => {
    const context = { networksInUse: [{ network: '10.255.0.0/17' }, { network: '10.255.1.0/24' }] };
    expect(loopbacks(design, 4, 1, context)).toEqual(['10.255.128.1/32']);
    const taken = applyPatch(design, { segments: { a: { sites: { s0: { subnets: ['10.255.0.0/24'] } } } } });
    expect(loopbacks(taken, 4, 1)).toEqual(['10.255.1.1/32']);
  });

  it('are found in IPv6 pools, where skipping a network is one step', () => {
    const context: NumberingContext = {
      pools: { loopbacks: ['2001:db8:ff::/48'] },
      networksInUse: [{ network: '2001:db8:ff::/64' }],
      otherDesigns: [{ loopbacks: ['2001:db8:ff:1::'] }],
    };
    expect(loopbacks(design, 6, 2, context)).toEqual(['2001:db8:ff:1::1/128', '2001:db8:ff:1::2/128']);
  });

  it('are refused where a pool has too few, saying how many it has', () => {
    expect(vnis(design, 2, { pools: { vnis: [{ from: 10_002, to: 10_003 }] } })).toEqual([
      {
        field: 'pools.vnis',
        value: '10002 to 10003',
        expected: '2 free VNIs in the pool, which has 1: widen the pool or give numbers back',
      },
    ]);
    expect(loopbacks(design, 6, 1)).toMatchObject([{ field: 'pools.loopbacks', value: undefined }]);
    expect(loopbacks(design, 4, 1, { pools: { loopbacks: ['10.255.0.1/32'] } })).toMatchObject([
      { value: '10.255.0.1/32' },
    ]);
  });

  it('avoid VLANs of ports and circuits at the sites that are asked about', () => {
    const used = applyPatch(design, { devices: { 'sw-s0': { ports: { p2: { vlan: 111 } } } } });
    expect(freeVlans(used, 1, { sites: ['s0'] })).toEqual({ ok: true, vlans: [112] });
    expect(freeVlans(used, 1, { sites: ['s1'] })).toEqual({ ok: true, vlans: [111] });
  });

  it('are different ones, none of them held, for any design', () => {
    fc.assert(
      fc.property(generatedDesign, fc.integer({ min: 1, max: 20 }), (any, count) => {
        const { vnis: held, loopbacks: addresses } = numbersOf(any);
        const found = vnis(any, count) as readonly number[];
        expect(new Set([...found, ...held]).size).toBe(count + held.length);
        const fresh = (loopbacks(any, 4, count) as readonly string[]).map((text) => text.split('/')[0]);
        expect(new Set([...fresh, ...addresses]).size).toBe(count + addresses.length);
      }),
      { numRuns: 50 },
    );
  });
});

describe('a context', () => {
  it('holds what a design tells its neighbours', () => {
    const told = { otherDesigns: [numbersOf(hubDesign(2))] };
    expect(numberingContextSchema.parse(told)).toEqual(told);
  });

  it.each([
    [{ pools: { vnis: [{ from: 5, to: 4 }] } }, 'expected a range that ends no lower than it begins'],
    [{ pools: { loopbacks: ['10.0.0.0'] } }, 'expected a prefix such as 10.110.0.0/22 or 2001:db8:110::/64'],
    [{ reserved: { vlans: [{ from: 0, to: 4 }] } }, 'expected a VLAN from 1 to 4094; 0 means no VLAN'],
  ])('is refused as %j', (context, message) => {
    const parsed = numberingContextSchema.safeParse(context);
    expect(parsed.error!.issues.map((issue) => issue.message)).toEqual([message]);
  });
});

describe('giving numbers to all that has none', () => {
  const bare: MergePatch = {
    endpoints: { 'lo-s1': { ipv4: null }, 'lo-s2': { ipv4: null } },
    tunnels: {
      'tn-s0-s1-a': { a: { vni: null }, b: { vni: null } },
      'tn-s0-s2-a': { b: { vni: null } },
    },
    segments: { a: { sites: { s0: { vlan: null }, s1: { vlan: null }, s2: { vlan: null } } } },
  };

  it('is one patch, with each number in it named', () => {
    const design = applyPatch(hubDesign(2), bare);
    const { patch, allocated, problems } = allocateUnset(design);
    expect(problems).toEqual([]);
    expect(allocated.map(({ ref, path, value }) => [ref.id, path.join('.'), value])).toEqual([
      ['lo-s1', 'ipv4', '10.255.0.2/32'],
      ['lo-s2', 'ipv4', '10.255.0.3/32'],
      ['tn-s0-s1-a', 'a.vni', 10_002],
      ['tn-s0-s1-a', 'b.vni', 10_002],
      // What the other end has.
      ['tn-s0-s2-a', 'b.vni', 10_001],
      // Ports of each site still have VLAN 110.
      ['a', 'sites.s0.vlan', 111],
      ['a', 'sites.s1.vlan', 111],
      ['a', 'sites.s2.vlan', 111],
    ]);
    const after = applyPatch(design, patch);
    expect(parseDesign(after).ok).toBe(true);
    expect(after.tunnels['tn-s0-s1-a']!.b.vni).toBe(10_002);
    expect(allocateUnset(after)).toEqual({ patch: {}, allocated: [], problems: [] });
  });

  it('takes the VLAN of a segment’s other sites where that is free, and another where it isn’t', () => {
    const design = applyPatch(pairDesign({ segments: ['a', 'b'] }), {
      segments: { b: { sites: { s1: { vlan: null } } } },
    });
    expect(allocateUnset(design).allocated.map(({ value }) => value)).toEqual([111]);
    const free = applyPatch(design, {
      devices: {
        'sw-s1': { ports: { p1: { allowedVlans: [110] }, p3: { vlan: 110 } } },
        'fw-s1': { ports: { lan1: { allowedVlans: [110] } } },
      },
      forwarders: { 'br-s1-b': { circuits: { access: null } } },
    });
    expect(allocateUnset(free).allocated.map(({ value }) => value)).toEqual([120]);
  });

  it('gives IPv6 where the tunnels at an endpoint ask for it, and says what a pool lacks', () => {
    const design = applyPatch(pairDesign(), {
      endpoints: { 'lo-s1': { ipv4: null } },
      tunnels: { 'tn-s0-s1-a': { family: 6 } },
    });
    const context = { pools: { loopbacks: ['2001:db8:ff::/64'] } };
    expect(allocateUnset(design, context).patch).toEqual({
      endpoints: { 'lo-s1': { ipv6: '2001:db8:ff::1/128' } },
    });
    expect(allocateUnset(design)).toEqual({
      patch: {},
      allocated: [],
      problems: [
        {
          field: 'pools.loopbacks',
          value: undefined,
          expected: 'a prefix of IPv6 from which to take loopbacks, for endpoints.lo-s1',
        },
      ],
    });
  });
});

describe('a pool that is too small', () => {
  it('serves as many as it can and names those left without', () => {
    const design = applyPatch(hubDesign(2), {
      endpoints: { 'lo-s1': { ipv4: null }, 'lo-s2': { ipv4: null } },
      tunnels: { 'tn-s0-s2-a': { a: { vni: null }, b: { vni: null } } },
    });
    const context = { pools: { loopbacks: ['10.255.9.9/32'], vnis: [{ from: 10_000, to: 10_000 }] } };
    const { allocated, problems } = allocateUnset(design, context);
    expect(allocated.map(({ ref, value }) => [ref.id, value])).toEqual([['lo-s1', '10.255.9.9/32']]);
    expect(problems.map(({ field, expected }) => [field, expected])).toEqual([
      [
        'pools.loopbacks',
        'a free loopback in the pool, which has 0: widen the pool or give numbers back, for endpoints.lo-s2',
      ],
      [
        'pools.vnis',
        'a free VNI in the pool, which has 0: widen the pool or give numbers back, for tunnels.tn-s0-s2-a',
      ],
    ]);
  });
});

describe('clashes', () => {
  it('are none in a design that is numbered well', () => {
    const other = applyPatch(meshDesign(3), { meta: { title: 'Ferry lights' } });
    expect(numberClashes(other)).toEqual([]);
    expect(networkOverlaps(other)).toEqual([]);
  });

  it('a subnet that another design has just so is the same network, one inside it is not', () => {
    const design = hubDesign(2);
    const overlapsWith = (network: string) =>
      networkOverlaps(design, { otherDesigns: [{ name: 'Ferry lights', networks: [network] }] });
    expect(overlapsWith('10.110.0.0/16')).toEqual([]);
    expect(overlapsWith('10.110.4.0/24').map(({ b }) => b)).toEqual([
      { network: '10.110.4.0/24', holder: { by: 'design', name: 'Ferry lights' } },
      { network: '10.110.4.0/24', holder: { by: 'design', name: 'Ferry lights' } },
      { network: '10.110.4.0/24', holder: { by: 'design', name: 'Ferry lights' } },
    ]);
  });

  it('name all that hold a number: elements, other designs, reservations', () => {
    const design = applyPatch(hubDesign(2, { segments: ['a', 'b'] }), {
      tunnels: { 'tn-s0-s2-a': { a: { vni: 10_000 }, b: { vni: 10_000 }, name: 'tn-s0-s1-a' } },
      segments: { b: { sites: { s2: { vlan: 110 } } } },
      endpoints: { 'lo-s2': { ipv4: '10.255.0.2/32' } },
    });
    const clashes = numberClashes(design, {
      reserved: { vnis: [{ from: 10_000, to: 10_000 }] },
      otherDesigns: [{ name: 'Ferry lights', vnis: [10_003], loopbacks: ['10.255.0.1'] }],
    });
    expect(clashes.map(({ kind, value, site, holders }) => [kind, value, site, holders.length])).toEqual([
      ['vni', 10_000, undefined, 3],
      ['vni', 10_003, undefined, 2],
      ['vlan', 110, 's2', 2],
      ['loopback', '10.255.0.1', undefined, 2],
      ['loopback', '10.255.0.2', undefined, 2],
      ['tunnel-name', 'tn-s0-s1-a', undefined, 2],
    ]);
    expect(clashes[0]!.holders.at(-1)).toEqual({ by: 'reservation' });
    expect(clashes[1]!.holders[1]).toEqual({ by: 'design', name: 'Ferry lights' });
    expect(clashes[2]!.holders[1]).toEqual({
      by: 'element',
      ref: { collection: 'segments', id: 'b' },
      path: ['sites', 's2', 'vlan'],
    });
  });

  it('see one IPv6 address however it is written', () => {
    const design = applyPatch(pairDesign(), {
      endpoints: { 'lo-s0': { ipv6: '2001:db8::1/128' }, 'lo-s1': { ipv6: '2001:0DB8:0:0::0001/128' } },
    });
    expect(numberClashes(design)).toMatchObject([{ kind: 'loopback', holders: [{}, {}] }]);
  });
});

describe('overlaps of networks', () => {
  it('are found between segments, endpoints and networks in use, not inside a segment', () => {
    const design = applyPatch(pairDesign({ segments: ['a', 'b'] }), {
      segments: { b: { sites: { s1: { subnets: ['10.110.128.0/20', '2001:db8:120::/64'] } } } },
      endpoints: { 'lo-s1': { ipv4: '10.120.3.3/32', ipv6: '2001:db8:120::7/128' } },
    });
    const found = networkOverlaps(design, {
      networksInUse: [{ network: '10.0.0.0/12', of: 'Harbour office' }, { network: '10.120.0.0/24' }],
      otherDesigns: [{ name: 'Ferry lights', networks: ['2001:db8::/32'] }],
    });
    expect(found.map(({ a, b }) => `${a.network} ${b.network}`)).toEqual([
      '10.110.0.0/16 10.110.128.0/20',
      '10.110.0.0/16 10.110.128.0/20',
      '10.120.0.0/16 10.120.0.0/24',
      '10.120.0.0/16 10.120.3.3/32',
      '2001:db8::/32 2001:db8:120::/64',
      '2001:db8::/32 2001:db8:120::7/128',
      '2001:db8:120::/64 2001:db8:120::7/128',
    ]);
  });

  it('agree with comparing each two', () => {
    const network = fc
      .tuple(fc.nat(3), fc.nat(255), fc.integer({ min: 6, max: 32 }))
      .map(([a, b, length]) => `10.${a}.${b}.0/${length}`);
    const bits = (text: string): readonly [bigint, number] => {
      const [address, length] = text.split('/');
      return [address!.split('.').reduce((sum, byte) => sum * 256n + BigInt(byte), 0n), Number(length)];
    };
    const isOverlap = (x: string, y: string): boolean => {
      const [[a, m], [b, n]] = [bits(x), bits(y)];
      const shift = BigInt(32 - Math.min(m, n));
      return a >> shift === b >> shift;
    };
    fc.assert(
      fc.property(
        fc.uniqueArray(network, { minLength: 1, maxLength: 5 }),
        fc.array(network, { maxLength: 5 }),
        (own, inUse) => {
          const design = applyPatch(pairDesign(), {
            endpoints: { 'lo-s0': { ipv4: null }, 'lo-s1': { ipv4: null } },
            segments: { a: { sites: { s0: { subnets: own }, s1: { subnets: null } } } },
          });
          const found = networkOverlaps(design, { networksInUse: inUse.map((one) => ({ network: one })) });
          const expected = own.flatMap((x) => inUse.filter((y) => isOverlap(x, y)));
          expect(found).toHaveLength(expected.length);
        },
      ),
      { numRuns: 200 },
    );
  });
});
