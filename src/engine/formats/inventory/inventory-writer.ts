import type { Design, Entry } from '../../model/design.ts';
import type { Device, DeviceKind, Port } from '../../model/devices.ts';
import type { Segment } from '../../model/intent.ts';
import type { CellProblem, ReadRow } from './read-rows.ts';

type Mutable<T> = T extends readonly (infer E)[]
  ? Mutable<E>[]
  : T extends object
    ? { -readonly [K in keyof T]: Mutable<T[K]> }
    : T;
/** A copy of a design to write into. */
export type Draft = Mutable<Design>;

type Effect = 'added' | 'changed' | 'unchanged';
type Bag = { [key: string]: unknown };

/** Writes rows of an inventory into a draft, and remembers from which cell each value came. */
export interface InventoryWriter {
  readonly begin: (row: ReadRow) => void;
  /** What the row since `begin` did. */
  readonly end: () => Effect;
  readonly site: (row: ReadRow) => void;
  readonly device: (row: ReadRow) => void;
  readonly port: (row: ReadRow) => void;
  readonly segment: (row: ReadRow) => void;
  readonly host: (row: ReadRow) => void;
  /** The cell that a place of the finished document came from. */
  readonly problemAt: (path: string, expected: string) => CellProblem;
}

interface PluggedAt {
  readonly device: string;
  readonly member?: 1 | 2;
}

const idStarts: { readonly [K in DeviceKind]: string } = {
  firewall: 'fw',
  'ha-pair': 'fw',
  switch: 'sw',
  router: 'rt',
  host: 'host',
};
const gigabit = 1_000_000_000;

/** Equal, or lists of the same in another order: a table's cell has no order of its own. */
const saysSame = (before: unknown, now: unknown): boolean => {
  const text = (value: unknown): string =>
    JSON.stringify(Array.isArray(value) ? [...(value as readonly unknown[])].map(String).sort() : value);
  return before !== undefined && text(before) === text(now);
};

export const inventoryWriter = (
  draft: Draft,
  newId: (prefix: string) => string,
  report: (problem: CellProblem) => void,
): InventoryWriter => {
  let effect: Effect = 'unchanged';
  // By place in the document, the row and column that wrote it.
  const origins = new Map<string, { readonly row: ReadRow; readonly column: string }>();
  const linesByName = new Map<string, number>();

  const idsByName = <T>(entries: { readonly [id: string]: T }, nameOf: (entry: T) => string) => {
    const ids = new Map<string, string[]>();
    for (const [id, entry] of Object.entries(entries)) {
      const name = nameOf(entry);
      ids.set(name, [...(ids.get(name) ?? []), id]);
    }
    return ids;
  };
  const sites = idsByName(draft.sites, ({ name }) => name);
  const devices = idsByName(draft.devices, ({ name }) => name);
  const segments = idsByName(draft.segments, ({ letter }) => letter);
  const members = new Map<string, PluggedAt>();
  const noteMembers = (device: string, names: { readonly 1: string; readonly 2: string }): void => {
    for (const member of [1, 2] as const) members.set(names[member], { device, member });
  };
  for (const [id, device] of Object.entries(draft.devices))
    if (device.kind === 'ha-pair') noteMembers(id, device.memberNames);

  const only = (
    ids: ReadonlyMap<string, readonly string[]>,
    name: string,
    what: string,
    row: ReadRow,
    column: string,
  ): string | undefined => {
    const found = ids.get(name) ?? [];
    if (found.length > 1)
      report(row.problem(column, `a name that one ${what} has; ${found.length} are called ${name}`));
    return found.length === 1 ? found[0] : undefined;
  };
  const known = (
    ids: ReadonlyMap<string, readonly string[]>,
    what: string,
    row: ReadRow,
    column: string,
  ): string | undefined => {
    const name = String(row.cells[column]);
    const id = only(ids, name, what, row, column);
    if ((ids.get(name) ?? []).length === 0)
      report(row.problem(column, `a ${what} of this design or of the tables; there is no ${name}`));
    return id;
  };
  /** False, and said, where an earlier line of the same table already tells of this one. */
  const isFirst = (table: string, name: string, row: ReadRow, column: string): boolean => {
    const key = `${table} ${name}`;
    const line = linesByName.get(key);
    if (line !== undefined)
      report(row.problem(column, `one row for each; line ${line} is about ${name}, too`));
    else linesByName.set(key, row.line);
    return line === undefined;
  };

  const set = (
    bag: object,
    path: string,
    field: string,
    row: ReadRow,
    column: string,
    value: unknown,
  ): void => {
    if (value === undefined) return;
    const at = `${path}.${field}`;
    origins.set(at, { row, column });
    if (saysSame((bag as Bag)[field], value)) return;
    (bag as Bag)[field] = value;
    if (effect === 'unchanged') effect = 'changed';
  };
  const setCells = (bag: object, path: string, row: ReadRow, fields: readonly string[]): void => {
    for (const field of fields) set(bag, path, field, row, field, row.cells[field]);
  };
  const add = <T extends object>(
    entries: { [id: string]: T },
    collection: string,
    id: string,
    entry: T,
    row: ReadRow,
    column: string,
  ): T => {
    entries[id] = entry;
    origins.set(`${collection}.${id}`, { row, column });
    effect = 'added';
    return entry;
  };

  const freePortId = (device: Draft['devices'][string], number: number): string => {
    let id = `p${number}`;
    for (let n = 2; Object.hasOwn(device.ports, id); n += 1) id = `p${number}-${n}`;
    return id;
  };

  const site = (row: ReadRow): void => {
    const name = String(row.cells.name);
    if (!isFirst('sites', name, row, 'name')) return;
    let id = only(sites, name, 'site', row, 'name');
    if (id === undefined && (sites.get(name) ?? []).length > 0) return;
    if (id === undefined) {
      id = newId('site');
      add(draft.sites, 'sites', id, { name }, row, 'name');
      sites.set(name, [id]);
    }
    setCells(draft.sites[id]!, `sites.${id}`, row, ['notes']);
  };

  const device = (row: ReadRow): void => {
    const name = String(row.cells.name);
    const kind = row.cells.kind as Exclude<DeviceKind, 'host'>;
    if (!isFirst('devices', name, row, 'name')) return;
    const at = known(sites, 'site', row, 'site');
    let id = only(devices, name, 'device', row, 'name');
    if (at === undefined || (id === undefined && (devices.get(name) ?? []).length > 0)) return;
    if (id === undefined) {
      id = newId(idStarts[kind]);
      const memberNames = { 1: `${name}-1`, 2: `${name}-2` };
      const common = { name, site: at, ports: {} };
      add<Draft['devices'][string]>(
        draft.devices,
        'devices',
        id,
        kind === 'ha-pair' ? { kind, ...common, memberNames } : { kind, ...common },
        row,
        'name',
      );
      devices.set(name, [id]);
    }
    const entry = draft.devices[id]!;
    const path = `devices.${id}`;
    if (entry.kind !== kind) {
      report(row.problem('kind', `${entry.kind}, as ${name} is one; change it on the sheet`));
      return;
    }
    set(entry, path, 'site', row, 'site', at);
    setCells(entry, path, row, ['managementAddress', 'notes']);
    if (entry.kind === 'ha-pair') {
      set(entry.memberNames, `${path}.memberNames`, '1', row, 'member1', row.cells.member1);
      set(entry.memberNames, `${path}.memberNames`, '2', row, 'member2', row.cells.member2);
      noteMembers(id, entry.memberNames);
    } else
      for (const column of ['member1', 'member2'])
        if (row.cells[column] !== undefined)
          report(row.problem(column, 'nothing: only an HA pair has members'));
  };

  const portNumbered = (id: string, number: number): string | undefined =>
    Object.entries(draft.devices[id]!.ports).find(([, each]) => each.number === number)?.[0];

  const port = (row: ReadRow): void => {
    const number = row.cells.number as number;
    const id = known(devices, 'device', row, 'device');
    if (id === undefined || !isFirst('ports', `${row.cells.device as string} port ${number}`, row, 'number'))
      return;
    const owner = draft.devices[id]!;
    let key = portNumbered(id, number);
    const path = `devices.${id}.ports`;
    if (key === undefined) {
      key = freePortId(owner, number);
      add<Mutable<Port>>(owner.ports, path, key, { number, role: 'lan' }, row, 'number');
    }
    setCells(owner.ports[key]!, `${path}.${key}`, row, [
      'number',
      'name',
      'role',
      'speedBps',
      'mtu',
      'mode',
      'vlan',
      'nativeVlan',
      'allowedVlans',
      'shut',
    ]);
  };

  const segmentWide = ['name', 'mtu', 'protocols', 'hostsExpected', 'mustBeFiltered'] as const;
  // What a line said of a whole segment, so that another can't say something else.
  const saidOfSegments = new Map<string, { readonly line: number; readonly text: string }>();

  const segment = (row: ReadRow): void => {
    const letter = String(row.cells.letter);
    let id = only(segments, letter, 'segment', row, 'letter');
    if (id === undefined && (segments.get(letter) ?? []).length > 0) return;
    if (id === undefined) {
      id = newId('seg');
      add<Mutable<Segment>>(
        draft.segments,
        'segments',
        id,
        { letter, name: `Segment ${letter}`, sites: {} },
        row,
        'letter',
      );
      segments.set(letter, [id]);
    }
    const entry = draft.segments[id]!;
    for (const field of segmentWide) {
      const value = row.cells[field];
      if (value === undefined) continue;
      const text = JSON.stringify(value);
      const before = saidOfSegments.get(`${letter} ${field}`);
      if (before !== undefined && before.text !== text)
        report(
          row.problem(
            field,
            `the same at every site of segment ${letter}; line ${before.line} says otherwise`,
          ),
        );
      else saidOfSegments.set(`${letter} ${field}`, { line: row.line, text });
      set(entry, `segments.${id}`, field, row, field, value);
    }
    if (row.cells.site === undefined) {
      for (const column of ['vlan', 'subnets'])
        if (row.cells[column] !== undefined)
          report(row.problem(column, 'a site in the same row: a VLAN and subnets are those of one site'));
      return;
    }
    const at = known(sites, 'site', row, 'site');
    if (at === undefined || !isFirst('segments', `${letter} at ${row.cells.site as string}`, row, 'site'))
      return;
    const path = `segments.${id}.sites`;
    if (!Object.hasOwn(entry.sites, at)) {
      const isNew = effect === 'added';
      add(entry.sites, path, at, {}, row, 'site');
      // A segment that lands at one site more is not one more segment.
      if (!isNew) effect = 'changed';
    }
    setCells(entry.sites[at]!, `${path}.${at}`, row, ['vlan', 'subnets']);
  };

  const plugIn = (id: string, row: ReadRow): void => {
    const { device: to, port: number } = row.cells;
    if (to === undefined && number === undefined) return;
    if (to === undefined || number === undefined) {
      report(
        row.problem(
          to === undefined ? 'device' : 'port',
          to === undefined
            ? 'the device that the port is one of'
            : 'the number of the port that it is plugged into',
        ),
      );
      return;
    }
    const name = String(to);
    const at: PluggedAt | undefined =
      members.get(name) ??
      ((): PluggedAt | undefined => {
        const device = known(devices, 'device', row, 'device');
        return device === undefined ? undefined : { device };
      })();
    if (at === undefined) return;
    const owner = draft.devices[at.device]!;
    if (owner.kind === 'ha-pair' && at.member === undefined) {
      const { memberNames } = owner;
      report(row.problem('device', `one member of the pair: ${memberNames[1]} or ${memberNames[2]}`));
      return;
    }
    if (at.device === id) {
      report(row.problem('device', 'another device than the host itself'));
      return;
    }
    const host = draft.devices[id] as Mutable<Extract<Device, { kind: 'host' }>>;
    let key = portNumbered(at.device, number as number);
    if (key === undefined) {
      key = freePortId(owner, number as number);
      const vlan =
        host.segment === undefined ? undefined : draft.segments[host.segment]?.sites[owner.site]?.vlan;
      add<Mutable<Port>>(
        owner.ports,
        `devices.${at.device}.ports`,
        key,
        {
          number: number as number,
          role: 'lan',
          mode: 'access',
          speedBps: gigabit,
          ...(vlan === undefined ? {} : { vlan }),
        },
        row,
        'port',
      );
    }
    const isThere = (plug: {
      readonly device: string;
      readonly port: string;
      readonly member?: 1 | 2 | undefined;
    }) => plug.device === at.device && plug.port === key && plug.member === at.member;
    for (const link of Object.values(draft.links)) {
      if (link.kind !== 'cable' || (!isThere(link.a) && !isThere(link.b))) continue;
      const far = isThere(link.a) ? link.b : link.a;
      if (far.device === id) return;
      report(
        row.problem(
          'port',
          `a free port; ${draft.devices[far.device]!.name} is plugged into ${name} port ${number as number}`,
        ),
      );
      return;
    }
    const used = new Set(
      Object.values(draft.links).flatMap((link) =>
        link.kind === 'cable'
          ? [link.a, link.b].filter((plug) => plug.device === id).map((plug) => plug.port)
          : [],
      ),
    );
    let own = Object.keys(host.ports).find((each) => !used.has(each));
    if (own === undefined) {
      const free = Math.max(0, ...Object.values(host.ports).map((each) => each.number)) + 1;
      own = freePortId(host, free);
      host.ports[own] = { number: free, role: 'lan', mode: 'access', speedBps: gigabit };
    }
    const link: Mutable<Entry<'links'>> = {
      kind: 'cable',
      a: { device: id, port: own },
      b: { device: at.device, port: key, ...(at.member === undefined ? {} : { member: at.member }) },
    };
    const isNew = effect === 'added';
    add<Draft['links'][string]>(draft.links, 'links', newId('cb'), link, row, 'port');
    if (!isNew) effect = 'changed';
  };

  const host = (row: ReadRow): void => {
    const name = String(row.cells.name);
    if (!isFirst('hosts', name, row, 'name')) return;
    const at = known(sites, 'site', row, 'site');
    const segmentId =
      row.cells.segment === undefined ? undefined : known(segments, 'segment', row, 'segment');
    let id = only(devices, name, 'device', row, 'name');
    if (
      at === undefined ||
      (row.cells.segment !== undefined && segmentId === undefined) ||
      (id === undefined && (devices.get(name) ?? []).length > 0)
    )
      return;
    if (id === undefined) {
      id = newId(idStarts.host);
      add<Draft['devices'][string]>(
        draft.devices,
        'devices',
        id,
        {
          kind: 'host',
          name,
          site: at,
          ports: { p1: { number: 1, role: 'lan', mode: 'access', speedBps: gigabit } },
        },
        row,
        'name',
      );
      devices.set(name, [id]);
    }
    const entry = draft.devices[id]!;
    if (entry.kind !== 'host') {
      report(row.problem('name', `a host; ${name} is a ${entry.kind}`));
      return;
    }
    const path = `devices.${id}`;
    set(entry, path, 'site', row, 'site', at);
    set(entry, path, 'segment', row, 'segment', segmentId);
    setCells(entry, path, row, ['face', 'addresses']);
    plugIn(id, row);
  };

  return {
    begin: () => {
      effect = 'unchanged';
    },
    end: () => effect,
    site,
    device,
    port,
    segment,
    host,
    problemAt: (path, expected) => {
      // Deeper than a cell, such as one of several addresses, is that cell's; a whole entry's is its name's.
      for (let at = path; at !== ''; at = at.slice(0, Math.max(0, at.lastIndexOf('.')))) {
        const origin = origins.get(at);
        if (origin !== undefined) return origin.row.problem(origin.column, expected);
      }
      throw new Error(`The design was no longer one at ${path}, which no row wrote.`);
    },
  };
};
