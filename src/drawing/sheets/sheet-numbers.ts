import type { Design, ElementRef } from '../../engine/model/design.ts';

// A design lies on one sheet or on several of one size. Each has a world of its own; a site is whole on one of them.

/** On which sheet a site stands; the first where nothing says so. */
export const sheetOfSite = (layout: Design['layout'], site: string): number =>
  layout.sites?.[site]?.sheet ?? 1;

/** How many sheets a design takes: up to the last one that has a site or a band. */
export const sheetCount = ({ sites, layout }: Pick<Design, 'sites' | 'layout'>): number =>
  Math.max(
    1,
    ...Object.keys(sites).map((site) => sheetOfSite(layout, site)),
    ...Object.keys(layout.furtherSheets ?? {}).map(Number),
  );

/** The bands of one sheet, as laid out. */
export const bandsOnSheet = (layout: Design['layout'], sheet: number): Design['layout']['transports'] =>
  sheet === 1 ? layout.transports : layout.furtherSheets?.[String(sheet)]?.transports;

/** The sheet of a device's site; undefined for a device that isn't there. */
export const sheetOfDevice = (
  { devices, layout }: Pick<Design, 'devices' | 'layout'>,
  device: string,
): number | undefined => {
  const entry = devices[device];
  return entry === undefined ? undefined : sheetOfSite(layout, entry.site);
};

/** The sheets on which a transport lies: those where it is laid out or something lands on it; the first where there is none. */
const sheetsOfTransport = (design: Design, transport: string): readonly number[] => {
  const sheets = new Set<number>();
  for (let sheet = 1; sheet <= sheetCount(design); sheet += 1)
    if (bandsOnSheet(design.layout, sheet)?.[transport] !== undefined) sheets.add(sheet);
  for (const link of Object.values(design.links))
    if (link.kind === 'landing' && link.transport === transport) {
      const sheet = sheetOfDevice(design, link.device);
      if (sheet !== undefined) sheets.add(sheet);
    }
  return sheets.size === 0 ? [1] : [...sheets].sort((a, b) => a - b);
};

/**
 * The sheets on which an element is drawn, in order: one for what stands somewhere, two for a cord or a cable that leads from
 * one to another. None for what has no place, such as a segment.
 */
export const sheetsOf = (design: Design, { collection, id }: ElementRef): readonly number[] => {
  const ofDevices = (...devices: readonly (string | undefined)[]): readonly number[] =>
    [...new Set(devices.flatMap((device) => sheetOfDevice(design, device ?? '') ?? []))].sort(
      (a, b) => a - b,
    );
  switch (collection) {
    case 'sites':
      return Object.hasOwn(design.sites, id) ? [sheetOfSite(design.layout, id)] : [];
    case 'devices':
      return ofDevices(id);
    case 'endpoints':
      return ofDevices(design.endpoints[id]?.device);
    case 'forwarders':
      return ofDevices(design.forwarders[id]?.device);
    case 'links': {
      const link = design.links[id];
      if (link === undefined) return [];
      return link.kind === 'cable' ? ofDevices(link.a.device, link.b.device) : ofDevices(link.device);
    }
    case 'tunnels': {
      const tunnel = design.tunnels[id];
      return ofDevices(
        design.endpoints[tunnel?.a.endpoint ?? '']?.device,
        design.endpoints[tunnel?.b.endpoint ?? '']?.device,
      );
    }
    case 'associations':
      return ofDevices(design.associations[id]?.a.device, design.associations[id]?.b.device);
    case 'transports':
      return Object.hasOwn(design.transports, id) ? sheetsOfTransport(design, id) : [];
    case 'notes': {
      const note = design.notes[id];
      if (note === undefined) return [];
      const put = design.layout.notes?.[id]?.sheet;
      if (put !== undefined) return [put];
      const about = note.target === undefined ? [] : sheetsOf(design, note.target);
      return note.standing === true || about.length === 0 ? [1] : about.slice(0, 1);
    }
    default:
      return [];
  }
};

/** Sheet numbers in few words: '1, 3 to 5'. */
export const sheetRanges = (sheets: readonly number[]): string => {
  const runs: [number, number][] = [];
  for (const sheet of [...sheets].sort((a, b) => a - b)) {
    const last = runs.at(-1);
    if (last !== undefined && sheet === last[1] + 1) last[1] = sheet;
    else runs.push([sheet, sheet]);
  }
  return runs
    .map(([from, to]) =>
      from === to ? String(from) : to === from + 1 ? `${from}, ${to}` : `${from} to ${to}`,
    )
    .join(', ');
};
