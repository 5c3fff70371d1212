import type { Hop, HopLoad } from '../../engine/load/carried-direction.ts';
import { hopLimits, type Limit, type LimitKind } from '../../engine/load/limits.ts';
import type { ElementLoad, LimitUsed, LoadReport } from '../../engine/load/load-of.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Network } from '../../engine/network/network.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

export const limitGroups = ['tunnels', 'gateways', 'transports', 'cables'] as const;
export type LimitGroup = (typeof limitGroups)[number];

/** Something that carries traffic, and the limit that it comes up against. */
export interface LimitRow {
  readonly key: string;
  readonly group: LimitGroup;
  readonly ref: ElementRef;
  readonly name: string;
  /** Which way: 'towards fw-ho', 'out'; '' where it counts both. */
  readonly way: string;
  /** What is measured: 'port speed', 'packets/s, encrypted'. */
  readonly what: string;
  readonly unit: 'bit/s' | 'packets/s';
  /** Absent where no demand could be counted: that is not zero. */
  readonly used?: number;
  /** A tunnel's own part of what is used of the limit that it shares. */
  readonly own?: number;
  readonly most?: number;
  readonly sharePerMillion?: number;
  /** How many times what is used now would fit. */
  readonly times?: number;
  readonly demands: readonly string[];
  readonly uncounted: readonly string[];
  /** For a tunnel the tightest of those on its way; absent where none is known. */
  readonly limit?: Limit;
}

const whats: Readonly<Record<LimitKind, string>> = {
  'port-speed': 'port speed',
  'transport-rate': 'ordered rate',
  'gateway-rate': 'many flows',
  'gateway-packets': 'packets/s',
  'gateway-one-flow': 'one flow',
};

/** What a limit measures, in the trade's words. */
export const whatOf = ({ kind, cipher }: Limit): string =>
  cipher === undefined ? whats[kind] : `${whats[kind]}, ${cipher}`;

const cableWay = (design: Design, id: string, direction: string | undefined): string => {
  const link = design.links[id];
  if (link?.kind !== 'cable') return '';
  const far = direction === 'a-to-b' ? link.b : link.a;
  return `towards ${nameOf(design, { collection: 'devices', id: far.device })}`;
};

const wayOf = (design: Design, { element, direction }: Limit): string =>
  direction === undefined
    ? ''
    : direction === 'out' || direction === 'in'
      ? direction
      : cableWay(design, element.id, direction);

const groupOf = ({ kind }: Limit): LimitGroup =>
  kind === 'port-speed' ? 'cables' : kind === 'transport-rate' ? 'transports' : 'gateways';

/** A limit as the subject of a sentence: 'Port fw-ho wan1, out', 'Encryption at fw-ho, packets/s'. */
export const limitSubject = (design: Design, limit: Limit): string => {
  const name = nameOf(design, limit.element);
  const way = wayOf(design, limit);
  const ending = way === '' ? '' : `, ${way}`;
  if (limit.cipher !== undefined)
    return `${limit.cipher === 'encrypted' ? 'Encryption' : 'Forwarding'} at ${name}, ${whats[limit.kind]}`;
  if (limit.kind === 'transport-rate') return `The rate ordered for ${name}${ending}`;
  return `${limit.element.collection === 'links' ? 'Cable' : 'Port'} ${name}${ending}`;
};

const figures = ({ limit, used, sharePerMillion, demands, uncounted }: LimitUsed) => ({
  ...(demands.length === 0 && uncounted.length > 0 ? {} : { used }),
  ...(limit.most === undefined ? {} : { most: limit.most }),
  // A demand that isn't counted would only add to it: what is known to be used is said, how much is free is not.
  ...(sharePerMillion === undefined || (demands.length === 0 && uncounted.length > 0)
    ? {}
    : { sharePerMillion }),
  ...(limit.most === undefined || used === 0 ? {} : { times: limit.most / used }),
  demands,
  uncounted,
});

/** By tunnel and direction: the hop of a demand that takes it, whichever. */
const tunnelHops = (report: LoadReport): ReadonlyMap<string, Hop> => {
  const hops = new Map<string, Hop>();
  for (const { forward, reverse } of report.demands)
    for (const { direction } of [forward, reverse])
      for (const hop of direction.state === 'carried' ? direction.hops : [])
        if (hop.crossing.collection === 'tunnels')
          hops.set(`${hop.crossing.id} ${hop.crossing.from === 'a' ? 'a-to-b' : 'b-to-a'}`, hop);
  return hops;
};

/** A tunnel one way, with the fullest limit on it and what of that is the tunnel's own. */
const tunnelRow = (
  { element, direction, load, demands, uncounted }: ElementLoad,
  design: Design,
  met: readonly { readonly use: LimitUsed; readonly measure: keyof HopLoad }[],
): LimitRow => {
  const tunnel = design.tunnels[element.id]!;
  const far = design.endpoints[direction === 'a-to-b' ? tunnel.b.endpoint : tunnel.a.endpoint]!;
  const isCounted = demands.length > 0;
  const common = {
    key: `tunnels ${element.id} ${direction}`,
    group: 'tunnels',
    ref: element,
    name: nameOf(design, element),
    way: `towards ${nameOf(design, { collection: 'devices', id: far.device })}`,
    unit: 'bit/s',
  } as const;
  const [fullest] = met
    .filter(({ use }) => use.sharePerMillion !== undefined)
    .sort((x, y) => y.use.sharePerMillion! - x.use.sharePerMillion!);
  if (fullest === undefined)
    return {
      ...common,
      what: 'no limit known',
      ...(isCounted ? { used: load.outerRateBps } : {}),
      demands,
      uncounted,
    };
  return {
    ...common,
    ...figures(fullest.use),
    what: limitInRow(design, fullest.use.limit),
    ...(isCounted ? { own: load[fullest.measure] } : {}),
    demands,
    uncounted,
    limit: fullest.use.limit,
  };
};

/** A limit short enough for a row: 'ordered rate of fw-ho wan1, out', 'encryption at fw-ho, one flow'. */
export const limitInRow = (design: Design, limit: Limit): string => {
  const { element, kind, cipher } = limit;
  if (cipher !== undefined)
    return `${cipher === 'encrypted' ? 'encryption' : 'forwarding'} at ${nameOf(design, element)}, ${whats[kind]}`;
  const link = element.collection === 'links' ? design.links[element.id] : undefined;
  const at: ElementRef =
    link?.kind === 'landing' ? { collection: 'devices', id: link.device, port: link.port } : element;
  return [`${whats[kind]} of ${nameOf(design, at)}`, wayOf(design, limit)].filter(Boolean).join(', ');
};

/** Every limit that demands come up against, and every tunnel with the tightest on its way; the fullest first, unknown ones last. */
export const limitRows = (network: Network, report: LoadReport, design: Design): readonly LimitRow[] => {
  const uses = new Map(report.limits.map((use) => [use.limit.key, use]));
  const hops = tunnelHops(report);
  const metBy = ({ element, direction }: ElementLoad) => {
    const hop = hops.get(`${element.id} ${direction}`);
    return (hop === undefined ? [] : hopLimits(network, hop)).flatMap(({ limit, measure }) => {
      const use = uses.get(limit.key);
      return use === undefined ? [] : [{ use, measure }];
    });
  };
  return [
    ...report.elements
      .filter(({ element }) => element.collection === 'tunnels')
      .map((of) => tunnelRow(of, design, metBy(of))),
    ...report.limits.map((use): LimitRow => {
      const { limit } = use;
      return {
        key: limit.key,
        group: groupOf(limit),
        ref: limit.element,
        name: nameOf(design, limit.element),
        way: wayOf(design, limit),
        what: whatOf(limit),
        unit: limit.kind === 'gateway-packets' ? 'packets/s' : 'bit/s',
        ...figures(use),
        limit,
      };
    }),
  ].sort((x, y) => (y.sharePerMillion ?? -1) - (x.sharePerMillion ?? -1));
};
