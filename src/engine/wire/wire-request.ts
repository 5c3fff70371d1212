import { z } from 'zod';
import { espIntegrityIds, espTransformIds } from '../reference/esp.ts';
import { ipVersions, LARGEST_IP_PACKET_BYTES } from '../reference/ip.ts';
import { TCP_LARGEST_WINDOW_BYTES } from '../reference/tcp.ts';
import { MOST_MIX_ENTRIES, MOST_MIX_WEIGHT, mixProblems } from './frame-mix.ts';
import { LEAST_TRANSPORT_MTU_BYTES, MOST_TRANSPORT_MTU_BYTES } from './largest-inner-packet.ts';
import { wholeNumberFrom, type Answer, type Problem } from './problem.ts';
import {
  bareStack,
  LEAST_ACCESS_PAYLOAD_BYTES,
  MOST_ACCESS_OVERHEAD_BYTES,
  MOST_ACCESS_PAYLOAD_BYTES,
  stackProblems,
  type Stack,
} from './stack.ts';
import { MOST_RTT_US } from './tcp-goodput.ts';
import { MOST_PACKETS_PER_SECOND, MOST_RATE_BPS } from './wire-rate-of.ts';

const wholeNumber = (least: number, most: number) => {
  const error = wholeNumberFrom(least, most);
  return z.int(error).min(least, error).max(most, error);
};
const oneOf = <const T extends readonly string[]>(values: T) => z.enum(values, `one of ${values.join(', ')}`);
const yesOrNo = z.boolean('true or false');

const tagCountSchema = z.union([z.literal(0), z.literal(1), z.literal(2)], '0, 1 or 2');
const ipVersionSchema = oneOf(ipVersions);

const espSuite = {
  transform: oneOf(espTransformIds as readonly [(typeof espTransformIds)[number]]),
  integrity: oneOf(espIntegrityIds as readonly [(typeof espIntegrityIds)[number]]).optional(),
  natTraversal: yesOrNo.default(false),
};
const espSchema = z.discriminatedUnion(
  'mode',
  [
    z.strictObject({ mode: z.literal('none') }),
    z.strictObject({ mode: z.literal('tunnel'), ...espSuite, outerIp: ipVersionSchema }),
    z.strictObject({ mode: z.literal('transport'), ...espSuite }),
  ],
  'mode none, tunnel or transport',
);

const accessOverheadError = `none, pppoe, or ${wholeNumberFrom(0, MOST_ACCESS_OVERHEAD_BYTES)}`;

/** What is put around an inner packet, as it is written in a request; what is left out adds nothing. */
export const stackSchema = z.strictObject({
  innerTags: tagCountSchema.default(bareStack.innerTags),
  vxlanOver: oneOf(['none', ...ipVersions]).default(bareStack.vxlanOver),
  innerFrames: oneOf(['padded', 'as-sent']).default(bareStack.innerFrames),
  esp: espSchema.default({ mode: 'none' }),
  accessOverhead: z
    .union(
      [z.literal('none'), z.literal('pppoe'), z.int().min(0).max(MOST_ACCESS_OVERHEAD_BYTES)],
      accessOverheadError,
    )
    .default(bareStack.accessOverhead),
  accessPayloadBytes: wholeNumber(LEAST_ACCESS_PAYLOAD_BYTES, MOST_ACCESS_PAYLOAD_BYTES).default(
    bareStack.accessPayloadBytes,
  ),
  outerTags: tagCountSchema.default(bareStack.outerTags),
}) satisfies z.ZodType<Stack>;

const trafficSchema = z.strictObject({
  innerRateBps: wholeNumber(0, MOST_RATE_BPS).optional(),
  packetsPerSecond: wholeNumber(0, MOST_PACKETS_PER_SECOND).optional(),
  mix: z
    .array(
      z.strictObject({
        ipBytes: wholeNumber(1, LARGEST_IP_PACKET_BYTES.ipv6),
        weight: wholeNumber(1, MOST_MIX_WEIGHT),
      }),
      `1 to ${MOST_MIX_ENTRIES} packet sizes`,
    )
    .min(1, `1 to ${MOST_MIX_ENTRIES} packet sizes`)
    .max(MOST_MIX_ENTRIES, `1 to ${MOST_MIX_ENTRIES} packet sizes`),
});

const tcpSchema = z.strictObject({
  timestamps: yesOrNo.default(true),
  /** For the limit of a single flow. */
  flow: z
    .strictObject({
      windowBytes: wholeNumber(1, TCP_LARGEST_WINDOW_BYTES),
      rttUs: wholeNumber(1, MOST_RTT_US),
      lossPerMillion: wholeNumber(0, 1_000_000).default(0),
    })
    .optional(),
});

const requestFields = z.strictObject({
  stack: stackSchema,
  innerIpVersion: ipVersionSchema.default('ipv4'),
  innerPacketBytes: wholeNumber(1, LARGEST_IP_PACKET_BYTES.ipv6).optional(),
  transportMtuBytes: wholeNumber(LEAST_TRANSPORT_MTU_BYTES, MOST_TRANSPORT_MTU_BYTES).optional(),
  /** Cut outermost packets that are longer than the transport carries. */
  fragmentOuter: yesOrNo.default(false),
  traffic: trafficSchema.optional(),
  linkBps: wholeNumber(1, MOST_RATE_BPS).optional(),
  tcp: tcpSchema.optional(),
});

/** What a calculator asks: from an inner packet outwards, from a transport's MTU inwards, or both, and rates on demand. */
export const wireRequestSchema = requestFields.superRefine((request, context) => {
  // Out-of-range numbers reach this point already named; each field is named once.
  const named = new Set(context.issues.map((issue) => issue.path?.join('.')));
  for (const problem of contradictions(request)) {
    if (named.has(problem.field)) continue;
    context.addIssue({
      code: 'custom',
      path: problem.field.split('.'),
      message: problem.expected,
      input: problem.value,
    });
  }
});

export type WireRequest = z.output<typeof wireRequestSchema>;
export type WireRequestInput = z.input<typeof wireRequestSchema>;

function contradictions(request: z.output<typeof requestFields>): readonly Problem[] {
  const { innerPacketBytes, transportMtuBytes, traffic, tcp } = request;
  const problems: Problem[] = [...stackProblems(request.stack)];
  if (innerPacketBytes === undefined && transportMtuBytes === undefined && traffic === undefined) {
    problems.push({
      field: 'innerPacketBytes',
      value: undefined,
      expected: 'an inner packet length, or transportMtuBytes, or traffic: one of them at least',
    });
  }
  if (request.fragmentOuter && transportMtuBytes === undefined) {
    problems.push({
      field: 'transportMtuBytes',
      value: undefined,
      expected: 'the MTU at which outermost packets are cut; leave out fragmentOuter to send them whole',
    });
  }
  if (tcp !== undefined && innerPacketBytes === undefined && transportMtuBytes === undefined) {
    problems.push({
      field: 'tcp',
      value: tcp,
      expected: 'innerPacketBytes or transportMtuBytes beside it: they decide the length of a segment',
    });
  }
  if (traffic !== undefined) {
    if ((traffic.innerRateBps === undefined) === (traffic.packetsPerSecond === undefined)) {
      problems.push({
        field: 'traffic.innerRateBps',
        value: traffic.innerRateBps,
        expected: 'either innerRateBps or packetsPerSecond',
      });
    }
    problems.push(...mixProblems('traffic.mix', traffic.mix, request.innerIpVersion));
  }
  return problems;
}

/** Reads a request from outside; refuses it with every field that is wrong, its value and what it should be. */
export function parseWireRequest(input: unknown): Answer<{ request: WireRequest }> {
  const parsed = wireRequestSchema.safeParse(input);
  if (parsed.success) return { ok: true, request: parsed.data };
  return { ok: false, problems: parsed.error.issues.flatMap((issue) => problemsOf(issue, input)) };
}

function problemsOf(issue: z.core.$ZodIssue, input: unknown): readonly Problem[] {
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => ({
      field: [...issue.path, key].join('.'),
      value: valueAt(input, [...issue.path, key]),
      expected: 'no field of this name; leave it out or correct its spelling',
    }));
  }
  const expected = issue.code === 'invalid_type' && issue.expected === 'object' ? 'an object' : issue.message;
  return [{ field: issue.path.join('.') || 'request', value: valueAt(input, issue.path), expected }];
}

function valueAt(input: unknown, path: readonly PropertyKey[]): unknown {
  let value = input;
  for (const key of path) {
    if (typeof value !== 'object' || value === null || !Object.hasOwn(value, key)) return undefined;
    value = (value as Record<PropertyKey, unknown>)[key];
  }
  return value;
}
