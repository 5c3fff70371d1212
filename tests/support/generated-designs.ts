import fc from 'fast-check';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { siteId, sitesOnCoast } from './designs.ts';

/** VLANs that occur in generated designs. */
export const generatedVlans = [1, 110, 120, 130] as const;

type Change = (design: Design) => MergePatch;

const pick = <T>(items: readonly T[], n: number): T | undefined =>
  items.length === 0 ? undefined : items[n % items.length];
const number = fc.nat(9_999);
const vlan = fc.constantFrom(...generatedVlans);
const none: MergePatch = {};

const devicesOf = (design: Design, kinds: readonly string[]): readonly string[] =>
  Object.keys(design.devices)
    .filter((id) => kinds.includes(design.devices[id]!.kind))
    .sort();
const plugs = (design: Design): readonly { device: string; port: string; member?: 1 | 2 }[] =>
  devicesOf(design, ['switch', 'firewall', 'ha-pair']).flatMap((device) =>
    Object.keys(design.devices[device]!.ports)
      .filter((port) => design.devices[device]!.ports[port]!.role === 'lan')
      .sort()
      .flatMap((port) =>
        design.devices[device]!.kind === 'ha-pair'
          ? [
              { device, port, member: 1 as const },
              { device, port, member: 2 as const },
            ]
          : [{ device, port }],
      ),
  );
const circuitsOf = (design: Design): readonly (readonly [string, string])[] =>
  Object.keys(design.forwarders)
    .sort()
    .flatMap((forwarder) =>
      Object.keys(design.forwarders[forwarder]!.circuits)
        .sort()
        .map((circuit) => [forwarder, circuit] as const),
    );

const differingVni = number.map((n): Change => (design) => {
  const id = pick(Object.keys(design.tunnels).sort(), n);
  return id === undefined ? none : { tunnels: { [id]: { a: { vni: 700 } } } };
});
const isolated = fc
  .record({ n: number, group: fc.constantFrom('one', 'two') })
  .map(({ n, group }): Change => (design) => {
    const at = pick(circuitsOf(design), n);
    return at === undefined
      ? none
      : { forwarders: { [at[0]]: { circuits: { [at[1]]: { isolation: group } } } } };
  });
const cableBetween = fc
  .record({ n: number, m: number, id: fc.nat(5) })
  .map(({ n, m, id }): Change => (design) => {
    const all = plugs(design);
    const [a, b] = [pick(all, n), pick(all, m)];
    return a === undefined || b === undefined || a === b
      ? none
      : { links: { [`cb-extra-${id}`]: { kind: 'cable', a: { ...a }, b: { ...b } } } };
  });
const portMode = fc
  .record({
    n: number,
    mode: fc.oneof(
      fc.record({
        mode: fc.constant('access'),
        vlan,
        allowedVlans: fc.constant(null),
        nativeVlan: fc.constant(null),
      }),
      fc.record({
        mode: fc.constant('trunk'),
        vlan: fc.constant(null),
        allowedVlans: fc.oneof(fc.constant('all'), fc.uniqueArray(vlan, { maxLength: 3 })),
        nativeVlan: fc.oneof(fc.constant(null), vlan),
      }),
    ),
    shut: fc.oneof({ weight: 9, arbitrary: fc.constant(null) }, { weight: 1, arbitrary: fc.constant(true) }),
  })
  .map(({ n, mode, shut }): Change => (design) => {
    const at = pick(plugs(design), n);
    return at === undefined
      ? none
      : ({ devices: { [at.device]: { ports: { [at.port]: { ...mode, shut } } } } } as MergePatch);
  });
const aggregated = fc.record({ n: number, m: number }).map(({ n, m }): Change => (design) => {
  const device = pick(devicesOf(design, ['switch', 'firewall']), n);
  if (device === undefined) return none;
  const ports = Object.keys(design.devices[device]!.ports)
    .filter((port) => design.devices[device]!.ports[port]!.role === 'lan')
    .sort();
  const [p, q] = [pick(ports, m), pick(ports, m + 1)];
  return p === undefined || q === undefined
    ? none
    : { devices: { [device]: { ports: { [p]: { aggregation: 'lag' }, [q]: { aggregation: 'lag' } } } } };
});
const circuitVlans = fc
  .record({
    n: number,
    vlans: fc.oneof(
      fc.constant('all'),
      fc.constant('untagged'),
      fc.uniqueArray(vlan, { minLength: 1, maxLength: 3 }),
    ),
    tag: fc.constantFrom(null, 'removed', 'kept'),
    translate: fc.oneof(fc.constant(null), fc.record({ '110': vlan })),
  })
  .map(({ n, ...circuit }): Change => (design) => {
    const ports = circuitsOf(design).filter(
      ([forwarder, id]) => design.forwarders[forwarder]!.circuits[id]!.kind === 'port',
    );
    const at = pick(ports, n);
    return at === undefined
      ? none
      : ({ forwarders: { [at[0]]: { circuits: { [at[1]]: circuit } } } } as MergePatch);
  });
const moreCircuits = fc
  .record({ n: number, m: number, vlans: fc.uniqueArray(vlan, { minLength: 1, maxLength: 2 }) })
  .map(({ n, m, vlans }): Change => (design) => {
    const forwarder = pick(Object.keys(design.forwarders).sort(), n);
    if (forwarder === undefined) return none;
    const port = pick(['lan1', 'lan2'], m)!;
    return { forwarders: { [forwarder]: { circuits: { more: { kind: 'port', rank: 'z1', port, vlans } } } } };
  });
const innerTags = fc
  .record({ n: number, mode: fc.constantFrom('keep', 'strip'), end: fc.constantFrom('a', 'b', 'both') })
  .map(({ n, mode, end }): Change => (design) => {
    const id = pick(Object.keys(design.tunnels).sort(), n);
    if (id === undefined) return none;
    const ends = end === 'both' ? ['a', 'b'] : [end];
    return { tunnels: { [id]: Object.fromEntries(ends.map((one) => [one, { innerTags: mode }])) } };
  });
const crossConnected = fc
  .record({
    n: number,
    rules: fc.array(
      fc.record({
        action: fc.constantFrom('permit', 'deny'),
        direction: fc.constantFrom('both', 'to-tunnel', 'from-tunnel'),
        frames: fc.constantFrom('any', 'arp', 'ipv4', 'broadcast', 'multicast'),
      }),
      { maxLength: 3 },
    ),
  })
  .map(({ n, rules }): Change => (design) => {
    const id = pick(Object.keys(design.forwarders).sort(), n);
    return id === undefined
      ? none
      : {
          forwarders: {
            [id]: {
              kind: 'cross-connect',
              policy: Object.fromEntries(rules.map((rule, i) => [`r${i}`, { rank: `a${i}`, ...rule }])),
            },
          },
        };
  });
const bothActive = fc.boolean().map((mine): Change => (design) => {
  if (design.devices['fw-s0']?.kind !== 'ha-pair') return none;
  return {
    devices: { 'fw-s0': { mode: 'active-active' } },
    ...(mine ? { endpoints: { 'lo-s0': { member: 2 } } } : {}),
  };
});
const multipoint = number.map((n): Change => (design) => {
  const device = pick(devicesOf(design, ['firewall', 'ha-pair']), n);
  return device === undefined
    ? none
    : {
        profiles: { mp: { name: 'Multipoint', vniScope: 'multipoint' } },
        devices: { [device]: { profile: 'mp' } },
      };
});
const hostElsewhere = fc.record({ n: number, m: number }).map(({ n, m }): Change => (design) => {
  const host = pick(devicesOf(design, ['host']), n);
  const plug = pick(plugs(design), m);
  return host === undefined || plug === undefined
    ? none
    : { links: { [`cb-${host}`]: { b: { member: null, ...plug } } } };
});

const change: fc.Arbitrary<Change> = fc.oneof(
  differingVni,
  isolated,
  isolated,
  cableBetween,
  cableBetween,
  portMode,
  aggregated,
  circuitVlans,
  moreCircuits,
  innerTags,
  crossConnected,
  bothActive,
  multipoint,
  hostElsewhere,
);

/** Designs as people draw and mistreat them: two to four sites, joined in any pairs, then changed in a few places. */
export const generatedDesign: fc.Arbitrary<Design> = fc
  .record({
    count: fc.integer({ min: 2, max: 4 }),
    segments: fc.constantFrom<readonly string[]>(['a'], ['a', 'b']),
    hub: fc.constantFrom('firewall' as const, 'ha-pair' as const),
    pairs: fc.uniqueArray(fc.tuple(fc.nat(3), fc.nat(3)), {
      minLength: 2,
      maxLength: 8,
      selector: ([a, b]) => `${Math.min(a, b)} ${Math.max(a, b)}`,
    }),
    isolation: fc.constantFrom(undefined, 'mesh'),
    sameVni: fc.boolean(),
    changes: fc.array(change, { maxLength: 8 }),
  })
  .map(({ count, segments, hub, pairs, isolation, sameVni, changes }) => {
    const builder = sitesOnCoast(count, { segments, hub, hostsPerSite: 1 });
    let vni = 10_000;
    for (const [a, b] of pairs) {
      const [from, to] = [Math.min(a, b), Math.max(a, b)];
      if (from === to || to >= count) continue;
      const base = sameVni ? 10_000 : vni;
      vni += segments.length;
      builder.join(siteId(from), siteId(to), {
        transport: 'coast',
        segments,
        vni: (segment) => base + segments.indexOf(segment),
        ...(isolation === undefined ? {} : { isolation }),
      });
    }
    return changes.reduce((design, make) => {
      const parsed = parseDesign(applyPatch(design, make(design)));
      if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems));
      return parsed.value;
    }, builder.build());
  });
