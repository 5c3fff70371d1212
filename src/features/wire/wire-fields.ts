import { milliseconds } from '../../lib/duration-text.ts';
import { rate } from '../../lib/rate-text.ts';
import { percent } from '../../lib/share-text.ts';
import { reading, unreadable, type Reading, type Writing } from '../../lib/written-value.ts';
import {
  espIntegrities,
  espIntegrityIds,
  espTransformIds,
  espTransforms,
  type EspIntegrityId,
} from '../../engine/reference/esp.ts';
import { STANDARD_PAYLOAD_BYTES } from '../../engine/reference/ethernet.ts';
import { IP_HEADER_BYTES, ipVersions, LARGEST_IP_PACKET_BYTES } from '../../engine/reference/ip.ts';
import { TCP_LARGEST_WINDOW_BYTES, TCP_UNSCALED_WINDOW_BYTES } from '../../engine/reference/tcp.ts';
import { frameMixFromLetters, MOST_MIX_ENTRIES } from '../../engine/wire/frame-mix.ts';
import {
  LEAST_TRANSPORT_MTU_BYTES,
  MOST_TRANSPORT_MTU_BYTES,
} from '../../engine/wire/largest-inner-packet.ts';
import {
  LEAST_ACCESS_PAYLOAD_BYTES,
  MOST_ACCESS_OVERHEAD_BYTES,
  MOST_ACCESS_PAYLOAD_BYTES,
} from '../../engine/wire/stack.ts';
import { MOST_RTT_US } from '../../engine/wire/tcp-goodput.ts';
import { MOST_RATE_BPS } from '../../engine/wire/wire-rate-of.ts';

/** One thing that can be typed or chosen; its text stands in its cell and, unless it is the initial one, in the address. */
export interface WireField<T> {
  readonly label: string;
  readonly initial: string;
  readonly write: (value: T) => string;
  readonly read: (text: string) => Reading<T>;
}

export interface Choice<T extends string> {
  readonly value: T;
  readonly label: string;
}

export interface ChoiceField<T, Text extends string> extends WireField<T> {
  readonly options: readonly Choice<Text>[];
}

const wholeNumber = (
  label: string,
  initial: number,
  least: number,
  most: number,
): WireField<number> & { readonly least: number; readonly most: number } => ({
  label,
  least,
  most,
  initial: String(initial),
  write: String,
  read: (text) =>
    /^\d{1,15}$/.test(text) && Number(text) >= least && Number(text) <= most
      ? reading(Number(text))
      : unreadable(`type a whole number from ${least} to ${most}`),
});

/** A value with a way of writing of its own, held to bounds that are written the same way. */
const bounded = (
  label: string,
  { write, read, unit }: Writing<number>,
  initial: number,
  least: number,
  most: number,
): WireField<number> => ({
  label,
  initial: write(initial),
  write,
  read: (text) => {
    const answer = read(text);
    if (!answer.ok || (answer.value >= least && answer.value <= most)) return answer;
    const named = (value: number) => (unit === undefined ? write(value) : `${write(value)} ${unit}`);
    return unreadable(`type ${named(least)} to ${named(most)}`);
  },
});

const oneOf = <const T extends string>(
  label: string,
  options: readonly Choice<T>[],
  initial: NoInfer<T>,
): ChoiceField<T, T> => ({
  label,
  options,
  initial,
  write: (value) => value,
  read: (text) => {
    const option = options.find(({ value }) => value === text);
    return option === undefined
      ? unreadable(`choose one of ${options.map(({ value }) => value).join(', ')}`)
      : reading(option.value);
  },
});

const yesOrNo = (label: string, initial: boolean): WireField<boolean> => ({
  label,
  initial: initial ? 'yes' : 'no',
  write: (value) => (value ? 'yes' : 'no'),
  read: (text) =>
    text === 'yes' || text === 'no' ? reading(text === 'yes') : unreadable('choose yes or no'),
});

const ipLabels = { ipv4: 'IPv4', ipv6: 'IPv6' } as const;
const ipOptions = ipVersions.map((value) => ({ value, label: ipLabels[value] }));

const tagCounts = [0, 1, 2] as const;

/** Everything the calculator asks, in the order of its form. */
export const wireFields = {
  packet: wholeNumber(
    'Inner packet',
    STANDARD_PAYLOAD_BYTES,
    IP_HEADER_BYTES.ipv4,
    LARGEST_IP_PACKET_BYTES.ipv6,
  ),
  ip: oneOf('Inner IP', ipOptions, 'ipv4'),
  tags: {
    label: 'Inner tags',
    options: tagCounts.map((count) => ({ value: String(count), label: String(count) })),
    initial: '0',
    write: String,
    read: (text) => {
      const count = tagCounts.find((each) => String(each) === text);
      return count === undefined ? unreadable('choose 0, 1 or 2') : reading(count);
    },
  } satisfies ChoiceField<0 | 1 | 2, string>,
  vxlan: oneOf('VXLAN over', [...ipOptions, { value: 'none', label: 'None' }], 'ipv4'),
  esp: oneOf(
    'ESP',
    [
      { value: 'none', label: 'None' },
      { value: 'tunnel', label: 'Tunnel' },
      { value: 'transport', label: 'Transport' },
    ],
    'tunnel',
  ),
  transform: oneOf(
    'Transform',
    espTransformIds.map((value) => ({ value, label: espTransforms[value].name })),
    'aes-gcm-16',
  ),
  integrity: oneOf<EspIntegrityId | 'none'>(
    'Integrity',
    [
      { value: 'none', label: 'none' },
      ...espIntegrityIds.map((value) => ({ value, label: espIntegrities[value].name })),
    ],
    'none',
  ),
  nat: yesOrNo('NAT traversal', false),
  outer: oneOf('ESP outer IP', ipOptions, 'ipv4'),
  access: {
    label: 'Access overhead',
    initial: 'none',
    write: String,
    read: (text) => {
      if (text === 'none' || text === 'pppoe') return reading(text);
      const bytes = /^\d{1,3}$/.test(text) ? Number(text) : Infinity;
      return bytes <= MOST_ACCESS_OVERHEAD_BYTES
        ? reading(bytes)
        : unreadable(`type none, pppoe, or a whole number from 0 to ${MOST_ACCESS_OVERHEAD_BYTES}`);
    },
  } satisfies WireField<'none' | 'pppoe' | number>,
  payload: wholeNumber(
    'Access link payload',
    STANDARD_PAYLOAD_BYTES,
    LEAST_ACCESS_PAYLOAD_BYTES,
    MOST_ACCESS_PAYLOAD_BYTES,
  ),
  mtu: wholeNumber(
    'Transport MTU',
    STANDARD_PAYLOAD_BYTES,
    LEAST_TRANSPORT_MTU_BYTES,
    MOST_TRANSPORT_MTU_BYTES,
  ),
  link: bounded('Link rate', rate, 1_000_000_000, 1, MOST_RATE_BPS),
  mix: oneOf(
    'Frame mix',
    [
      { value: 'one', label: 'One size' },
      { value: 'imix', label: 'Simple IMIX' },
      { value: 'letters', label: 'Letters' },
    ],
    'one',
  ),
  letters: {
    label: 'Mix letters',
    initial: 'aaaaaaaddddg',
    write: (letters) => letters,
    // RFC 6985 section 3 and section 4. Where z lies depends on the stack; here it only has to be a letter.
    read: (text) =>
      text.length <= MOST_MIX_ENTRIES && frameMixFromLetters(text, STANDARD_PAYLOAD_BYTES).ok
        ? reading(text)
        : unreadable(
            `type 1 to ${MOST_MIX_ENTRIES} letters from a to j, or z for the host MTU, such as aaaaaaaddddg`,
          ),
  } satisfies WireField<string>,
  timestamps: yesOrNo('TCP timestamps', true),
  window: wholeNumber('TCP window', TCP_UNSCALED_WINDOW_BYTES, 1, TCP_LARGEST_WINDOW_BYTES),
  rtt: bounded('Round trip', milliseconds, 20_000, 1, MOST_RTT_US),
  loss: bounded('Loss', percent, 0, 0, 1_000_000),
} as const;

export type FieldName = keyof typeof wireFields;
export const fieldNames = Object.keys(wireFields) as readonly FieldName[];

type ValueOf<Field> = Field extends WireField<infer T> ? T : never;
/** What was typed and chosen, read: bytes, bits per second, microseconds, losses per million. */
export type WireInputs = { readonly [Name in FieldName]: ValueOf<(typeof wireFields)[Name]> };
/** The same as it stands in cells and in the address. */
export type WireTexts = { readonly [Name in FieldName]: string };

/** Every field by name as one that writes and reads some value. */
const fieldOf = (name: FieldName) => wireFields[name] as WireField<unknown>;

/** What stands in the cells at an address: its texts, and initial ones for what it doesn't mention. */
export const textsFrom = (valueOf: (name: string) => string): WireTexts =>
  mapFields((name) => valueOf(name) || wireFields[name].initial);

export const textsOf = (inputs: WireInputs): WireTexts =>
  mapFields((name) => fieldOf(name).write(inputs[name]));

/** What an address has to say for these texts: nothing for initial ones. */
export const searchValuesOf = (texts: Partial<WireTexts>): Readonly<Record<string, string>> =>
  Object.fromEntries(
    fieldNames.flatMap((name) => {
      const text = texts[name];
      return text === undefined ? [] : [[name, text === wireFields[name].initial ? '' : text]];
    }),
  );

/** What is wrong with a text in a field: field, value and way out; undefined where nothing is. */
export function textProblem(name: FieldName, text: string): string | undefined {
  const answer = fieldOf(name).read(text);
  if (answer.ok) return undefined;
  const { label } = wireFields[name];
  return text === '' ? `${label} is empty: ${answer.wayOut}.` : `${label} ${text}: ${answer.wayOut}.`;
}

export type FieldProblems = { readonly [Name in FieldName]?: string };

export type ReadTexts =
  | { readonly ok: true; readonly inputs: WireInputs }
  | { readonly ok: false; readonly problems: FieldProblems };

export function readTexts(texts: WireTexts): ReadTexts {
  const problems = fieldNames.flatMap((name) => {
    const problem = textProblem(name, texts[name]);
    return problem === undefined ? [] : [[name, problem] as const];
  });
  if (problems.length > 0) return { ok: false, problems: Object.fromEntries(problems) };
  const values = fieldNames.map((name) => {
    const answer = fieldOf(name).read(texts[name]);
    return [name, answer.ok ? answer.value : undefined] as const;
  });
  return { ok: true, inputs: Object.fromEntries(values) as WireInputs };
}

const mapFields = <T>(valueOf: (name: FieldName) => T) =>
  Object.fromEntries(fieldNames.map((name) => [name, valueOf(name)])) as { readonly [Name in FieldName]: T };
