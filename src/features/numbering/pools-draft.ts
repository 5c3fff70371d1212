import { poolsSchema, type Pools } from '../../contract/numbering.ts';

/** A line as somebody types it; which fields count is its list's matter. */
export interface PoolLine {
  readonly from: string;
  readonly to: string;
  readonly prefix: string;
  readonly for: string;
}
export type PoolListName =
  'vnis' | 'vlans' | 'loopbacks' | 'reservedVnis' | 'reservedVlans' | 'reservedNetworks' | 'networksInUse';
export type PoolDraft = { readonly [list in PoolListName]: readonly PoolLine[] };

export interface PoolList {
  readonly name: PoolListName;
  readonly title: string;
  readonly explains: string;
  readonly isRange: boolean;
  /** The schema's path to it. */
  readonly path: readonly string[];
  readonly fields: readonly {
    readonly field: keyof PoolLine;
    readonly label: string;
    readonly example: string;
  }[];
}

const range = (
  name: PoolListName,
  path: readonly string[],
  title: string,
  explains: string,
  examples: readonly [string, string, string],
): PoolList => ({
  name,
  title,
  explains,
  isRange: true,
  path,
  fields: [
    { field: 'from', label: 'From', example: examples[0] },
    { field: 'to', label: 'To', example: examples[1] },
    { field: 'for', label: 'What for', example: examples[2] },
  ],
});
const prefix = (
  name: PoolListName,
  path: readonly string[],
  title: string,
  explains: string,
  examples: readonly [string, string],
): PoolList => ({
  name,
  title,
  explains,
  isRange: false,
  path,
  fields: [
    { field: 'prefix', label: 'Prefix', example: examples[0] },
    { field: 'for', label: 'What for', example: examples[1] },
  ],
});

export const poolLists: readonly PoolList[] = [
  range('vnis', ['vnis'], 'VNIs', 'Tunnels take the lowest that is free in all designs.', [
    '10001',
    '19999',
    'tunnels',
  ]),
  range('vlans', ['vlans'], 'VLANs', 'Segments take the lowest that is free at their sites.', [
    '110',
    '399',
    'stretched segments',
  ]),
  prefix(
    'loopbacks',
    ['loopbacks'],
    'Loopback addresses',
    'Endpoints take the lowest address that is free in all designs.',
    ['10.255.0.0/16', 'tunnel endpoints'],
  ),
  range('reservedVnis', ['reserved', 'vnis'], 'VNIs kept back', 'Nothing gets these, pool or not.', [
    '10100',
    '10199',
    'laboratory',
  ]),
  range('reservedVlans', ['reserved', 'vlans'], 'VLANs kept back', 'Nothing gets these, pool or not.', [
    '200',
    '209',
    'telephones',
  ]),
  prefix(
    'reservedNetworks',
    ['reserved', 'networks'],
    'Networks kept back',
    'No endpoint gets an address in these.',
    ['10.255.9.0/24', 'next phase'],
  ),
  prefix(
    'networksInUse',
    ['networksInUse'],
    'Networks in use',
    'Networks that exist already, whoever runs them; overlaps with them are shown.',
    ['10.20.0.0/16', 'offices'],
  ),
];

const blank: PoolLine = { from: '', to: '', prefix: '', for: '' };

export const draftOf = ({ vnis, vlans, loopbacks, reserved, networksInUse }: Pools): PoolDraft => {
  const ranges = (of: Pools['vnis']): readonly PoolLine[] =>
    of.map((each) => ({ ...blank, from: String(each.from), to: String(each.to), for: each.for ?? '' }));
  const prefixes = (of: Pools['loopbacks']): readonly PoolLine[] =>
    of.map((each) => ({ ...blank, prefix: each.prefix, for: each.for ?? '' }));
  return {
    vnis: ranges(vnis),
    vlans: ranges(vlans),
    loopbacks: prefixes(loopbacks),
    reservedVnis: ranges(reserved.vnis),
    reservedVlans: ranges(reserved.vlans),
    reservedNetworks: prefixes(reserved.networks),
    networksInUse: prefixes(networksInUse),
  };
};

const withList = (draft: PoolDraft, name: PoolListName, lines: readonly PoolLine[]): PoolDraft => ({
  ...draft,
  [name]: lines,
});
export const addLine = (draft: PoolDraft, name: PoolListName): PoolDraft =>
  withList(draft, name, [...draft[name], blank]);
export const removeLine = (draft: PoolDraft, name: PoolListName, at: number): PoolDraft =>
  withList(
    draft,
    name,
    draft[name].filter((_line, other) => other !== at),
  );
export const changeLine = (
  draft: PoolDraft,
  name: PoolListName,
  at: number,
  change: Partial<PoolLine>,
): PoolDraft =>
  withList(
    draft,
    name,
    draft[name].map((line, other) => (other === at ? { ...line, ...change } : line)),
  );

type Read =
  | { readonly ok: true; readonly pools: Pools }
  /** By list, line and field: what was typed and the way out. */
  | { readonly ok: false; readonly problems: { readonly [field: string]: string } };

const isBlank = (line: PoolLine): boolean => Object.values(line).every((text) => text.trim() === '');

/** Reads what was typed; lines without anything in them don't count. */
export const readDraft = (draft: PoolDraft): Read => {
  const numberOf = (text: string): number | string =>
    /^\d+$/.test(text.trim()) ? Number(text) : text.trim();
  const purpose = (line: PoolLine) => (line.for.trim() === '' ? {} : { for: line.for.trim() });
  const kept = (name: PoolListName): readonly (readonly [number, PoolLine])[] =>
    draft[name].flatMap((line, at) => (isBlank(line) ? [] : [[at, line] as const]));
  const ranges = (name: PoolListName) =>
    kept(name).map(([, line]) => ({ from: numberOf(line.from), to: numberOf(line.to), ...purpose(line) }));
  const prefixes = (name: PoolListName) =>
    kept(name).map(([, line]) => ({ prefix: line.prefix.trim(), ...purpose(line) }));
  const parsed = poolsSchema.safeParse({
    vnis: ranges('vnis'),
    vlans: ranges('vlans'),
    loopbacks: prefixes('loopbacks'),
    reserved: {
      vnis: ranges('reservedVnis'),
      vlans: ranges('reservedVlans'),
      networks: prefixes('reservedNetworks'),
    },
    networksInUse: prefixes('networksInUse'),
  });
  if (parsed.success) return { ok: true, pools: parsed.data };
  const problems: { [field: string]: string } = {};
  for (const { path, message } of parsed.error.issues) {
    const list = poolLists.find(
      (each) => each.path.every((key, at) => path[at] === key) && typeof path[each.path.length] === 'number',
    );
    if (list === undefined) continue;
    const [at, line] = kept(list.name)[path[list.path.length] as number]!;
    const { field, label } =
      list.fields.find((each) => each.field === path[list.path.length + 1]) ?? list.fields[0]!;
    const typed = line[field].trim();
    const wayOut = message.replace(/^expected /, 'type ');
    problems[`${list.name}.${at}.${field}`] ??=
      typed === '' ? `${label} is empty: ${wayOut}.` : `${label} ${typed} does not fit: ${wayOut}.`;
  }
  return { ok: false, problems };
};
