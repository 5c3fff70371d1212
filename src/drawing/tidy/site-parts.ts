import type { Design, Entry } from '../../engine/model/design.ts';
import { isGateway } from '../../engine/model/devices.ts';
import type { Bundle } from '../routing/bundles.ts';
import { byText } from '../routing/rects.ts';
import { combLengthFor, laneCount } from '../routing/ring-seats.ts';
import { comb, ferrule, ferruleWidth } from '../parts/sizes.ts';

export type Device = Entry<'devices'>;
export type Level = 'left' | 'right';
export type Named = readonly [id: string, device: Device];

/** What stands in a site, sorted for laying out. */
export interface SiteParts {
  readonly id: string;
  /** Which of our own layouts fits it; the unusual ones need a general one. */
  readonly shape: 'stack' | 'row' | 'unusual';
  readonly gateways: readonly Named[];
  readonly switches: readonly Named[];
  /** In the order of the ports they are plugged into. */
  readonly hosts: readonly Named[];
}

/** The parts of every site by id. */
export const sitePartsOf = (design: Design): ReadonlyMap<string, SiteParts> => {
  const bySite = new Map<string, Named[]>(Object.keys(design.sites).map((id) => [id, []]));
  for (const named of Object.entries(design.devices)) bySite.get(named[1].site)?.push(named);
  const partners = new Map<string, Set<string>>();
  const portOf = new Map<string, number>();
  for (const link of Object.values(design.links)) {
    if (link.kind !== 'cable' || link.a.device === link.b.device) continue;
    for (const [plug, other] of [
      [link.a, link.b],
      [link.b, link.a],
    ] as const) {
      partners.set(plug.device, (partners.get(plug.device) ?? new Set()).add(other.device));
      const number = design.devices[other.device]?.ports[other.port]?.number ?? 0;
      portOf.set(plug.device, Math.min(portOf.get(plug.device) ?? Infinity, number));
    }
  }
  return new Map(
    [...bySite].map(([id, devices]) => {
      const sorted = devices.sort(([a], [b]) => byText(a, b));
      const gateways = sorted.filter(([, device]) => isGateway(device));
      const switches = sorted.filter(([, device]) => device.kind === 'switch');
      const hosts = sorted
        .filter(([, device]) => device.kind === 'host')
        .sort(([a], [b]) => (portOf.get(a) ?? 1e6) - (portOf.get(b) ?? 1e6) || byText(a, b));
      const centre = switches[0]?.[0] ?? gateways[0]?.[0];
      const simple =
        gateways.length === 1 &&
        switches.length <= 1 &&
        (switches.length === 1 || hosts.length <= 3) &&
        hosts.every(([host]) => [...(partners.get(host) ?? [])].every((other) => other === centre));
      const isPair = gateways[0]?.[1].kind === 'ha-pair';
      const shape =
        !simple || (isPair && switches.length === 0 && hosts.length > 0)
          ? 'unusual'
          : isPair
            ? 'row'
            : 'stack';
      return [id, { id, shape, gateways, switches, hosts }] as const;
    }),
  );
};

/** How long the combs of one gateway are on each side, and how wide their ferrules. */
export interface CombNeed {
  readonly length: { readonly [side in Level]: number | undefined };
  readonly ferruleWidth: { readonly [side in Level]: number };
  readonly rings: number;
}

/** The combs of a gateway when its transports lie on the given sides. */
export const combNeedOf = (
  design: Design,
  device: string,
  bundles: readonly Bundle[],
  sideOf: (transport: string | undefined) => Level,
): CombNeed => {
  const lengths: { [side in Level]: number[] } = { left: [], right: [] };
  const widths = { left: ferrule.width as number, right: ferrule.width as number };
  for (const [endpoint, entry] of Object.entries(design.endpoints)) {
    if (entry.device !== device) continue;
    const own = bundles.filter((b) => b.a.endpoint === endpoint || b.b.endpoint === endpoint);
    const side = sideOf(mostUsed(own.map((b) => b.transport)));
    lengths[side].push(combLengthFor(own.map(laneCount)));
    for (const tunnel of own.flatMap((b) => b.tunnels))
      widths[side] = Math.max(widths[side], ferruleWidth(tunnel.digits));
  }
  const total = (side: Level): number | undefined =>
    lengths[side].length === 0
      ? undefined
      : lengths[side].reduce((sum, length) => sum + length, 0) + comb.apart * (lengths[side].length - 1);
  return {
    length: { left: total('left'), right: total('right') },
    ferruleWidth: widths,
    rings: lengths.left.length + lengths.right.length,
  };
};

export const mostUsed = (transports: readonly (string | undefined)[]): string | undefined => {
  const counts = new Map<string, number>();
  for (const t of transports) if (t !== undefined) counts.set(t, (counts.get(t) ?? 0) + 1);
  return [...counts].sort(([a, n], [b, m]) => m - n || byText(a, b))[0]?.[0];
};
