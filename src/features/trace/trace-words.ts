import type { Design } from '../../engine/model/design.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { writeQuestion } from './trace-address.ts';
import { fieldLabels, questionFields, type TraceQuestion, type TraceSource } from './trace-question.ts';
import type { TraceResult } from './trace-result.ts';
import { sendOf } from './trace-sends.ts';

/** Where a frame starts, as a person calls it. */
export const sourceName = (design: Design, source: TraceSource): string =>
  'host' in source
    ? nameOf(design, { collection: 'devices', id: source.host })
    : nameOf(design, {
        collection: 'devices',
        id: source.device,
        port: source.port,
        ...(source.member === undefined ? {} : { member: source.member }),
      });

/** From where to where, such as 'gate-ske to ticket-1'; a frame to many names its sender alone. */
export const waysName = (design: Design, { from, to, send }: TraceQuestion): string => {
  const start = from === undefined ? '' : sourceName(design, from);
  if (sendOf(send)?.to !== 'host') return start === '' ? '' : `${start} to all it reaches`;
  if (to === undefined) return start;
  return `${start} to ${nameOf(design, { collection: 'devices', id: to })}`;
};

/** The frame in a few words: 'Full-size TCP, IP 1500 B, DF set'. */
export const frameWords = ({ send }: TraceQuestion, { probe }: Pick<TraceResult, 'probe'>): string => {
  const { packet } = probe;
  const name = sendOf(send)?.name ?? send;
  if (packet.kind !== 'ip') return `${name}, frame of ${packet.frameBytes} B`;
  const version = packet.version === 'ipv6' ? 'IPv6' : 'IP';
  return `${name}, ${version} ${packet.packetBytes} B${packet.dontFragment === true ? ', DF set' : ''}`;
};

const said: { readonly [field: string]: { readonly [text: string]: string } } = {
  df: { yes: 'set', no: 'clear' },
  far: { learned: 'learned', unknown: 'not learned' },
};

/** What is different about the second of two probes: 'Bytes 1396, DF clear'. */
export const variationWords = (first: TraceQuestion, second: TraceQuestion): string => {
  const [own, other] = [writeQuestion(first), writeQuestion(second)];
  return questionFields
    .filter((field) => own[field] !== other[field])
    .map((field) => {
      const text = other[field];
      return `${fieldLabels[field]} ${text === '' ? 'as usual' : (said[field]?.[text] ?? text)}`;
    })
    .join(', ');
};

/** A whole trace as text, a line a hop and the verdict last. */
export const traceText = (title: string, { hops, verdict }: TraceResult): string =>
  [
    title,
    ...hops.map(({ number, sentences }) => `${number}. ${sentences}`),
    `${verdict.what} ${verdict.why}`,
  ].join('\n');
