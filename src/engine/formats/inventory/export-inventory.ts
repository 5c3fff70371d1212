import type { Design } from '../../model/design.ts';
import { inventoryTables, tableNamed, type InventoryName } from './tables.ts';

/** A table as text: heads, then rows of as many cells. */
export interface Sheet {
  readonly heads: readonly string[];
  readonly rows: readonly (readonly string[])[];
}

type Row = { readonly [column: string]: unknown };

const byName = <T extends { readonly name: string }>(entries: { readonly [id: string]: T }) =>
  Object.entries(entries).sort(([, a], [, b]) => (a.name < b.name ? -1 : a.name > b.name ? 1 : 0));

/** Where a host is plugged in: the first cable of it. */
const plugOf = (design: Design, host: string): Row => {
  for (const link of Object.values(design.links)) {
    if (link.kind !== 'cable') continue;
    const far = link.a.device === host ? link.b : link.b.device === host ? link.a : undefined;
    const device = far === undefined ? undefined : design.devices[far.device];
    if (far !== undefined && device !== undefined)
      return {
        device:
          device.kind === 'ha-pair' && far.member !== undefined
            ? device.memberNames[far.member]
            : device.name,
        port: device.ports[far.port]?.number,
      };
  }
  return {};
};

const rowsOf: { readonly [name in InventoryName]: (design: Design) => readonly Row[] } = {
  sites: ({ sites }) => byName(sites).map(([, site]) => ({ name: site.name, notes: site.notes })),
  devices: ({ sites, devices }) =>
    byName(devices).flatMap(([, device]) =>
      device.kind === 'host'
        ? []
        : [
            {
              name: device.name,
              kind: device.kind,
              site: sites[device.site]!.name,
              ...(device.kind === 'ha-pair'
                ? { member1: device.memberNames[1], member2: device.memberNames[2] }
                : {}),
              managementAddress: device.managementAddress,
              notes: device.notes,
            },
          ],
    ),
  ports: ({ devices }) =>
    byName(devices).flatMap(([, device]) =>
      device.kind === 'host'
        ? []
        : Object.values(device.ports)
            .sort((a, b) => a.number - b.number)
            .map((port) => ({ ...port, device: device.name })),
    ),
  segments: ({ sites, segments }) =>
    Object.values(segments)
      .sort((a, b) => a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : 1))
      .flatMap(({ sites: places, ...segment }) => {
        const landed = Object.entries(places).map(([site, { vlan, subnets }]) => ({
          ...segment,
          site: sites[site]!.name,
          vlan,
          subnets,
        }));
        return landed.length === 0 ? [segment] : landed;
      }),
  hosts: (design) =>
    byName(design.devices).flatMap(([id, host]) =>
      host.kind !== 'host'
        ? []
        : [
            {
              name: host.name,
              site: design.sites[host.site]!.name,
              segment: host.segment === undefined ? undefined : design.segments[host.segment]!.letter,
              face: host.face,
              addresses: host.addresses,
              ...plugOf(design, id),
            },
          ],
    ),
};

/** One table of a design's inventory; reading it back changes nothing. Rows in order of name. */
export const exportInventory = (design: Design, name: InventoryName): Sheet => {
  const { columns } = tableNamed(name);
  return {
    heads: columns.map(({ head }) => head),
    rows: rowsOf[name](design).map((row) =>
      columns.map(({ key, reader }) => {
        const value = row[key];
        return value === undefined || (Array.isArray(value) && value.length === 0) ? '' : reader.write(value);
      }),
    ),
  };
};

/** A table with one row that shows how it is filled in. */
export const inventoryTemplate = (name: InventoryName): Sheet => {
  const { columns, example } = inventoryTables.find((table) => table.name === name)!;
  return { heads: columns.map(({ head }) => head), rows: [columns.map(({ key }) => example[key] ?? '')] };
};
