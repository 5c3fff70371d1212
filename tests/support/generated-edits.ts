import fc from 'fast-check';
import type { Collection, Design } from '#engine/model/design.ts';
import { collections } from '#engine/model/design.ts';
import type { Json, MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, patchAt } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { danglingPatch } from '#engine/model/references.ts';
import { generatedVlans } from './generated-designs.ts';

/** Values by the place inside an entry; null takes the place out, and '*' stands for any key that is there. */
type Fields = { readonly [path: string]: readonly Json[] };

const vlanLists = [[110], [110, 120], [120, 130], 'all'];
const endFields = (end: 'a' | 'b'): Fields => ({
  [`${end}.ikeVersion`]: [1, 2, null],
  [`${end}.start`]: ['starts', 'answers', 'on-traffic', null],
  [`${end}.identity`]: ['gw.saltmarsh.example', '198.51.100.10', null],
  [`${end}.authentication`]: [
    { method: 'certificate' },
    { method: 'pre-shared-key', vaultEntry: 'ipsec shared' },
    null,
  ],
  [`${end}.liveness`]: ['off', { intervalSeconds: 10, tries: 3 }, null],
  [`${end}.mode`]: ['tunnel', 'transport', null],
  [`${end}.perfectForwardSecrecy`]: [true, false, null],
  [`${end}.outerDf`]: ['copy', 'set', 'clear', null],
  [`${end}.espProposals`]: [
    { one: { rank: 'a0', encryption: 'aes-cbc', keyBits: 128, integrity: 'hmac-sha2-256', group: 14 } },
    { one: { rank: 'a0', encryption: 'aes-gcm-16', keyBits: 256, group: 19 } },
    null,
  ],
  [`${end}.selectors`]: [{ one: { rank: 'a0', local: '10.255.0.1/32', remote: '10.255.0.2/32' } }, null],
});
const tunnelEndFields = (end: 'a' | 'b'): Fields => ({
  [`${end}.vni`]: [0, 700, 10_000, 10_001, null],
  [`${end}.udpPort`]: [4789, 4790, null],
  [`${end}.innerTags`]: ['keep', 'strip', null],
  [`${end}.outerDf`]: ['set', 'clear', 'inherit', null],
});

const fieldsOf: { readonly [C in Collection]: Fields } = {
  sites: { name: ['Marl', 'Tarn'], zone: ['ashore', 'afloat', null] },
  devices: {
    name: ['gw-1', 'gw-2', 'kiosk'],
    site: ['s0', 's1'],
    profile: ['mp', 'plain', null],
    addresses: [['10.110.0.20/16'], ['10.110.9.9/16', '10.120.9.9/16'], null],
    segment: ['a', 'b', null],
    active: [1, 2, null],
    mode: ['active-standby', 'active-active', null],
    stateSync: [true, false, null],
    managementAddress: ['10.110.0.7', '192.0.2.7', null],
    notes: ['Under the stairs', null],
    settings: [
      { spanningTree: { mode: 'on', priority: 4096 } },
      { spanningTree: { mode: 'on' }, keepInnerTags: true },
      { ignoreDf: true, vxlanFrom: 'anyone' },
      null,
    ],
    'ports.*.mode': ['access', 'trunk', null],
    'ports.*.vlan': [...generatedVlans, null],
    'ports.*.nativeVlan': [...generatedVlans, null],
    'ports.*.allowedVlans': [...vlanLists, null],
    'ports.*.shut': [true, null],
    'ports.*.mtu': [1500, 9000, 1400, null],
    'ports.*.speedBps': [100_000_000, 1_000_000_000, null],
    'ports.*.aggregation': ['lag', 'lag2', null],
    'ports.*.role': ['lan', 'wan', 'member-link'],
    'ports.*.number': [1, 2, 40],
    'ports.*.stormLimitPps': [500, null],
    'ports.*.macLimit': [1, null],
    'ports.*.name': ['ge-0', null],
    'ports.extra': [{ number: 60, role: 'lan', mode: 'access', vlan: 110 }, null],
  },
  transports: {
    name: ['Fen', 'Moor'],
    kind: ['internet', 'private-routed', 'own-routed'],
    mtu: [1400, 1500, 9000, null],
    families: [[4], [6], [4, 6], null],
    filters: [['esp'], ['udp-4500', 'fragments'], ['udp-4789', 'packet-too-big'], null],
    trusted: [true, false, null],
    latencyUs: [18_000, 90_000, null],
    rateBps: [20_000_000, null],
  },
  links: {
    name: ['blue', null],
    'a.port': ['p1', 'p2', 'lan1', 'lan2'],
    'b.port': ['p1', 'p2', 'p3', 'lan1'],
    ipv4: ['198.51.100.77', '10.110.0.9', null],
    ipv6: ['2001:db8::7', null],
    dynamic: [true, null],
    nat: [{ forwarded: true }, {}, null],
    members: ['both', '1', '2'],
    accessOverhead: ['pppoe', null],
    rateUpBps: [10_000_000, null],
  },
  endpoints: {
    name: ['lo-x', 'lo-y'],
    ipv4: ['10.255.0.1/32', '10.255.0.77/32', '10.110.0.1/32', null],
    ipv6: ['2001:db8::1/128', null],
    member: [1, 2, null],
  },
  associations: { name: ['as-x', 'as-y'], ...endFields('a'), ...endFields('b') },
  tunnels: {
    name: ['tn-x', 'tn-y'],
    association: [null],
    family: [4, 6, null],
    ...tunnelEndFields('a'),
    ...tunnelEndFields('b'),
  },
  forwarders: {
    name: ['br-x', 'br-y'],
    kind: ['bridge', 'cross-connect'],
    policy: [
      { one: { rank: 'a0', action: 'permit', direction: 'both', frames: 'arp' } },
      { one: { rank: 'a0', action: 'permit', direction: 'both', frames: 'any' } },
      null,
    ],
    spanningTree: [{ mode: 'on' }, { mode: 'off' }, null],
    gateway: [
      { addresses: ['10.110.0.1/16'], mtu: 1500, dhcp: 'server' },
      { redundancy: { group: 7 }, routerAdvertisements: true },
      null,
    ],
    multicast: ['flood', 'snoop', 'drop', null],
    'circuits.*.isolation': ['one', 'two', null],
    'circuits.*.rank': ['a0', 'Zz', 'a5'],
    'circuits.*.vlans': [[110], [120, 130], 'all', 'untagged'],
    'circuits.*': [null],
    'circuits.more': [{ kind: 'port', rank: 'z1', port: 'lan2', vlans: [110] }, null],
  },
  segments: {
    letter: ['A', 'B', 'Z'],
    name: ['Doors', 'Clocks'],
    mtu: [1396, 1500, 9000, null],
    protocols: [['ipv4'], ['ipv6'], ['ipv4', 'ospf', 'ptp'], null],
    hostsExpected: [2, 900, null],
    mustBeFiltered: [true, null],
    'sites.*.vlan': [...generatedVlans, null],
    'sites.*.subnets': [['10.110.0.0/16'], ['10.120.0.0/16'], null],
    'sites.*': [null],
  },
  demands: { forwardBps: [1_000_000, 900_000_000, null], latencyAllowedUs: [1_000, 90_000, null] },
  profiles: {
    name: ['Plain', 'Multipoint'],
    vniScope: ['endpoint', 'peer', 'multipoint', null],
    reservedGroups: [{ '00': 'pass' }, { '00': 'drop' }, null],
    macTable: [1, 9_000, null],
    oversizeDf: ['silent', 'icmp', 'fragment', null],
  },
  notes: { text: ['Ask the harbour master', 'Done'] },
};

/** Entries that an edit may add, of collections that designs often hold none of, and of those that are drawn by hand. */
const additions: readonly MergePatch[] = [
  { profiles: { mp: { name: 'Multipoint', vniScope: 'multipoint' } } },
  { profiles: { plain: { name: 'Plain', reservedGroups: { '00': 'pass' }, macTable: 2 } } },
  { demands: { one: { segment: 'a', from: { site: 's0' }, to: { site: 's1' }, forwardBps: 50_000_000 } } },
  { notes: { one: { text: 'Ask the harbour master', target: { collection: 'sites', id: 's0' } } } },
  { sites: { 's-new': { name: 'Dunmore' } } },
  {
    devices: {
      'sw-new': {
        kind: 'switch',
        site: 's0',
        name: 'sw-new',
        ports: {
          p1: { number: 1, role: 'lan', mode: 'trunk', allowedVlans: [110, 120] },
          p2: { number: 2, role: 'lan', mode: 'access', vlan: 110 },
        },
      },
    },
    links: {
      'cb-0-new': {
        kind: 'cable',
        a: { device: 'sw-new', port: 'p1' },
        b: { device: 'fw-s0', port: 'lan2' },
      },
    },
  },
  {
    links: {
      'cb-2-new': {
        kind: 'cable',
        a: { device: 'sw-s0', port: 'p2' },
        b: { device: 'sw-s1', port: 'p2' },
      },
    },
  },
  {
    transports: { moor: { name: 'Moor', kind: 'own-routed', mtu: 9000 } },
    links: { 'ld-new': { kind: 'landing', device: 'fw-s1', port: 'wan1', transport: 'moor' } },
  },
  {
    tunnels: {
      'tn-new': {
        name: 'tn-new',
        a: { endpoint: 'lo-s0', vni: 20_000 },
        b: { endpoint: 'lo-s1', vni: 20_000 },
      },
    },
  },
  { layout: { devices: { 'fw-s0': { x: 80, y: 40 } } } },
  { meta: { title: 'Second issue' } },
  { meta: { example: false } },
];

const pick = <T>(items: readonly T[], n: number): T | undefined => items[n % items.length];

const keysAt = (entry: unknown, path: readonly string[]): readonly string[] =>
  Object.keys(
    path.reduce<unknown>((at, key) => (at as Record<string, unknown> | undefined)?.[key], entry) ?? {},
  );

const fieldPatch = (
  design: Design,
  collection: Collection,
  [entry, field, value, key]: Numbers,
): MergePatch => {
  const id = pick(Object.keys(design[collection]).sort(), entry);
  const fields = fieldsOf[collection];
  const path = pick(Object.keys(fields), field)!;
  if (id === undefined) return {};
  const steps: string[] = [];
  for (const step of path.split('.')) {
    const name = step === '*' ? pick(keysAt(design[collection][id], steps), key) : step;
    if (name === undefined) return {};
    steps.push(name);
  }
  return patchAt([collection, id, ...steps], pick(fields[path]!, value) ?? undefined);
};

type Numbers = readonly [entry: number, field: number, value: number, key: number];
const number = fc.nat(9_999);
const numbers: fc.Arbitrary<Numbers> = fc.tuple(number, number, number, number);

/** A change of a design that leaves it valid; the design itself where it would not. */
export type Edit = (design: Design) => Design;

const ifValid = (before: Design, after: Design): Design => (parseDesign(after).ok ? after : before);

const change = fc.record({ collection: fc.constantFrom(...collections), at: numbers }).map(
  ({ collection, at }): Edit =>
    (design) =>
      ifValid(design, applyPatch(design, fieldPatch(design, collection, at))),
);
const removal = fc
  .record({ collection: fc.constantFrom(...collections), n: number })
  .map(({ collection, n }): Edit => (design) => {
    const id = pick(Object.keys(design[collection]).sort(), n);
    if (id === undefined) return design;
    const without = applyPatch(design, { [collection]: { [id]: null } });
    return ifValid(design, applyPatch(without, danglingPatch(without)));
  });
const addition = fc.constantFrom(...additions).map(
  (patch): Edit =>
    (design) =>
      ifValid(design, applyPatch(design, patch)),
);

/** An edit to any collection: mostly a value in an entry, now and then an entry added or taken out with all that names it. */
export const generatedEdit: fc.Arbitrary<Edit> = fc.oneof(
  { weight: 8, arbitrary: change },
  { weight: 1, arbitrary: removal },
  { weight: 2, arbitrary: addition },
);
