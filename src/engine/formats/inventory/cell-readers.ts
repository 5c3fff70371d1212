/** What a cell's text stands for, or what should stand there. */
export type CellReading =
  { readonly ok: true; readonly value: unknown } | { readonly ok: false; readonly expected: string };

/** Reads one kind of cell and writes it back. Empty cells are not read: they leave alone what is there. */
export interface CellReader {
  readonly read: (text: string) => CellReading;
  readonly write: (value: unknown) => string;
}

const good = (value: unknown): CellReading => ({ ok: true, value });
const bad = (expected: string): CellReading => ({ ok: false, expected });

export const line: CellReader = { read: good, write: String };
export const words: CellReader = { read: good, write: String };
export const address: CellReader = { read: good, write: String };

/** Digits only; the bounds are the model's. */
export const whole = (): CellReader => ({
  read: (text) => (/^\d{1,12}$/.test(text) ? good(Number(text)) : bad('a whole number, digits only')),
  write: String,
});

/** Mbit/s, kept as bit/s. */
export const speed: CellReader = {
  read: (text) =>
    /^\d{1,8}([.,]\d{1,6})?$/.test(text)
      ? good(Math.round(Number(text.replace(',', '.')) * 1_000_000))
      : bad('Mbit/s without a unit, such as 1000'),
  write: (value) => String(Number(value) / 1_000_000),
};

export const yesNo: CellReader = {
  read: (text) =>
    /^(yes|y|true|1)$/i.test(text)
      ? good(true)
      : /^(no|n|false|0)$/i.test(text)
        ? good(false)
        : bad('yes or no'),
  write: (value) => (value === true ? 'yes' : 'no'),
};

const parts = (text: string): readonly string[] => text.split(/[\s,;|]+/).filter(Boolean);

export const addressList: CellReader = {
  read: (text) => good(parts(text)),
  write: (value) => (value as readonly string[]).join(' '),
};

/** 'all', or numbers and ranges. */
export const vlans: CellReader = {
  read: (text) => {
    if (/^all$/i.test(text)) return good('all');
    const found = new Set<number>();
    for (const part of parts(text)) {
      const [, from, to] = /^(\d{1,4})(?:-(\d{1,4}))?$/.exec(part) ?? [];
      if (from === undefined || (to !== undefined && Number(to) < Number(from)))
        return bad('all, or VLANs and ranges such as 110 120-130');
      for (let vlan = Number(from); vlan <= Number(to ?? from); vlan += 1) found.add(vlan);
    }
    return good([...found].sort((a, b) => a - b));
  },
  write: (value) => {
    if (value === 'all') return 'all';
    const numbers = [...(value as readonly number[])].sort((a, b) => a - b);
    const ranges: [number, number][] = [];
    for (const vlan of numbers) {
      const last = ranges.at(-1);
      if (last !== undefined && vlan === last[1] + 1) last[1] = vlan;
      else ranges.push([vlan, vlan]);
    }
    return ranges.map(([from, to]) => (from === to ? `${from}` : `${from}-${to}`)).join(' ');
  },
};

/** With commas between them words may have spaces in them. */
const listed = (text: string): readonly string[] =>
  (/[,;|]/.test(text) ? text.split(/[,;|]+/) : text.split(/\s+/)).filter((part) => part.trim() !== '');

const plain = (text: string): string => text.toLowerCase().replace(/[^a-z0-9]/g, '');

/** One of some words, or several of them; capitals, spaces and dashes don't matter. */
export const choice = (options: readonly string[], several = false): CellReader => ({
  read: (text) => {
    const expected = several ? `any of ${options.join(', ')}` : `one of ${options.join(', ')}`;
    const read = (several ? listed(text) : [text]).map((part) =>
      options.find((option) => plain(option) === plain(part)),
    );
    if (read.some((option) => option === undefined)) return bad(expected);
    return good(several ? [...new Set(read)] : read[0]);
  },
  write: (value) => (several ? (value as readonly string[]).join(' ') : String(value)),
});

/** A head without capitals, spaces and signs, as heads are compared. */
export const plainHead = plain;
