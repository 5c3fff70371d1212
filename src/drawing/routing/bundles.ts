import type { Design, Entry } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import { inRankOrder } from '../../engine/model/rank.ts';
import type { EndName } from '../geometry.ts';
import { byText } from './rects.ts';
import { remembered } from './remember.ts';

export interface BundleEnd {
  readonly endpoint: string;
  readonly device: string;
  readonly member?: Member;
}
export interface BundledTunnel {
  readonly id: string;
  /** True when the tunnel's own end a lies at the bundle's end b. */
  readonly turned: boolean;
  /** Digits of the longer of its two VNIs. */
  readonly digits: number;
}
/** What runs side by side from one ring to another: an association with its tunnels, or one bare tunnel. */
export interface Bundle {
  /** Names the bundle among all of a design. */
  readonly key: string;
  /** The association's id, or the bare tunnel's. */
  readonly id: string;
  /** Counts the further pairs of endpoints that one association joins. */
  readonly part: number;
  readonly kind: 'jacket' | 'bare';
  readonly transport?: string;
  readonly a: BundleEnd;
  readonly b: BundleEnd;
  /** In lane order, from the left of travel from a to b. */
  readonly tunnels: readonly BundledTunnel[];
}

type Via = { readonly [id: string]: { readonly rank: string; readonly landing: string } } | undefined;
type Tunnel = Entry<'tunnels'>;

const digitsOf = (vni: number | undefined): number => (vni === undefined ? 1 : String(vni).length);

/** The bundles of a design by key. Tunnels whose ends lead nowhere are left out. */
export const bundlesOf = (design: Design): readonly Bundle[] =>
  collect(design.tunnels, design.associations, design.endpoints, design.links, design.devices);

const collect = remembered(
  (
    tunnels: Design['tunnels'],
    associations: Design['associations'],
    endpoints: Design['endpoints'],
    links: Design['links'],
    devices: Design['devices'],
  ): readonly Bundle[] => {
    const endAt = (endpoint: string): BundleEnd | undefined => {
      const entry = endpoints[endpoint];
      const device = entry === undefined ? undefined : devices[entry.device];
      if (entry === undefined || device === undefined) return undefined;
      const member = device.kind === 'ha-pair' ? entry.member : undefined;
      return { endpoint, device: entry.device, ...(member === undefined ? {} : { member }) };
    };
    const transportOfVia = (via: Via): string | undefined => {
      for (const [, step] of inRankOrder(via)) {
        const link = links[step.landing];
        if (link?.kind === 'landing') return link.transport;
      }
      return undefined;
    };
    const landed = new Map<string, Set<string>>();
    for (const link of Object.values(links)) {
      if (link.kind !== 'landing') continue;
      landed.set(link.device, (landed.get(link.device) ?? new Set()).add(link.transport));
    }
    const common = (a: string, b: string): string | undefined =>
      [...(landed.get(a) ?? [])].filter((t) => landed.get(b)?.has(t) ?? false).sort(byText)[0];

    const ordered = Object.entries(tunnels).sort(
      ([idA, a], [idB, b]) => (a.a.vni ?? Infinity) - (b.a.vni ?? Infinity) || byText(idA, idB),
    );
    const bundles: Bundle[] = [];
    const byAssociation = new Map<string, (readonly [string, Tunnel])[]>();
    for (const [id, tunnel] of ordered) {
      const association = tunnel.association;
      if (association !== undefined && associations[association] !== undefined) {
        byAssociation.set(association, [...(byAssociation.get(association) ?? []), [id, tunnel]]);
        continue;
      }
      const a = endAt(tunnel.a.endpoint);
      const b = endAt(tunnel.b.endpoint);
      if (a === undefined || b === undefined) continue;
      const transport =
        transportOfVia(tunnel.a.via) ?? transportOfVia(tunnel.b.via) ?? common(a.device, b.device);
      bundles.push({
        key: `bare ${id}`,
        id,
        part: 0,
        kind: 'bare',
        ...(transport === undefined ? {} : { transport }),
        a,
        b,
        tunnels: [{ id, turned: false, digits: Math.max(digitsOf(tunnel.a.vni), digitsOf(tunnel.b.vni)) }],
      });
    }

    for (const [id, association] of Object.entries(associations)) {
      const parts = new Map<string, { a: BundleEnd; b: BundleEnd; tunnels: BundledTunnel[] }>();
      for (const [tunnelId, tunnel] of byAssociation.get(id) ?? []) {
        const ends = { a: endAt(tunnel.a.endpoint), b: endAt(tunnel.b.endpoint) };
        if (ends.a === undefined || ends.b === undefined) continue;
        const turned =
          ends.a.device !== association.a.device &&
          (ends.b.device === association.a.device || ends.a.device === association.b.device);
        const [a, b] = turned ? [ends.b, ends.a] : [ends.a, ends.b];
        const pair = `${a.endpoint} ${b.endpoint}`;
        const part = parts.get(pair) ?? { a, b, tunnels: [] };
        part.tunnels.push({
          id: tunnelId,
          turned,
          digits: Math.max(digitsOf(tunnel.a.vni), digitsOf(tunnel.b.vni)),
        });
        parts.set(pair, part);
      }
      if (parts.size === 0) {
        // An association that carries nothing yet still shows: between the first rings of its two gateways.
        const first = (device: string): BundleEnd | undefined => {
          const found = Object.keys(endpoints)
            .filter((e) => endpoints[e]!.device === device)
            .sort(byText)[0];
          return found === undefined ? undefined : endAt(found);
        };
        const a = first(association.a.device);
        const b = first(association.b.device);
        if (a !== undefined && b !== undefined) parts.set('', { a, b, tunnels: [] });
      }
      [...parts.entries()]
        .sort(([x], [y]) => byText(x, y))
        .forEach(([, part], index) => {
          const transport =
            transportOfVia(association.a.via) ??
            transportOfVia(association.b.via) ??
            common(part.a.device, part.b.device);
          bundles.push({
            key: `jacket ${id}${index === 0 ? '' : ` ${index}`}`,
            id,
            part: index,
            kind: 'jacket',
            ...(transport === undefined ? {} : { transport }),
            ...part,
          });
        });
    }
    return bundles.sort((x, y) => byText(x.key, y.key));
  },
);

export const otherEnd = (end: EndName): EndName => (end === 'a' ? 'b' : 'a');
