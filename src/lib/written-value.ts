/** What a typed text stands for, or what should have been typed instead. */
export type Reading<T> =
  { readonly ok: true; readonly value: T } | { readonly ok: false; readonly wayOut: string };

/** How a value of the model is written in a cell and read from it. An empty cell is never read: it means unknown. */
export interface Writing<T> {
  readonly write: (value: T) => string;
  readonly read: (text: string) => Reading<T>;
  /** Stands after the value. */
  readonly unit?: string;
  readonly inputMode?: 'text' | 'numeric' | 'decimal';
}

export const reading = <T>(value: T): Reading<T> => ({ ok: true, value });
export const unreadable = <T>(wayOut: string): Reading<T> => ({ ok: false, wayOut });

export const plainText: Writing<string> = { write: (value) => value, read: reading };

/** Whole numbers; bounds are the schema's. */
export const wholeNumber = (unit?: string): Writing<number> => ({
  write: String,
  read: (text) =>
    /^\d{1,15}$/.test(text) ? reading(Number(text)) : unreadable('type a whole number, digits only'),
  inputMode: 'numeric',
  ...(unit === undefined ? {} : { unit }),
});

/** Comma, semicolon or space between addresses, prefixes and the like. */
export const textList: Writing<readonly string[]> = {
  write: (values) => values.join(', '),
  read: (text) => reading(text.split(/[,;\s]+/).filter((part) => part !== '')),
};

const numbersOf = (text: string): readonly number[] | undefined => {
  const parts = text.split(/[,;\s]+/).filter((part) => part !== '');
  return parts.every((part) => /^\d{1,9}$/.test(part)) ? parts.map(Number) : undefined;
};

/** Whole numbers with commas between them, such as UDP ports. */
export const numberList: Writing<readonly number[]> = {
  write: (values) => values.join(', '),
  read: (text) => {
    const numbers = numbersOf(text);
    return numbers === undefined
      ? unreadable('type whole numbers with commas between them, such as 500, 4500')
      : reading(numbers);
  },
};

/** A number that may have a fraction, as a person types it: with a point or a comma. */
export const decimal = (text: string): number | undefined =>
  /^\d+([.,]\d+)?$/.test(text) ? Number(text.replace(',', '.')) : undefined;

/** The whole number that a decimal times a factor comes to; undefined where a fraction is left. */
export const wholeTimes = (value: number, factor: number): number | undefined => {
  const product = value * factor;
  const whole = Math.round(product);
  return Math.abs(product - whole) <= 1e-9 * Math.max(1, product) ? whole : undefined;
};

/** EtherTypes, written in hexadecimal as the standards do. */
export const etherType: Writing<number> = {
  write: (value) => `0x${value.toString(16).padStart(4, '0')}`,
  read: (text) =>
    /^(0x)?[0-9a-f]{4}$/i.test(text)
      ? reading(Number.parseInt(text.replace(/^0x/i, ''), 16))
      : unreadable('type an EtherType of four hexadecimal digits such as 0x88f7'),
};

/** What an access link puts between Ethernet and IP: PPPoE, or so many bytes. */
export const accessOverhead: Writing<'pppoe' | number> = {
  write: (value) => (value === 'pppoe' ? 'PPPoE' : `${value} B`),
  read: (text) => {
    if (/^pppoe$/i.test(text)) return reading('pppoe');
    const bytes = /^(\d{1,5})(\s*B)?$/i.exec(text)?.[1];
    return bytes === undefined ? unreadable('type PPPoE, or bytes from 0 to 256') : reading(Number(bytes));
  },
};
