import type { Design } from '../../engine/model/design.ts';
import type { IpVersion } from '../../engine/reference/ip.ts';
import type { Probe, ProbeInput } from '../../engine/trace/probe.ts';
import type { Problem } from '../../engine/wire/problem.ts';
import { sendOf, usualProbe } from './trace-sends.ts';

export type TraceSource = Probe['source'];

/** What is asked of a trace. What is absent is as the send has it by itself. */
export interface TraceQuestion {
  readonly from?: TraceSource;
  /** A host's id; for a multicast datagram its group. */
  readonly to?: string;
  readonly send: string;
  readonly version?: IpVersion;
  /** The IP packet; the frame where no IP is sent. */
  readonly bytes?: number;
  readonly dontFragment?: boolean;
  readonly hopLimit?: number;
  readonly tags?: readonly number[];
  readonly isLearned?: boolean;
}

export const questionFields = ['from', 'to', 'send', 'ip', 'bytes', 'df', 'ttl', 'tags', 'far'] as const;
export type QuestionField = (typeof questionFields)[number];

export const fieldLabels: { readonly [field in QuestionField]: string } = {
  from: 'From',
  to: 'To',
  send: 'What is sent',
  ip: 'IP version',
  bytes: 'Bytes',
  df: 'DF',
  ttl: 'TTL',
  tags: 'Tags',
  far: 'Far MAC',
};

/** Something in the way of an answer: which field, what it holds, what would be right. */
export interface FieldProblem {
  readonly field: QuestionField;
  readonly value: string;
  readonly expected: string;
}

/** What is missing before anything can be sent; undefined when nothing is. */
export const missingField = ({ from, to, send }: TraceQuestion): 'from' | 'to' | undefined => {
  if (from === undefined) return 'from';
  return sendOf(send)?.to === 'host' && to === undefined ? 'to' : undefined;
};

/** The probe that a question asks for; undefined while an end of it is missing. */
export const probeOf = (design: Design, question: TraceQuestion): ProbeInput | undefined => {
  const { from, to, version, bytes, dontFragment, hopLimit, tags, isLearned } = question;
  const send = sendOf(question.send);
  if (from === undefined || send === undefined || missingField(question) !== undefined) return undefined;
  const usual = usualProbe(design, send, {
    source: from,
    ...(to === undefined ? {} : { to }),
    ...(version === undefined || !send.versions.includes(version) ? {} : { version }),
  });
  const { destination, packet } = usual;
  // Bytes that somebody typed are what they want sent: the port's own MTU still holds, the segment's promise doesn't.
  const { sourceMtuBytes, ...rest } =
    packet.kind === 'ip' ? packet : { ...packet, sourceMtuBytes: undefined };
  return {
    ...usual,
    destination:
      destination.kind === 'host' && isLearned !== undefined
        ? { ...destination, learned: isLearned }
        : destination,
    ...(tags === undefined ? {} : { tags: [...tags] }),
    packet:
      rest.kind === 'ip'
        ? {
            ...rest,
            ...(bytes === undefined ? { sourceMtuBytes } : { packetBytes: bytes }),
            ...(dontFragment === undefined ? {} : { dontFragment }),
            ...(hopLimit === undefined ? {} : { hopLimit }),
          }
        : { ...rest, ...(bytes === undefined ? {} : { frameBytes: bytes }) },
  };
};

const fieldOfPath: readonly (readonly [string, QuestionField])[] = [
  ['probe.source', 'from'],
  ['probe.destination.learned', 'far'],
  ['probe.destination', 'to'],
  ['probe.tags', 'tags'],
  ['probe.packet.packetBytes', 'bytes'],
  ['probe.packet.frameBytes', 'bytes'],
  ['probe.packet.hopLimit', 'ttl'],
  ['probe.packet.dontFragment', 'df'],
  ['probe.packet.version', 'ip'],
];

/** What the engine refuses about a probe, by the form's fields. */
export const fieldProblem = ({ field, value, expected }: Problem): FieldProblem => ({
  field: fieldOfPath.find(([path]) => field.startsWith(path))?.[1] ?? 'send',
  value: typeof value === 'string' ? value : JSON.stringify(value),
  expected,
});
