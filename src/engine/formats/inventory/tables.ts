import { deviceKinds, hostFaces } from '../../model/devices.ts';
import { protocols } from '../../model/intent.ts';
import type { CellReader } from './cell-readers.ts';
import { address, addressList, choice, line, speed, vlans, whole, words, yesNo } from './cell-readers.ts';

export const inventoryNames = ['sites', 'devices', 'ports', 'segments', 'hosts'] as const;
export type InventoryName = (typeof inventoryNames)[number];

export interface InventoryColumn {
  readonly key: string;
  /** As templates and exports head it. */
  readonly head: string;
  /** Other heads that mean the same, in small letters without signs between them. */
  readonly alike: readonly string[];
  /** A row without it says nothing. */
  readonly required?: true;
  readonly reader: CellReader;
  /** One sentence for whoever fills it in. */
  readonly explains: string;
}

export interface InventoryTable {
  readonly name: InventoryName;
  readonly title: string;
  readonly explains: string;
  readonly columns: readonly InventoryColumn[];
  /** A row that shows how the table is filled in. */
  readonly example: { readonly [column: string]: string };
}

const column = (
  key: string,
  head: string,
  reader: CellReader,
  explains: string,
  more: { readonly alike?: readonly string[]; readonly required?: true } = {},
): InventoryColumn => ({
  key,
  head,
  reader,
  explains,
  alike: more.alike ?? [],
  ...(more.required ? { required: true } : {}),
});

const name = (head: string, explains: string, alike: readonly string[] = []): InventoryColumn =>
  column('name', head, line, explains, { alike: ['name', ...alike], required: true });
const site = column('site', 'Site', line, 'The name of a site, of this design or of the table of sites.', {
  alike: ['location', 'place'],
  required: true,
});

/** What can be placed without a segment of its own: hosts have a table for themselves. */
const placedKinds = deviceKinds.filter((kind) => kind !== 'host');

/** The tables of an inventory, in the order in which they are read. A row is told from others by its name columns. */
export const inventoryTables: readonly InventoryTable[] = [
  {
    name: 'sites',
    title: 'Sites',
    explains: 'Places with equipment.',
    columns: [
      name('Site', 'What the site is called.', ['site', 'sitename', 'location', 'place']),
      column('notes', 'Notes', words, 'Whatever else is worth knowing.', { alike: ['remarks', 'comment'] }),
    ],
    example: { name: 'Gullhaven', notes: 'Terminal, second floor' },
  },
  {
    name: 'devices',
    title: 'Devices',
    explains: 'Firewalls, HA pairs, switches and routers.',
    columns: [
      name('Device', 'What the device is called.', ['device', 'devicename', 'hostname']),
      column('kind', 'Kind', choice(placedKinds), `One of ${placedKinds.join(', ')}.`, {
        alike: ['type', 'devicekind', 'devicetype', 'role'],
        required: true,
      }),
      site,
      column('member1', 'Member 1', line, 'The first member of an HA pair.', { alike: ['firstmember'] }),
      column('member2', 'Member 2', line, 'The second member of an HA pair.', { alike: ['secondmember'] }),
      column('managementAddress', 'Management address', address, 'Where it is administered.', {
        alike: ['management', 'managementip'],
      }),
      column('notes', 'Notes', words, 'Whatever else is worth knowing.', { alike: ['remarks', 'comment'] }),
    ],
    example: { name: 'fw-gul', kind: 'firewall', site: 'Gullhaven' },
  },
  {
    name: 'ports',
    title: 'Ports',
    explains: 'Ports of those devices; of a pair, each number once.',
    columns: [
      column('device', 'Device', line, 'The device that it is a port of.', {
        alike: ['devicename', 'hostname'],
        required: true,
      }),
      column('number', 'Port', whole(), 'Its number on the device.', {
        alike: ['portnumber', 'number', 'no'],
        required: true,
      }),
      column('name', 'Name', line, 'What it is called beside its number.', {
        alike: ['portname', 'interface', 'label'],
      }),
      column('role', 'Role', choice(['wan', 'lan', 'member-link']), 'One of wan, lan, member-link.'),
      column('speedBps', 'Speed, Mbit/s', speed, 'In Mbit/s, such as 1000.', {
        alike: ['speed', 'speedmbits', 'rate'],
      }),
      column('mtu', 'MTU', whole(), 'Largest IP packet in bytes.', { alike: ['mtubytes'] }),
      column('mode', 'Mode', choice(['access', 'trunk']), 'Access or trunk.', { alike: ['portmode'] }),
      column('vlan', 'VLAN', whole(), 'Of an access port.', { alike: ['accessvlan', 'vlanid'] }),
      column('nativeVlan', 'Native VLAN', whole(), 'Of a trunk.', { alike: ['untaggedvlan'] }),
      column(
        'allowedVlans',
        'Allowed VLANs',
        vlans,
        'Of a trunk: all, or numbers and ranges such as 110 120-130.',
        {
          alike: ['taggedvlans', 'vlans'],
        },
      ),
      column('shut', 'Shut', yesNo, 'Yes where it is shut down.', { alike: ['shutdown', 'disabled'] }),
    ],
    example: {
      device: 'fw-gul',
      number: '2',
      name: 'lan2',
      role: 'lan',
      speedBps: '1000',
      mode: 'trunk',
      allowedVlans: '110 120',
    },
  },
  {
    name: 'segments',
    title: 'Segments',
    explains: 'One row for each segment at each of its sites.',
    columns: [
      column('letter', 'Segment', line, 'One or two capital letters that tell it from the others.', {
        alike: ['letter', 'id'],
        required: true,
      }),
      column('name', 'Name', line, 'What it is for.', { alike: ['segmentname', 'vlanname'] }),
      column('site', 'Site', line, 'Where it lands.', { alike: ['location', 'place'] }),
      column('vlan', 'VLAN', whole(), 'The VLAN that it has there.', { alike: ['vlanid'] }),
      column('subnets', 'Subnets', addressList, 'Prefixes with spaces between them.', {
        alike: ['subnet', 'prefix', 'network'],
      }),
      column('mtu', 'MTU needed', whole(), 'Largest IP packet that it must carry, in bytes.', {
        alike: ['mtu'],
      }),
      column('protocols', 'Must carry', choice(protocols, true), `Any of ${protocols.join(', ')}.`, {
        alike: ['protocols', 'carries'],
      }),
      column('hostsExpected', 'Hosts expected', whole(), 'How many there will be.', { alike: ['hosts'] }),
      column('mustBeFiltered', 'Must be filtered', yesNo, 'Yes where traffic between its sites has to be.', {
        alike: ['filtered'],
      }),
    ],
    example: {
      letter: 'A',
      name: 'Ticketing',
      site: 'Gullhaven',
      vlan: '110',
      subnets: '10.110.0.0/22',
      protocols: 'ipv4',
    },
  },
  {
    name: 'hosts',
    title: 'Hosts',
    explains: 'Equipment on the segments, and the port that it is plugged into.',
    columns: [
      name('Host', 'What it is called.', ['host', 'hostname', 'device']),
      site,
      column('segment', 'Segment', line, 'The letter of its segment.', { alike: ['segmentletter'] }),
      column('face', 'Face', choice(hostFaces), `What it looks like: ${hostFaces.join(', ')}.`, {
        alike: ['type', 'kind'],
      }),
      column('addresses', 'Addresses', addressList, 'With prefix length, spaces between them.', {
        alike: ['address', 'ip', 'ipaddress'],
      }),
      column(
        'device',
        'Plugged into',
        line,
        'A switch or firewall by its name; of a pair, one of its members.',
        {
          alike: ['switch', 'connectedto', 'uplink'],
        },
      ),
      column('port', 'At port', whole(), 'The number of the port there.', {
        alike: ['port', 'switchport', 'portnumber'],
      }),
    ],
    example: {
      name: 'gate-gul',
      site: 'Gullhaven',
      segment: 'A',
      face: 'kiosk',
      addresses: '10.110.1.20/22',
    },
  },
];

export const tableNamed = (name: InventoryName): InventoryTable =>
  inventoryTables.find((table) => table.name === name)!;
