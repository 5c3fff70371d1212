import { z } from 'zod';
import type { DeepReadonly } from '../model/design.ts';
import { hostFaces } from '../model/devices.ts';
import { protocols } from '../model/intent.ts';
import {
  cidrSchema,
  durationUsSchema,
  idSchema,
  ipSchema,
  mtuSchema,
  nameSchema,
  vlanSchema,
  vniSchema,
} from '../model/scalars.ts';
import { refuse, type Answer, type Problem } from '../wire/problem.ts';
import { contradictions } from './contradictions.ts';

/** Bounds that keep one form answerable at once; a larger plan is several. */
export const MOST_SITES = 120;
export const MOST_SEGMENTS = 12;
export const MOST_TRANSPORTS = 4;
export const MOST_TUNNELS = 1_000;

const oneOf = <const T extends readonly string[]>(values: T) => z.enum(values, `one of ${values.join(', ')}`);
const yesOrNo = z.boolean('true or false');
const listOf = <S extends z.ZodType>(item: S, least: number, most: number, what: string) => {
  const error = `${least} to ${most} ${what}`;
  return z.array(item, error).min(least, error).max(most, error);
};

export const gatewayKinds = ['firewall', 'ha-pair', 'router'] as const;
export const topologyKinds = ['pair', 'hub', 'chain', 'mesh'] as const;

/** How a site's WAN port meets a transport. */
const landingSchema = z.strictObject({
  transport: idSchema,
  address: ipSchema.optional(),
  /** The provider changes the outside address. */
  dynamic: yesOrNo.optional(),
  /** `forwarded`: the router in front hands UDP 500 and 4500 on. */
  nat: oneOf(['none', 'hides', 'forwarded']).optional(),
  pppoe: yesOrNo.optional(),
});

export const sitePlanSchema = z.strictObject({
  /** What the rest of the form calls it. */
  key: idSchema,
  name: nameSchema,
  /** Short form in the names of its devices; made from the name where absent. */
  code: z
    .string()
    .regex(/^[a-z0-9][a-z0-9-]{0,11}$/, 'expected 1 to 12 of a-z, 0-9 or dash, such as gul')
    .optional(),
  gateway: oneOf(gatewayKinds),
  landings: listOf(landingSchema, 1, MOST_TRANSPORTS, 'transports on which the site lands'),
});

const transportPlanSchema = z.strictObject({
  key: idSchema,
  name: nameSchema,
  /** Id of a transport that the design has already; what the design says of it stands. */
  existing: idSchema.optional(),
  kind: oneOf(['internet', 'private-routed', 'own-routed']),
  /** Absent: only a network of one's own is. */
  trusted: yesOrNo.optional(),
  mtu: mtuSchema.optional(),
  latencyUs: durationUsSchema.optional(),
});

const segmentPlanSchema = z.strictObject({
  key: idSchema,
  name: nameSchema,
  /** Absent: a free one, the same at each site. */
  vlan: vlanSchema.optional(),
  subnet: cidrSchema.optional(),
  /** Largest packet that it is committed to; absent: what fits, 1,500 bytes at most. */
  mtu: mtuSchema.optional(),
  protocols: listOf(oneOf(protocols), 1, protocols.length, 'protocols'),
  mustBeFiltered: yesOrNo.optional(),
  /** EtherTypes that a filter has to let through for real-time Ethernet. */
  etherTypes: listOf(
    z
      .int()
      .min(0x0600, 'expected an EtherType from 0x0600')
      .max(0xffff, 'expected an EtherType up to 0xffff'),
    1,
    8,
    'EtherTypes',
  ).optional(),
  /** Keys of the sites that have it; absent: all. */
  sites: listOf(idSchema, 2, MOST_SITES, 'sites').optional(),
  /** What its sample hosts look like. */
  face: oneOf(hostFaces).optional(),
});

const topologySchema = z.discriminatedUnion(
  'kind',
  [
    z.strictObject({ kind: z.literal('pair') }),
    z.strictObject({ kind: z.literal('hub'), hub: idSchema }),
    /** In the order of the sites. */
    z.strictObject({ kind: z.literal('chain') }),
    z.strictObject({ kind: z.literal('mesh') }),
  ],
  `kind ${topologyKinds.join(', ')}`,
);

const fields = z.strictObject({
  sites: listOf(sitePlanSchema, 2, MOST_SITES, 'sites'),
  transports: listOf(transportPlanSchema, 1, MOST_TRANSPORTS, 'transports'),
  segments: listOf(segmentPlanSchema, 1, MOST_SEGMENTS, 'segments'),
  topology: topologySchema,
  encrypted: yesOrNo,
  authentication: oneOf(['certificate', 'pre-shared-key']).optional(),
  /** Ends of associations identify themselves as their gateway's name in this domain. */
  domain: z
    .string()
    .regex(/^[a-z0-9]([a-z0-9.-]{0,58}[a-z0-9])?$/, 'expected a domain such as saltmarsh.example')
    .optional(),
  pools: z
    .strictObject({
      loopbacks: cidrSchema.optional(),
      vnis: z.strictObject({ from: vniSchema, to: vniSchema }).optional(),
    })
    .optional(),
  /** One host for each site and segment. */
  sampleHosts: yesOrNo.optional(),
  /** Notes at the top left of the sheet, which takes room that small sheets may not have. */
  standingNotes: yesOrNo.optional(),
});

/** What the assistant asks: sites, segments, transports, how they hang together. */
export const stretchFormSchema = fields;
export type StretchForm = DeepReadonly<z.output<typeof fields>>;
export type SitePlan = StretchForm['sites'][number];
export type LandingPlan = SitePlan['landings'][number];
export type SegmentPlan = StretchForm['segments'][number];
export type TransportPlan = StretchForm['transports'][number];
export type Topology = StretchForm['topology'];

/** Reads a form from outside; refuses it with every field that is wrong, its value and the way out. */
export const parseStretchForm = (input: unknown): Answer<{ readonly form: StretchForm }> => {
  const parsed = fields.safeParse(input);
  if (!parsed.success) return refuse(parsed.error.issues.flatMap((issue) => problemsOf(issue, input)));
  const problems = contradictions(parsed.data);
  return problems.length > 0 ? refuse(problems) : { ok: true, form: parsed.data };
};

/** The problems of one part of a form alone, such as a new site, as fields below `at`. */
export const problemsOfIssues = (
  issues: readonly z.core.$ZodIssue[],
  input: unknown,
  at: string,
): readonly Problem[] =>
  issues
    .flatMap((issue) => problemsOf(issue, input))
    .map((problem) => ({ ...problem, field: `${at}.${problem.field}` }));

const problemsOf = (issue: z.core.$ZodIssue, input: unknown): readonly Problem[] => {
  if (issue.code === 'unrecognized_keys')
    return issue.keys.map((key) => ({
      field: [...issue.path, key].join('.'),
      value: valueAt(input, [...issue.path, key]),
      expected: 'no field of this name: leave it out or correct its spelling',
    }));
  const expected = issue.code === 'invalid_type' && issue.expected === 'object' ? 'an object' : issue.message;
  return [
    {
      field: issue.path.join('.') || 'form',
      value: valueAt(input, issue.path),
      expected: expected.replace(/^expected /, ''),
    },
  ];
};

const valueAt = (input: unknown, path: readonly PropertyKey[]): unknown =>
  path.reduce<unknown>(
    (value, key) =>
      typeof value === 'object' && value !== null && Object.hasOwn(value, key)
        ? (value as Record<PropertyKey, unknown>)[key]
        : undefined,
    input,
  );
