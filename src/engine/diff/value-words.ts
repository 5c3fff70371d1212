import type { Collection, Design } from '../model/design.ts';
import { inRankOrder } from '../model/rank.ts';
import { elementName, plugName, portNameOf } from './element-names.ts';

/**
 * Says a value in the trade's words; the design and the entry that hold it give the names of what it refers to. Values are of
 * the model's schema, which the design was read by.
 */
export type WriteValue = (value: unknown, design: Design, entry: unknown) => string;

type Bag = Readonly<Record<string, unknown>>;

/** A value as it is; yes and no for a flag. */
export const asIs: WriteValue = (value) =>
  value === true ? 'yes' : value === false ? 'no' : Array.isArray(value) ? listOf(value) : String(value);

const listOf = (items: readonly unknown[]): string => (items.length === 0 ? 'none' : items.join(', '));

export const withUnit =
  (unit: string): WriteValue =>
  (value) =>
    `${String(value)} ${unit}`;

const rateUnits = [
  ['Tbit/s', 1e12],
  ['Gbit/s', 1e9],
  ['Mbit/s', 1e6],
  ['kbit/s', 1e3],
] as const;

/** A rate in bit/s in the largest unit in which it is exact to three decimals. */
export const rate: WriteValue = (value) => {
  const rateBps = Number(value);
  for (const [unit, factor] of rateUnits) {
    const scaled = Math.round((rateBps / factor) * 1000) / 1000;
    if (scaled >= 1 && scaled * factor === rateBps) return `${scaled} ${unit}`;
  }
  return `${rateBps} bit/s`;
};

export const milliseconds: WriteValue = (value) => `${Number(value) / 1000} ms`;

/** Parts per million as per cent. */
export const perCent: WriteValue = (value) => `${Number(value) / 10_000} %`;

/** VLANs as ranges: '110, 120 to 129'. */
export const vlanList: WriteValue = (value) => {
  if (!Array.isArray(value)) return String(value);
  const vlans = [...(value as number[])].sort((a, b) => a - b);
  const runs: [number, number][] = [];
  for (const vlan of vlans) {
    const last = runs.at(-1);
    if (last !== undefined && vlan <= last[1] + 1) last[1] = Math.max(last[1], vlan);
    else runs.push([vlan, vlan]);
  }
  return listOf(
    runs.map(([from, to]) =>
      from === to ? `${from}` : to === from + 1 ? `${from}, ${to}` : `${from} to ${to}`,
    ),
  );
};

/** Other words for some values; what is not among them stands as it is. */
export const inWords =
  (words: { readonly [value: string]: string }): WriteValue =>
  (value, design, entry) =>
    Array.isArray(value)
      ? listOf(value.map((item) => words[String(item)] ?? String(item)))
      : (words[String(value)] ?? asIs(value, design, entry));

export const nameIn =
  (collection: Collection): WriteValue =>
  (value, design) =>
    elementName(design, collection, String(value));

const shortest = 60;
/** Text that may be long, by its beginning. */
export const text: WriteValue = (value) => {
  const line = String(value).replace(/\s+/g, ' ').trim();
  return line.length > shortest ? `“${line.slice(0, shortest - 1).trimEnd()}…”` : `“${line}”`;
};

/** A port of the device that the entry names. */
export const portHere: WriteValue = (value, design, entry) =>
  portNameOf(design, (entry as { readonly device: string }).device, String(value));

export const plug: WriteValue = (value, design) => plugName(design, value as Parameters<typeof plugName>[1]);

export const demandPlace: WriteValue = (value, design) => {
  const place = value as { readonly site?: string; readonly host?: string };
  return place.site === undefined
    ? elementName(design, 'devices', place.host ?? '')
    : `all of ${elementName(design, 'sites', place.site)}`;
};

export const noteTarget: WriteValue = (value, design) => {
  const { collection, id } = value as { readonly collection: Collection; readonly id: string };
  return elementName(design, collection, id);
};

export const authentication: WriteValue = (value) => {
  const { method, vaultEntry } = value as { readonly method: string; readonly vaultEntry?: string };
  return method === 'certificate' ? 'certificate' : `pre-shared key kept as ${vaultEntry ?? ''}`;
};

export const liveness: WriteValue = (value) => {
  if (value === 'off') return 'off';
  const { intervalSeconds, tries } = value as { readonly intervalSeconds: number; readonly tries: number };
  return `every ${intervalSeconds} s, ${tries} tries`;
};

export const accessOverhead: WriteValue = (value) => (value === 'pppoe' ? 'PPPoE' : `${String(value)} bytes`);

export const etherType: WriteValue = (value) => `0x${Number(value).toString(16).padStart(4, '0')}`;

export const mixOfPackets: WriteValue = (value) =>
  (value as readonly { readonly packetBytes: number; readonly weight: number }[])
    .map(({ packetBytes, weight }) => `${weight} of ${packetBytes} bytes`)
    .join(', ');

/** Members of an object as 'this as that'. */
export const pairs: WriteValue = (value) =>
  listOf(Object.entries(value as Bag).map(([key, member]) => `${key} as ${String(member)}`));

const ranked =
  (write: (entry: Bag, design: Design) => string): WriteValue =>
  (value, design) =>
    inRankOrder(value as { readonly [id: string]: Bag & { readonly rank: string } })
      .map(([, entry]) => write(entry, design))
      .join('; ') || 'none';

/** Proposals in their order, each by its algorithms. */
export const proposals = ranked((entry) =>
  [
    entry['encryption'],
    entry['keyBits'] === undefined ? undefined : `${String(entry['keyBits'])} bits`,
    entry['integrity'],
    entry['prf'] === undefined ? undefined : `PRF ${String(entry['prf'])}`,
    entry['group'] === undefined ? undefined : `group ${String(entry['group'])}`,
  ]
    .filter((part) => part !== undefined)
    .join(', '),
);

export const selectors = ranked((entry) =>
  [
    `${String(entry['local'])} to ${String(entry['remote'])}`,
    entry['udpPort'] === undefined ? undefined : `UDP ${String(entry['udpPort'])}`,
  ]
    .filter((part) => part !== undefined)
    .join(', '),
);

export const landings = ranked((entry, design) => elementName(design, 'links', String(entry['landing'])));
