import type { Design, Entry } from '../../engine/model/design.ts';
import type { EndName } from '../geometry.ts';
import { manifold } from '../parts/sizes.ts';
import type { Bundle } from '../routing/bundles.ts';
import { bundlesOf, otherEnd } from '../routing/bundles.ts';
import { byText } from '../routing/rects.ts';
import { sheetRanges } from './sheet-numbers.ts';

// One sheet of several, as a design of its own that routing takes like any other. What lies on other sheets is left out;
// where a cord or a cable leads there, a flag stands in for its far end.

/** So many flags of single devices a sheet may have; with more there is one for each other sheet, or for several in a row. */
const mostFlags = 8;

/** Stands at the edge of a sheet for what lies on another one. */
export interface SheetFlag {
  /** The device of the cut that stands in: the far device's own id, or one that no entry can have. */
  readonly id: string;
  /** The sheet that it leads to; of several the first. */
  readonly sheet: number;
  readonly head: string;
  /** The far device, where the flag stands for one alone. */
  readonly device?: string;
  /** What stands on it under the sheet's number. */
  readonly lines: readonly string[];
}

export interface SheetCut {
  readonly design: Design;
  readonly flags: readonly SheetFlag[];
  /** Tunnels of the cut that stand for several which leave a ring together for one sheet. */
  readonly together: ReadonlyMap<string, readonly string[]>;
}

type Links = Design['links'];
type Cable = Extract<Entry<'links'>, { kind: 'cable' }>;

/** Ids with a space in them are no entry's. */
const flagId = (sheets: readonly number[]): string => `sheet ${sheets.join(' ')}`;
/** The site of the cut that holds one flag. */
export const flagSite = (flag: string): string => `flag ${flag}`;

interface Leaving {
  readonly bundle: Bundle;
  readonly near: EndName;
  readonly sheet: number;
}

const rangeWords = (vnis: readonly number[]): string => {
  const sorted = [...vnis].sort((a, b) => a - b);
  const [first, last] = [sorted[0], sorted.at(-1)];
  if (first === undefined) return '';
  return first === last ? `VNI ${first}` : `VNIs ${first} to ${last}`;
};

/** What a flag is headed with. */
const flagHead = (sheets: readonly number[]): string =>
  `${sheets.length === 1 ? 'Sheet' : 'Sheets'} ${sheetRanges(sheets)}`;

/** The names of some sites in few words: all of two, of more the first and how many follow. */
const siteWords = (names: readonly string[]): string => {
  const sorted = [...new Set(names)].sort((a, b) => a.localeCompare(b, 'en', { numeric: true }));
  return sorted.length <= 2 ? sorted.join(', ') : `${sorted[0]} and ${sorted.length - 1} more`;
};

const pick = <E>(
  entries: { readonly [id: string]: E },
  isKept: (entry: E, id: string) => boolean,
): { [id: string]: E } =>
  Object.fromEntries(Object.entries(entries).filter(([id, entry]) => isKept(entry, id)));

/** Names are set on a band as they are: where it goes on stands after its own. */
const continuedName = (name: string, sheets: readonly number[]): string =>
  sheets.length === 0
    ? name
    : `${name}, continues on sheet${sheets.length === 1 ? '' : 's'} ${sheetRanges(sheets)}`;

export interface CutOptions {
  readonly design: Design;
  readonly sheet: number;
  readonly numberOf: (site: string) => number;
  /** The sheet's own layout, without its flags. */
  readonly places: Design['layout'];
}

/** What the sites for which `numberOf` gives this sheet look like on it. */
export const cutSheet = ({ design, sheet, numberOf, places }: CutOptions): SheetCut => {
  const numberOfDevice = (device: string): number => {
    const entry = design.devices[device];
    return entry === undefined ? 0 : numberOf(entry.site);
  };
  const isHere = (device: string): boolean => numberOfDevice(device) === sheet;
  const deviceName = (device: string): string => design.devices[device]!.name;
  const siteName = (device: string): string => design.sites[design.devices[device]!.site]!.name;

  const staying: Bundle[] = [];
  const leaving: Leaving[] = [];
  for (const bundle of bundlesOf(design)) {
    const [a, b] = [isHere(bundle.a.device), isHere(bundle.b.device)];
    if (a && b) staying.push(bundle);
    else if (a || b) {
      const near = a ? 'a' : 'b';
      leaving.push({ bundle, near, sheet: numberOfDevice(bundle[otherEnd(near)].device) });
    }
  }
  const links: { [id: string]: Links[string] } = pick(design.links, (link) =>
    link.kind === 'landing' ? isHere(link.device) : isHere(link.a.device) && isHere(link.b.device),
  );
  const crossing = Object.entries(design.links).flatMap(([id, link]) =>
    link.kind === 'cable' && isHere(link.a.device) !== isHere(link.b.device)
      ? [{ id, link, near: isHere(link.a.device) ? ('a' as const) : ('b' as const) }]
      : [],
  );

  const farDevices = new Set([
    ...leaving.map(({ bundle, near }) => bundle[otherEnd(near)].device),
    ...crossing.map(({ link, near }) => link[otherEnd(near)].device),
  ]);
  const isGathered = farDevices.size > mostFlags;
  const farSheets = [...new Set([...farDevices].map(numberOfDevice))].sort((a, b) => a - b);
  const perFlag = Math.ceil(farSheets.length / mostFlags);
  const sheetsOfFlag = (device: string): readonly number[] => {
    const at = Math.floor(farSheets.indexOf(numberOfDevice(device)) / perFlag) * perFlag;
    return farSheets.slice(at, at + perFlag);
  };
  const flagOf = (device: string): string => (isGathered ? flagId(sheetsOfFlag(device)) : device);

  const devices: { [id: string]: Entry<'devices'> } = pick(design.devices, (_, id) => isHere(id));
  const endpoints: { [id: string]: Entry<'endpoints'> } = pick(design.endpoints, ({ device }) =>
    isHere(device),
  );
  const tunnels: { [id: string]: Entry<'tunnels'> } = {};
  const associations: { [id: string]: Entry<'associations'> } = {};
  const together = new Map<string, readonly string[]>();
  for (const bundle of staying) {
    for (const { id } of bundle.tunnels) tunnels[id] = design.tunnels[id]!;
    if (bundle.kind === 'jacket') associations[bundle.id] = design.associations[bundle.id]!;
  }

  // Its far landings lie on another sheet: the transport of a cord that leaves is told by a landing at the near end.
  const viaOf = (device: string, transport: string | undefined): Entry<'tunnels'>['a']['via'] => {
    const landing = Object.entries(links)
      .filter(([, link]) => link.kind === 'landing' && link.device === device && link.transport === transport)
      .map(([id]) => id)
      .sort(byText)[0];
    return landing === undefined ? undefined : { here: { rank: 'a', landing } };
  };
  const led = <E extends { readonly via?: unknown }>(
    end: E,
    via: Entry<'tunnels'>['a']['via'],
  ): Omit<E, 'via'> => {
    const { via: _far, ...rest } = end;
    return via === undefined ? rest : { ...rest, via };
  };

  /** The endpoint on a flag that a bundle ends on; of a flag for one device that device's own. */
  const flagEndpoint = ({ bundle, near }: Leaving): string => {
    const far = bundle[otherEnd(near)];
    const id = isGathered ? `${flagOf(far.device)} ${bundle.transport ?? ''} ${bundle.kind}` : far.endpoint;
    if (endpoints[id] === undefined) {
      const { member: _member, ...entry } = design.endpoints[far.endpoint]!;
      endpoints[id] = isGathered
        ? { device: flagOf(far.device), name: ' ' }
        : { ...entry, device: flagOf(far.device) };
    }
    return id;
  };
  const ringsOut = new Map<string, number>();
  for (const { bundle, near } of leaving)
    ringsOut.set(bundle[near].endpoint, (ringsOut.get(bundle[near].endpoint) ?? 0) + 1);
  const isCrowded = ({ bundle, near }: Leaving): boolean =>
    isGathered && (ringsOut.get(bundle[near].endpoint) ?? 0) > manifold.mostGroups;

  const gathered = new Map<string, Leaving[]>();
  for (const one of leaving) {
    const { bundle, near } = one;
    const endpoint = flagEndpoint(one);
    if (isCrowded(one)) {
      const key = `${bundle[near].endpoint} ${endpoint}`;
      gathered.set(key, [...(gathered.get(key) ?? []), one]);
      continue;
    }
    const via = viaOf(bundle[near].device, bundle.transport);
    for (const { id } of bundle.tunnels) {
      const tunnel = design.tunnels[id]!;
      const nearEnd = tunnel.a.endpoint === bundle[near].endpoint ? 'a' : 'b';
      const farEnd = otherEnd(nearEnd);
      tunnels[id] = {
        ...tunnel,
        [nearEnd]: led(tunnel[nearEnd], via),
        [farEnd]: { ...led(tunnel[farEnd], undefined), endpoint },
      };
    }
    if (bundle.kind === 'bare') continue;
    const association = design.associations[bundle.id]!;
    const farDevice = bundle[otherEnd(near)].device;
    const ends = (end: EndName): Entry<'associations'>['a'] => ({
      ...led(association[end], end === 'a' ? via : undefined),
      device: association[end].device === farDevice ? flagOf(farDevice) : association[end].device,
    });
    associations[bundle.id] = { ...association, a: ends('a'), b: ends('b') };
  }
  for (const [key, several] of gathered) {
    const { bundle, near } = several[0]!;
    const endpoint = flagEndpoint(several[0]!);
    const via = viaOf(bundle[near].device, bundle.transport);
    const farDevice = endpoints[endpoint]!.device;
    if (bundle.kind === 'jacket')
      associations[key] = {
        name: several.map((one) => design.associations[one.bundle.id]?.name ?? '').join(', '),
        a: { device: bundle[near].device, ...(via === undefined ? {} : { via }) },
        b: { device: farDevice },
      };
    tunnels[key] = {
      name: key,
      a: { endpoint: bundle[near].endpoint, ...(via === undefined ? {} : { via }) },
      b: { endpoint },
      ...(bundle.kind === 'jacket' ? { association: key } : {}),
    };
    together.set(
      key,
      several.flatMap((one) => one.bundle.tunnels.map(({ id }) => id)),
    );
  }

  const ports = new Map<string, { [port: string]: Entry<'devices'>['ports'][string] }>();
  for (const { id, link, near } of crossing) {
    const far = link[otherEnd(near)];
    const flag = flagOf(far.device);
    const port = isGathered ? id : far.port;
    const entry = design.devices[far.device]!.ports[far.port];
    if (entry !== undefined) ports.set(flag, { ...ports.get(flag), [port]: entry });
    links[id] = { ...link, [otherEnd(near)]: { device: flag, port } } as Cable;
  }

  const vnisOf = (flag: string): readonly number[] =>
    leaving
      .filter(({ bundle, near }) => flagOf(bundle[otherEnd(near)].device) === flag)
      .flatMap(({ bundle }) => bundle.tunnels)
      .flatMap(({ id }) => [design.tunnels[id]!.a.vni, design.tunnels[id]!.b.vni])
      .filter((vni) => vni !== undefined);
  const byFlag = new Map<string, string[]>();
  for (const device of farDevices)
    byFlag.set(flagOf(device), [...(byFlag.get(flagOf(device)) ?? []), device]);
  const flags = [...byFlag]
    .map(([id, of]): SheetFlag => {
      const [first] = of as [string];
      return {
        id,
        sheet: isGathered ? sheetsOfFlag(first)[0]! : numberOfDevice(first),
        head: flagHead(isGathered ? sheetsOfFlag(first) : [numberOfDevice(first)]),
        ...(isGathered ? {} : { device: first }),
        lines: isGathered
          ? [siteWords(of.map(siteName)), rangeWords(vnisOf(id))].filter(Boolean)
          : [`${siteName(first)} · ${deviceName(first)}`],
      };
    })
    .sort((a, b) => a.sheet - b.sheet || byText(a.id, b.id));

  const sites: { [id: string]: Entry<'sites'> } = pick(design.sites, (_, id) => numberOf(id) === sheet);
  // All plates as wide as the longest line of any flag.
  const longest = flags
    .flatMap(({ lines }) => lines)
    .reduce((one, other) => (other.length > one.length ? other : one), '');
  for (const { id, head } of flags) {
    sites[flagSite(id)] = { name: ' ' };
    devices[id] = {
      kind: 'host',
      site: flagSite(id),
      name: head,
      ports: ports.get(id) ?? {},
      addresses: [longest],
    };
  }

  const used = new Map<string, Set<number>>();
  const lieOn = (transport: string | undefined, on: number): void => {
    if (transport !== undefined) used.set(transport, (used.get(transport) ?? new Set()).add(on));
  };
  for (const link of Object.values(design.links))
    if (link.kind === 'landing') lieOn(link.transport, numberOfDevice(link.device));
  for (const { transport, a, b } of bundlesOf(design))
    for (const end of [a, b]) lieOn(transport, numberOfDevice(end.device));
  const transports = Object.fromEntries(
    Object.entries(design.transports).flatMap(([id, transport]) => {
      const on = used.get(id) ?? new Set([1]);
      if (!on.has(sheet) && places.transports?.[id] === undefined) return [];
      const others = [...on].filter((number) => number !== sheet && number > 0);
      return [[id, { ...transport, name: continuedName(transport.name, others) }]];
    }),
  );
  const kept = <E>(laid: { readonly [id: string]: E } | undefined, entries: object): { [id: string]: E } =>
    pick(laid ?? {}, (_, id) => Object.hasOwn(entries, id));
  return {
    flags,
    together,
    design: {
      ...design,
      sites,
      devices,
      links,
      endpoints,
      tunnels,
      associations,
      transports,
      layout: {
        ...places,
        sites: kept(places.sites, sites),
        devices: kept(
          places.devices,
          pick(design.devices, (_, id) => isHere(id)),
        ),
        transports: kept(places.transports, transports),
        endpoints: kept(
          places.endpoints,
          pick(design.endpoints, ({ device }) => isHere(device)),
        ),
      },
    },
  };
};
