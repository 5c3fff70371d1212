import type { Design, Entry } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { designBuilder } from '#engine/model/design-builder.ts';

const gigabit = 1_000_000_000;
const siteCount = 200;

/** Letters of the segment with this number: A to Z, then AA and on. */
const letterOf = (n: number): string =>
  n < 26 ? String.fromCharCode(65 + n) : letterOf(Math.floor(n / 26) - 1) + letterOf(n % 26);

/**
 * The largest plan that the engine's bounds are stated for: 200 sites, 1,000 devices, 3,000 links, 500 tunnels, 200 segments.
 * Segment A joins all sites through the head office, an HA pair; the others join two or three neighbours each.
 */
export const largeDesign = (): Design => {
  const builder = designBuilder('Two hundred piers');
  for (const transport of ['coast', 'moor'])
    builder.transport(transport, {
      name: transport,
      kind: 'internet',
      trusted: false,
      mtu: 1500,
      latencyUs: 12_000,
      families: [4],
    });
  const sitesOf = (segment: number): readonly number[] =>
    segment === 0
      ? Array.from({ length: siteCount }, (_, i) => i)
      : [
          segment,
          1 + (segment % (siteCount - 1)),
          ...(segment % 2 === 0 ? [1 + ((segment + 7) % (siteCount - 1))] : []),
        ];
  const segmentsAt = Array.from({ length: siteCount }, (): number[] => []);
  for (let segment = 0; segment < 200; segment += 1) {
    builder.segment(`g${segment}`, {
      letter: letterOf(segment),
      name: `Segment ${segment}`,
      vlan: 100 + segment,
      subnet: `10.${segment}.0.0/16`,
      mtu: 1396,
    });
    for (const site of new Set(sitesOf(segment))) segmentsAt[site]!.push(segment);
  }
  for (let site = 0; site < siteCount; site += 1) {
    const segments = segmentsAt[site]!.map((segment) => `g${segment}`);
    builder.site(`s${site}`, {
      name: `Pier ${site}`,
      gateway: site % 20 === 0 ? 'ha-pair' : 'firewall',
      segments,
      hosts: [0, 1, 2].map((n) => ({
        name: `h-s${site}-${n}`,
        segment: segments[n % segments.length]!,
        address: `10.${segmentsAt[site]![n % segments.length]!}.${site}.${n + 1}/16`,
      })),
      landings: {
        coast: { ipv4: `198.51.100.${(site % 250) + 1}` },
        moor: { ipv4: `203.0.113.${(site % 250) + 1}` },
      },
      loopbacks: { coast: `10.255.${site}.1/32` },
    });
  }
  let vni = 10_000;
  const joined = new Map<string, number[]>();
  for (let segment = 0; segment < 200; segment += 1) {
    const [first, ...others] = sitesOf(segment);
    for (const other of new Set(others)) {
      if (other === first) continue;
      const key = `${Math.min(first!, other)} ${Math.max(first!, other)}`;
      joined.set(key, [...(joined.get(key) ?? []), segment]);
    }
  }
  for (const [key, segments] of joined) {
    const [a, b] = key.split(' ');
    const first = vni;
    vni += segments.length;
    builder.join(`s${a}`, `s${b}`, {
      transport: 'coast',
      segments: segments.map((segment) => `g${segment}`),
      vni: (segment) => first + segments.indexOf(Number(segment.slice(1))),
    });
  }
  const design = builder.build();
  // Three cables where the builder lays one, so that there are as many links as the bounds say.
  const links: { [id: string]: Entry<'links'> } = {};
  const ports: { [device: string]: { [port: string]: object } } = {};
  for (const [id, link] of Object.entries(design.links)) {
    if (link.kind !== 'cable' || link.a.port.startsWith('sync')) continue;
    for (const copy of [2, 3]) {
      const at = (port: string): string => `${port}-${copy}`;
      for (const { device, port } of [link.a, link.b]) {
        const entry = design.devices[device]!.ports[port]!;
        const aggregation = `group of ${port}`;
        ports[device] = {
          ...ports[device],
          [port]: { aggregation },
          [at(port)]: { ...entry, number: entry.number + 100 * copy, name: at(port), aggregation },
        };
      }
      links[`${id}-${copy}`] = {
        kind: 'cable',
        a: { ...link.a, port: at(link.a.port) },
        b: { ...link.b, port: at(link.b.port) },
      };
    }
  }
  const devices = Object.fromEntries(Object.entries(ports).map(([id, own]) => [id, { ports: own }]));
  const aggregated = applyPatch(design, { devices, links } as MergePatch);
  const speeds = Object.fromEntries(
    Object.keys(aggregated.transports).map((id) => [id, { rateBps: gigabit }]),
  );
  return applyPatch(aggregated, { transports: speeds });
};
