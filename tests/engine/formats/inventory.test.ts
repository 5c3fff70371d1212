import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  exportInventory,
  inventoryTemplate,
  type Sheet,
} from '#engine/formats/inventory/export-inventory.ts';
import { importInventory, type InventoryInput } from '#engine/formats/inventory/import-inventory.ts';
import { matchColumns } from '#engine/formats/inventory/match-columns.ts';
import {
  inventoryNames,
  inventoryTables,
  tableNamed,
  type InventoryName,
} from '#engine/formats/inventory/tables.ts';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { hubDesign } from '../../support/designs.ts';
import { generatedDesign } from '../../support/generated-designs.ts';

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');

const ids = () => {
  let n = 0;
  return (prefix: string): string => `${prefix}-n${(n += 1)}`;
};
const read = (name: InventoryName, { heads, rows }: Sheet) => ({
  heads,
  rows,
  match: matchColumns(tableNamed(name), heads),
});
const inventoryOf = (design: Design): InventoryInput =>
  Object.fromEntries(inventoryNames.map((name) => [name, read(name, exportInventory(design, name))]));
const table = (name: InventoryName, heads: string, ...rows: readonly string[]): InventoryInput => ({
  [name]: read(name, { heads: heads.split(','), rows: rows.map((row) => row.split(',')) }),
});
const problemsOf = (design: Design, input: InventoryInput) => {
  const imported = importInventory(design, input, ids());
  return imported.ok
    ? []
    : imported.problems.map(
        ({ table: of, line, column, value, expected }) => `${of} ${line} ${column} ${value}: ${expected}`,
      );
};

describe('an inventory in tables', () => {
  it('read back into the design that it came from it changes nothing', () => {
    const imported = importInventory(demo, inventoryOf(demo), ids());
    expect(imported).toMatchObject({ ok: true, patch: {} });
    if (imported.ok)
      expect(imported.counts.devices).toEqual({
        added: 0,
        changed: 0,
        unchanged: Object.values(demo.devices).filter(({ kind }) => kind !== 'host').length,
      });
  });

  it('read into an empty design it makes one with the same inventory', () => {
    const empty = emptyDesign('Copy');
    const imported = importInventory(empty, inventoryOf(demo), ids());
    expect(imported.ok).toBe(true);
    if (!imported.ok) return;
    const copy = applyPatch(empty, imported.patch);
    expect(parseDesign(copy).ok).toBe(true);
    for (const name of inventoryNames)
      expect(exportInventory(copy, name)).toEqual(exportInventory(demo, name));
  });

  it('on generated designs, whose names may repeat, it is taken unchanged or refused by a name that is not one thing’s', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const imported = importInventory(design, inventoryOf(design), ids());
        if (imported.ok) expect(imported.patch).toEqual({});
        else for (const { expected } of imported.problems) expect(expected).toMatch(/one|free port|the same/);
      }),
      { numRuns: 60 },
    );
  });

  it('templates match their own columns, and their rows build a design one after the other', () => {
    const input = Object.fromEntries(
      inventoryNames.map((name) => [name, read(name, inventoryTemplate(name))]),
    ) as InventoryInput;
    for (const { name, columns } of inventoryTables)
      expect(Object.keys(input[name]!.match)).toHaveLength(columns.length);
    expect(importInventory(emptyDesign('From templates'), input, ids())).toMatchObject({
      ok: true,
      counts: {
        sites: { added: 1 },
        devices: { added: 1 },
        ports: { added: 1 },
        segments: { added: 1 },
        hosts: { added: 1 },
      },
    });
  });
});

describe('columns', () => {
  it('are found by other heads that mean the same, each head taken once', () => {
    expect(
      matchColumns(tableNamed('hosts'), ['Host name', 'Location', 'IP address', 'Switch', 'Switch port']),
    ).toEqual({
      name: 0,
      site: 1,
      addresses: 2,
      device: 3,
      port: 4,
    });
    expect(matchColumns(tableNamed('ports'), ['Name', 'Device', 'Port'])).toEqual({
      name: 0,
      device: 1,
      number: 2,
    });
  });

  it('that are needed and not there are asked for', () => {
    expect(problemsOf(demo, table('devices', 'Device,Rack', 'sw-9,4'))).toEqual([
      'devices 1 Kind Device, Rack: a column for Kind: say which one it is',
      'devices 1 Site Device, Rack: a column for Site: say which one it is',
    ]);
  });
});

describe('rows', () => {
  it('change what is there where they say something else, and leave alone what they are silent on', () => {
    const imported = importInventory(
      demo,
      table('ports', 'Device,Port,Speed Mbit/s,MTU', 'fw-gul,1,2500,', 'fw-gul,2,,'),
      ids(),
    );
    expect(imported).toMatchObject({ ok: true, counts: { ports: { added: 0, changed: 1, unchanged: 1 } } });
    if (!imported.ok) return;
    const [id] = Object.entries(demo.devices).find(([, { name }]) => name === 'fw-gul')!;
    expect(Object.keys(imported.patch)).toEqual(['devices']);
    const after = applyPatch(demo, imported.patch).devices[id]!;
    const before = demo.devices[id]!;
    const [key, port] = Object.entries(before.ports).find(([, { number }]) => number === 1)!;
    expect(after.ports[key]).toEqual({ ...port, speedBps: 2_500_000_000 });
  });

  it('plug a new host into a port, which is made in the VLAN of its segment where there is none', () => {
    const imported = importInventory(
      demo,
      table(
        'hosts',
        'Host,Site,Segment,Address,Switch,Switch port',
        'gate-2,Gullhaven,A,10.110.1.21/22,sw-gul,17',
      ),
      ids(),
    );
    expect(imported.ok).toBe(true);
    if (!imported.ok) return;
    const after = applyPatch(demo, imported.patch);
    const row = exportInventory(after, 'hosts').rows.find(([name]) => name === 'gate-2');
    expect(row).toEqual(['gate-2', 'Gullhaven', 'A', '', '10.110.1.21/22', 'sw-gul', '17']);
    const port = Object.values(after.devices).find(({ name }) => name === 'sw-gul')!.ports.p17!;
    expect(port).toMatchObject({ number: 17, mode: 'access', vlan: 110 });
  });

  it('reach one member of a pair by its name, and the pair itself by none', () => {
    const [, pair] = Object.entries(demo.devices).find(([, { kind }]) => kind === 'ha-pair')!;
    const heads = 'Host,Site,Plugged into,At port';
    expect(problemsOf(demo, table('hosts', heads, `probe,Head office,${pair.name},9`))).toEqual([
      `hosts 2 Plugged into ${pair.name}: one member of the pair: fw-ho-1 or fw-ho-2`,
    ]);
    const imported = importInventory(demo, table('hosts', heads, 'probe,Head office,fw-ho-2,9'), ids());
    expect(imported).toMatchObject({ ok: true });
    if (imported.ok)
      expect(
        exportInventory(applyPatch(demo, imported.patch), 'hosts')
          .rows.find(([name]) => name === 'probe')!
          .slice(-2),
      ).toEqual(['fw-ho-2', '9']);
  });
});

describe('what can’t be taken', () => {
  const hub = hubDesign(2);

  it('is named by line, column, value and way out, and nothing else is taken either', () => {
    expect(
      problemsOf(
        hub,
        table(
          'ports',
          'Device,Port,MTU,Allowed VLANs,Shut',
          'fw-s1,8,60,,',
          'fw-s1,nine,,,',
          'fw-x,3,,,',
          'fw-s2,4,,110-,',
          'fw-s2,5,,,perhaps',
          ',6,,,',
        ),
      ),
    ).toEqual([
      'ports 3 Port nine: a whole number, digits only',
      'ports 4 Device fw-x: a device of this design or of the tables; there is no fw-x',
      'ports 5 Allowed VLANs 110-: all, or VLANs and ranges such as 110 120-130',
      'ports 6 Shut perhaps: yes or no',
      'ports 7 Device : something: The device that it is a port of.',
    ]);
  });

  it('bounds of the model are told by the cell that went beyond them', () => {
    expect(problemsOf(hub, table('ports', 'Device,Port,MTU', 'fw-s1,8,60'))).toEqual([
      'ports 2 MTU 60: an MTU of 68 to 65535 bytes',
    ]);
    expect(
      problemsOf(hub, table('segments', 'Segment,Site,VLAN,Subnets', 'A,Gullhaven,4095,10.1.0.0/33')),
    ).toEqual([
      'segments 2 VLAN 4095: a VLAN from 1 to 4094; 4095 is reserved',
      'segments 2 Subnets 10.1.0.0/33: a prefix such as 10.110.0.0/22 or 2001:db8:110::/64',
    ]);
    expect(problemsOf(hub, table('segments', 'Segment,Name', 'Ticketing,Tickets'))).toEqual([
      'segments 2 Segment Ticketing: one or two capital letters',
    ]);
  });

  it('a thing told of twice, a kind that changes and a port that is taken are refused', () => {
    expect(problemsOf(hub, table('sites', 'Site', 'Quay', 'Quay'))).toEqual([
      'sites 3 Site Quay: one row for each; line 2 is about Quay, too',
    ]);
    expect(problemsOf(hub, table('devices', 'Device,Kind,Site', 'fw-s1,switch,Gullhaven'))).toEqual([
      'devices 2 Kind switch: firewall, as fw-s1 is one; change it on the sheet',
    ]);
    const hosts = exportInventory(demo, 'hosts');
    const taken = hosts.rows.find(([name]) => name === 'ticket-1')!;
    expect(
      problemsOf(
        demo,
        table('hosts', 'Host,Site,Plugged into,At port', `spare,Head office,${taken[5]},${taken[6]}`),
      ),
    ).toEqual([
      `hosts 2 At port ${taken[6]}: a free port; ticket-1 is plugged into ${taken[5]} port ${taken[6]}`,
    ]);
  });

  it('two rows of one segment may not say different things of all of it', () => {
    expect(
      problemsOf(hub, table('segments', 'Segment,Site,MTU needed', 'A,Gullhaven,1300', 'A,Orrin Point,1400')),
    ).toEqual(['segments 3 MTU needed 1400: the same at every site of segment A; line 2 says otherwise']);
  });
});
