import type { Design } from '../../engine/model/design.ts';
import { ipVersions, type IpVersion } from '../../engine/reference/ip.ts';
import { sendOf, sends } from './trace-sends.ts';
import {
  questionFields,
  type FieldProblem,
  type QuestionField,
  type TraceQuestion,
  type TraceSource,
} from './trace-question.ts';

/** A probe as the address holds it, by field; '' where it holds nothing. */
export type AddressTexts = { readonly [field in QuestionField]?: string };

export interface ReadQuestion {
  readonly question: TraceQuestion;
  readonly problems: readonly FieldProblem[];
}

const usualSend = 'ping';

/** A source as one readable word: a host's id, or device/port, with @1 or @2 for a member of a pair. */
export const sourceText = (source: TraceSource): string =>
  'host' in source
    ? source.host
    : `${source.device}/${source.port}${source.member === undefined ? '' : `@${source.member}`}`;

/** An id of the design, or the id of the only device with this name. */
const deviceIdOf = (design: Design, text: string): string | undefined => {
  if (design.devices[text] !== undefined) return text;
  const named = Object.entries(design.devices).filter(([, { name }]) => name === text);
  return named.length === 1 ? named[0]![0] : undefined;
};

const sourceOf = (design: Design, text: string): TraceSource | undefined => {
  const [, name = '', port, member] = /^([^/]+)(?:\/([^@]+)(?:@([12]))?)?$/.exec(text) ?? [];
  const id = deviceIdOf(design, name);
  const device = id === undefined ? undefined : design.devices[id];
  if (id === undefined || device === undefined) return undefined;
  if (port === undefined) return device.kind === 'host' ? { host: id } : undefined;
  if (device.ports[port] === undefined) return undefined;
  return { device: id, port, ...(member === undefined ? {} : { member: Number(member) as 1 | 2 }) };
};

const hostOf = (design: Design, text: string): string | undefined => {
  const id = deviceIdOf(design, text);
  return id !== undefined && design.devices[id]!.kind === 'host' ? id : undefined;
};

/** Reads a word that has to be one of a few. */
const oneOf =
  <Value>(words: { readonly [word: string]: Value }) =>
  (text: string): Value | undefined =>
    Object.hasOwn(words, text) ? words[text] : undefined;
const yesOrNo = oneOf({ yes: true, no: false });
const isLearned = oneOf({ learned: true, unknown: false });
const version = oneOf<IpVersion>({ 4: 'ipv4', 6: 'ipv6' });

// Far beyond what any field allows: longer numbers are slips, and the engine says what each field does allow.
const wholeNumber = (text: string): number | undefined => (/^\d{1,6}$/.test(text) ? Number(text) : undefined);

/** Reads '110' or '110-20', the outer tag first; 'none' is a frame that is sent without. */
export const readTags = (text: string): readonly number[] | undefined => {
  if (text === 'none') return [];
  const tags = text.split(/[-, ]+/).map(wholeNumber);
  return tags.every((tag) => tag !== undefined) ? tags : undefined;
};
export const writeTags = (tags: readonly number[]): string => (tags.length === 0 ? 'none' : tags.join('-'));

/** The probe in an address. What can't be read is named, and left out of the question. */
export const readQuestion = (design: Design, texts: AddressTexts): ReadQuestion => {
  const problems: FieldProblem[] = [];
  const read = <Value>(
    field: QuestionField,
    reader: (text: string) => Value | undefined,
    expected: string,
  ): Value | undefined => {
    const value = texts[field] ?? '';
    if (value === '') return undefined;
    const found = reader(value);
    if (found === undefined) problems.push({ field, value, expected });
    return found;
  };
  const send =
    read(
      'send',
      (text) => (sendOf(text) === undefined ? undefined : text),
      `one of ${sends.map(({ id }) => id).join(', ')}`,
    ) ?? usualSend;
  const kind = sendOf(send)!.to;
  const from = read(
    'from',
    (text) => sourceOf(design, text),
    'a host of this design, or a port as device/port; it may have been removed or renamed since',
  );
  const to =
    kind === 'prescribed'
      ? undefined
      : kind === 'group'
        ? read('to', (text) => text, 'a group')
        : read(
            'to',
            (text) => hostOf(design, text),
            'a host of this design; it may have been removed or renamed since',
          );
  const versions = sendOf(send)!.versions;
  const asked = read('ip', version, '4 or 6');
  if (asked !== undefined && versions.length > 0 && !versions.includes(asked))
    problems.push({
      field: 'ip',
      value: texts.ip!,
      expected: `${versions.map((one) => one.slice(-1)).join(' or ')}: ${sendOf(send)!.name} has no other`,
    });
  const bytes = read('bytes', wholeNumber, 'a whole number of bytes');
  const dontFragment = read('df', yesOrNo, 'yes or no');
  const hopLimit = read('ttl', wholeNumber, 'a whole number of hops from 1 to 255');
  const tags = read('tags', readTags, 'one VLAN, two as outer-inner such as 200-110, or none');
  const learned = read('far', isLearned, 'learned or unknown');
  const question: TraceQuestion = {
    send,
    ...(from === undefined ? {} : { from }),
    ...(to === undefined ? {} : { to }),
    ...(asked === undefined ? {} : { version: asked }),
    ...(bytes === undefined ? {} : { bytes }),
    ...(dontFragment === undefined ? {} : { dontFragment }),
    ...(hopLimit === undefined ? {} : { hopLimit }),
    ...(tags === undefined ? {} : { tags }),
    ...(learned === undefined ? {} : { isLearned: learned }),
  };
  return { question, problems };
};

/** What the address holds for a question: each field, '' for those that are as the send has them. */
export const writeQuestion = (question: TraceQuestion): { readonly [field in QuestionField]: string } => {
  const { from, to, send, bytes, dontFragment, hopLimit, tags, isLearned: learned } = question;
  return {
    from: from === undefined ? '' : sourceText(from),
    to: to ?? '',
    send,
    ip: question.version === undefined ? '' : String(ipVersions.indexOf(question.version) === 0 ? 4 : 6),
    bytes: bytes === undefined ? '' : String(bytes),
    df: dontFragment === undefined ? '' : dontFragment ? 'yes' : 'no',
    ttl: hopLimit === undefined ? '' : String(hopLimit),
    tags: tags === undefined ? '' : writeTags(tags),
    far: learned === undefined ? '' : learned ? 'learned' : 'unknown',
  };
};

const prefix = 'vs-';
/** The name in the address of a field of the second probe, which says only what is different. */
export const variedName = (field: QuestionField): string => `${prefix}${field}`;

export const textsIn = (
  valueOf: (name: string) => string,
  nameOf: (field: QuestionField) => string = (field) => field,
): AddressTexts => Object.fromEntries(questionFields.map((field) => [field, valueOf(nameOf(field))]));

/** The second probe's texts: the first one's with what is different; undefined where nothing is. */
export const variedTexts = (valueOf: (name: string) => string): AddressTexts | undefined => {
  const different = Object.entries(textsIn(valueOf, variedName)).filter(([, text]) => text !== '');
  if (different.length === 0) return undefined;
  return { ...textsIn(valueOf), ...Object.fromEntries(different) };
};

/** What to write for the second probe so that it says only where it differs from the first; all '' takes it away. */
export const writeVariation = (
  first: TraceQuestion,
  second: TraceQuestion | undefined,
): { readonly [name: string]: string } => {
  const [own, other] = [writeQuestion(first), second === undefined ? undefined : writeQuestion(second)];
  return Object.fromEntries(
    questionFields.map((field) => [
      variedName(field),
      other === undefined || other[field] === own[field] ? '' : other[field],
    ]),
  );
};
