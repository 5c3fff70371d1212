import type { Design } from '#engine/model/design.ts';
import type { DesignBuilder, JoinPlan } from '#engine/model/design-builder.ts';
import { designBuilder } from '#engine/model/design-builder.ts';

const names = [
  'Head office',
  'Gullhaven',
  'Orrin Point',
  'Skerry',
  'Marl',
  'Tarn',
  'Velt',
  'Wick',
  'Dunmore',
];

export interface PlanOptions {
  /** Segments of every site; letters a, b, c … */
  readonly segments?: readonly string[];
  readonly hub?: 'firewall' | 'ha-pair';
  readonly hostsPerSite?: number;
  readonly join?: Partial<JoinPlan>;
}

const vlanOf = (segment: string): number => 110 + 10 * (segment.charCodeAt(0) - 97);

/** Site ids in order: s0 is the head office. */
export const siteId = (index: number): string => `s${index}`;

/** A builder that holds `count` sites on one untrusted transport, nothing joined yet. */
export const sitesOnCoast = (count: number, options: PlanOptions = {}): DesignBuilder => {
  const segments = options.segments ?? ['a'];
  const builder = designBuilder(`Sites on the coast, ${count}`)
    .meta({ title: `Sites on the coast, ${count}`, example: true })
    .transport('coast', {
      name: 'Coastal access',
      kind: 'internet',
      trusted: false,
      mtu: 1500,
      latencyUs: 18_000,
      jitterUs: 3_000,
      lossPpm: 200,
      families: [4],
    });
  for (const id of segments)
    builder.segment(id, {
      letter: id.toUpperCase(),
      name: `Segment ${id.toUpperCase()}`,
      vlan: vlanOf(id),
      subnet: `10.${vlanOf(id)}.0.0/16`,
      mtu: 1396,
    });
  for (let i = 0; i < count; i += 1) {
    const id = siteId(i);
    builder.site(id, {
      name: names[i] ?? `Site ${i}`,
      gateway: i === 0 ? (options.hub ?? 'firewall') : 'firewall',
      segments,
      hosts: segments.flatMap((segment) =>
        Array.from({ length: options.hostsPerSite ?? 1 }, (_, n) => ({
          name: `h-${id}-${segment}${n === 0 ? '' : n}`,
          segment,
          address: `10.${vlanOf(segment)}.${i}.${20 + n}/16`,
        })),
      ),
      landings: { coast: { ipv4: `198.51.100.${10 + i}` } },
      loopbacks: { coast: `10.255.0.${i + 1}/32` },
    });
  }
  return builder;
};

const joined = (
  builder: DesignBuilder,
  pairs: readonly (readonly [number, number])[],
  options: PlanOptions,
): Design => {
  const segments = options.segments ?? ['a'];
  let nextVni = 10_000;
  for (const [from, to] of pairs) {
    const base = nextVni;
    nextVni += segments.length;
    builder.join(siteId(from), siteId(to), {
      transport: 'coast',
      segments,
      vni: (segment) => base + segments.indexOf(segment),
      ...options.join,
    });
  }
  return builder.build();
};

/** Two sites, one association, a tunnel per segment. */
export const pairDesign = (options: PlanOptions = {}): Design =>
  joined(sitesOnCoast(2, options), [[0, 1]], options);

/** s0 joined to each of `spokes` sites. */
export const hubDesign = (spokes: number, options: PlanOptions = {}): Design =>
  joined(
    sitesOnCoast(spokes + 1, options),
    Array.from({ length: spokes }, (_, i) => [0, i + 1] as const),
    options,
  );

/** Each site joined to the next. */
export const chainDesign = (count: number, options: PlanOptions = {}): Design =>
  joined(
    sitesOnCoast(count, options),
    Array.from({ length: count - 1 }, (_, i) => [i, i + 1] as const),
    options,
  );

/** Every site joined to every other; a storm unless `join.isolation` is given. */
export const meshDesign = (count: number, options: PlanOptions = {}): Design =>
  joined(
    sitesOnCoast(count, options),
    Array.from({ length: count }, (_, i) =>
      Array.from({ length: count - 1 - i }, (_x, k) => [i, i + k + 1] as const),
    ).flat(),
    options,
  );
