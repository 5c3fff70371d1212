import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { reach } from '#engine/flood/reach.ts';
import type { Design, ElementRef } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { Outage } from '#engine/outage/outage.ts';
import { outage } from '#engine/outage/outage.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { outageTwin } from '../../support/outage-twin.ts';

/** Every single thing that can fail. */
const failable = (design: Design): readonly ElementRef[] => [
  ...(['sites', 'transports', 'links', 'associations', 'tunnels'] as const).flatMap((collection) =>
    Object.keys(design[collection]).map((id) => ({ collection, id })),
  ),
  ...Object.entries(design.devices).flatMap(([id, device]): ElementRef[] => [
    { collection: 'devices', id },
    ...Object.keys(device.ports).map((port) => ({ collection: 'devices' as const, id, port })),
    ...(device.kind === 'ha-pair'
      ? ([1, 2] as const).flatMap((member): ElementRef[] => [
          { collection: 'devices', id, member },
          { collection: 'devices', id, port: 'wan1', member },
          { collection: 'devices', id, port: 'lan1', member },
        ])
      : []),
  ]),
];

/** The ways between hosts that an outage lists, as the twin writes them. */
const waysOf = ({ segments }: Outage): readonly string[] =>
  segments
    .flatMap(({ segment, pairs }) =>
      pairs!.flatMap(({ a, b, lost }) => {
        if (a.port !== undefined || b.port !== undefined) return [];
        const there = `${segment} ${a.device} ${b.device}`;
        const back = `${segment} ${b.device} ${a.device}`;
        return lost === 'both' ? [there, back] : [lost === 'a-to-b' ? there : back];
      }),
    )
    .sort();

const ways = (design: Design, failed: readonly ElementRef[]): readonly string[] => {
  const answer = outage(design, failed, { pairs: true });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return waysOf(answer);
};

const withFailures = (designs: fc.Arbitrary<Design>) =>
  fc.tuple(designs, fc.array(fc.nat(99_999), { minLength: 1, maxLength: 3 })).map(([design, picks]) => {
    const all = failable(design);
    return { design, failed: [...new Set(picks.map((pick) => all[pick % all.length]!))] };
  });

/** A second transport for some sites, as a way to fall back on: named by their associations, or open to all. */
const withFallback: fc.Arbitrary<Design> = fc
  .tuple(generatedDesign, fc.boolean(), fc.constantFrom('both', '1', '2'), fc.nat(3))
  .map(([design, isNamed, members, first]) => {
    const gateways = Object.keys(design.devices).filter((id) => /^fw-/.test(id));
    const patch: MergePatch = {
      transports: { moor: { name: 'Moor line', kind: 'private-routed', families: [4] } },
      links: Object.fromEntries(
        gateways.slice(first % 2).map((device, i) => [
          `ld2-${device}`,
          {
            kind: 'landing',
            device,
            port: 'wan1',
            transport: 'moor',
            ipv4: `203.0.113.${i + 1}`,
            ...(design.devices[device]!.kind === 'ha-pair' ? { members } : {}),
          },
        ]),
      ),
    };
    const associations = Object.fromEntries(
      Object.entries(design.associations).map(([id, { a, b }]) => {
        const via = (device: string): MergePatch =>
          isNamed && gateways.slice(first % 2).includes(device)
            ? { via: { second: { rank: 'b0', landing: `ld2-${device}` } } }
            : isNamed
              ? {}
              : { via: null };
        return [id, { a: via(a.device), b: via(b.device) }];
      }),
    );
    return applyPatch(applyPatch(design, patch), { associations } as MergePatch);
  });

/** Spanning tree at some switches, and at gateways that take part in it or pass its frames on. */
const withTrees: fc.Arbitrary<Design> = fc
  .tuple(
    generatedDesign,
    fc.array(fc.constantFrom('on', 'off', 'pass', 'bridge'), { minLength: 8, maxLength: 8 }),
  )
  .map(([design, modes]) => {
    const devices = Object.keys(design.devices)
      .filter((id) => design.devices[id]!.kind !== 'host')
      .sort();
    return applyPatch(design, {
      profiles: { passing: { name: 'Passes BPDUs', reservedGroups: { '00': 'pass' } } },
      devices: Object.fromEntries(
        devices.map((id, i): [string, MergePatch] => {
          const mode = modes[i % modes.length]!;
          const isSwitch = design.devices[id]!.kind === 'switch';
          if (mode === 'pass') return [id, { profile: 'passing' }];
          return [
            id,
            mode === 'on' || (mode === 'bridge' && !isSwitch)
              ? { settings: { spanningTree: { mode: 'on' } } }
              : {},
          ];
        }),
      ),
    });
  });

describe('an outage and the document without what failed', () => {
  it('agree on which hosts no longer reach which', () => {
    fc.assert(
      fc.property(withFailures(generatedDesign), ({ design, failed }) => {
        expect(ways(design, failed)).toEqual(outageTwin(design, failed));
      }),
      { numRuns: 150 },
    );
  }, 120_000);

  it('agree where tunnels have a second way', () => {
    fc.assert(
      fc.property(withFailures(withFallback), ({ design, failed }) => {
        expect(ways(design, failed)).toEqual(outageTwin(design, failed));
      }),
      { numRuns: 100 },
    );
  }, 120_000);

  it('agree where spanning trees elect again, if the document is indexed afresh', () => {
    const hears = (design: Design, host: string) =>
      reach(indexNetwork(design), { host }).deliveries.map((delivery) => delivery.host);
    fc.assert(
      fc.property(withFailures(withTrees), ({ design, failed }) => {
        expect(ways(design, failed)).toEqual(outageTwin(design, failed, hears));
      }),
      { numRuns: 100 },
    );
  }, 120_000);
});

describe('whatever fails', () => {
  it('parts nothing where nothing does', () => {
    fc.assert(
      fc.property(fc.oneof(generatedDesign, withFallback, withTrees), (design) => {
        expect(outage(design, [])).toEqual({
          ok: true,
          segments: [],
          pairCount: 0,
          gone: [],
          tunnelsDown: [],
          tunnelsMoved: [],
          failedOver: [],
        });
      }),
      { numRuns: 100 },
    );
  }, 60_000);

  // Pairs that fail over and aggregates that change sides may join again what a first failure parted.
  it('never joins again what less of it parted, where nothing stands by', () => {
    fc.assert(
      fc.property(withFailures(generatedDesign), ({ design, failed }) => {
        const standsBy = Object.values(design.devices).some(
          ({ kind, ports }) =>
            kind === 'ha-pair' || Object.values(ports).some(({ aggregation }) => aggregation !== undefined),
        );
        fc.pre(!standsBy);
        const all = new Set(ways(design, failed));
        const answer = outage(design, failed);
        const gone = new Set(answer.ok ? answer.gone.map(({ device }) => device) : []);
        for (const way of ways(design, failed.slice(1))) {
          const [, from, to] = way.split(' ');
          expect(all.has(way) || gone.has(from!) || gone.has(to!)).toBe(true);
        }
      }),
      { numRuns: 150 },
    );
  }, 60_000);
});
