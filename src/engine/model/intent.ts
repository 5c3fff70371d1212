import { z } from 'zod';
import { TCP_LARGEST_WINDOW_BYTES } from '../reference/tcp.ts';
import {
  cidrSchema,
  countSchema,
  durationUsSchema,
  idSchema,
  mtuSchema,
  nameSchema,
  rateBpsSchema,
  textSchema,
  vlanSchema,
} from './scalars.ts';

/** What a segment may have to carry beyond plain unicast. */
export const protocols = [
  'ipv4',
  'ipv6',
  'multicast',
  'igmp',
  'ospf',
  'is-is',
  'pim',
  'vrrp',
  'bfd',
  'dhcp',
  'spanning-tree',
  'lacp',
  'lldp',
  'eapol',
  'ptp',
  'cfm',
  'real-time-ethernet',
] as const;
export type Protocol = (typeof protocols)[number];

/** One layer-2 broadcast domain that the design must carry: declared intent, never a property of a tunnel. */
export const segmentSchema = z.strictObject({
  letter: z.string().regex(/^[A-Z]{1,2}$/, 'expected one or two capital letters'),
  name: nameSchema,
  sites: z.record(
    idSchema,
    z.strictObject({ vlan: vlanSchema.optional(), subnets: z.array(cidrSchema).max(16).optional() }),
  ),
  mtu: mtuSchema.optional(),
  protocols: z.array(z.enum(protocols)).max(protocols.length).optional(),
  hostsExpected: countSchema.optional(),
  /** How long neighbours on it (BFD, gateway groups, routers) hear nothing before the hastiest gives another one up. */
  neighbourTimeoutUs: durationUsSchema.optional(),
  mustBeFiltered: z.boolean().optional(),
  notes: textSchema.optional(),
});

const placeSchema = z.union(
  [z.strictObject({ site: idSchema }), z.strictObject({ host: idSchema })],
  'expected a site or a host',
);

const expectedWindow = `expected a window from 1 to ${TCP_LARGEST_WINDOW_BYTES} bytes`;

export const demandSchema = z.strictObject({
  name: nameSchema.optional(),
  segment: idSchema,
  from: placeSchema,
  to: placeSchema,
  forwardBps: rateBpsSchema.optional(),
  reverseBps: rateBpsSchema.optional(),
  mix: z
    .array(z.strictObject({ packetBytes: mtuSchema, weight: z.int().min(1).max(1_000_000) }))
    .min(1)
    .max(16)
    .optional(),
  flows: z.int().min(1, 'expected at least one flow').max(1_000_000).optional(),
  latencyAllowedUs: durationUsSchema.optional(),
  /** What a flow of it may have sent without an answer: TCP's window, or an application's own. */
  windowBytes: z
    .int(expectedWindow)
    .min(1, expectedWindow)
    .max(TCP_LARGEST_WINDOW_BYTES, expectedWindow)
    .optional(),
});

export const noteSchema = z.strictObject({
  text: z.string().min(1, 'expected some text').max(1000, 'expected at most 1,000 characters'),
  target: z
    .strictObject({
      collection: z.enum([
        'sites',
        'devices',
        'transports',
        'links',
        'endpoints',
        'associations',
        'tunnels',
        'forwarders',
        'segments',
        'demands',
      ]),
      id: idSchema,
    })
    .optional(),
  /** Standing notes are numbered at the top left of the sheet; the others stand where they were put. */
  standing: z.boolean().optional(),
});

// Data fields of ISO 7200:2004 (title blocks), from memory.
export const metaSchema = z.strictObject({
  title: nameSchema,
  supplementaryTitle: nameSchema.optional(),
  legalOwner: nameSchema.optional(),
  documentType: nameSchema.optional(),
  identification: nameSchema.optional(),
  createdBy: nameSchema.optional(),
  approvedBy: nameSchema.optional(),
  dateOfIssue: z.iso.date('expected a date such as 2026-03-18').optional(),
  revision: nameSchema.optional(),
  status: nameSchema.optional(),
  language: z
    .string()
    .regex(/^[a-z]{2,3}$/, 'expected a language code such as en')
    .optional(),
  example: z.boolean().optional(),
});

export type Segment = z.infer<typeof segmentSchema>;
export type Demand = z.infer<typeof demandSchema>;
export type Note = z.infer<typeof noteSchema>;
export type Meta = z.infer<typeof metaSchema>;
