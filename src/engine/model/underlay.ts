import { z } from 'zod';
import { memberSchema } from './devices.ts';
import {
  countSchema,
  durationUsSchema,
  idSchema,
  ipv4Schema,
  ipv6Schema,
  mtuSchema,
  nameSchema,
  rateBpsSchema,
  secondsSchema,
  textSchema,
} from './scalars.ts';

export const siteSchema = z.strictObject({
  name: nameSchema,
  /** Sites of one zone trust each other's hosts. */
  zone: nameSchema.optional(),
  notes: textSchema.optional(),
});

export const transportSchema = z.strictObject({
  name: nameSchema,
  kind: z.enum(['internet', 'private-routed', 'own-routed']),
  trusted: z.boolean().optional(),
  mtu: mtuSchema.optional(),
  latencyUs: durationUsSchema.optional(),
  jitterUs: durationUsSchema.optional(),
  lossPpm: z
    .int()
    .min(0, 'expected 0 to 1000000 parts per million')
    .max(1_000_000, 'expected 0 to 1000000 parts per million')
    .optional(),
  rateBps: rateBpsSchema.optional(),
  paths: z.enum(['one', 'several']).optional(),
  families: z
    .array(z.union([z.literal(4), z.literal(6)]))
    .min(1, 'expected 4, 6 or both')
    .max(2)
    .optional(),
  filters: z
    .array(z.enum(['packet-too-big', 'fragments', 'esp', 'udp-500', 'udp-4500', 'udp-4789', 'multicast']))
    .optional(),
  notes: textSchema.optional(),
});

/** A port as a cable's end meets it. `member` says which member of an HA pair the plug is in (1 where absent). */
export const plugSchema = z.strictObject({
  device: idSchema,
  port: idSchema,
  member: memberSchema.optional(),
});

export const cableSchema = z.strictObject({
  kind: z.literal('cable'),
  name: nameSchema.optional(),
  a: plugSchema,
  b: plugSchema,
});

/** A WAN port on a transport. On an HA pair it names the logical port, and `members` says which members are plugged in (both where absent). */
export const landingSchema = z.strictObject({
  kind: z.literal('landing'),
  name: nameSchema.optional(),
  device: idSchema,
  port: idSchema,
  members: z.enum(['both', '1', '2']).optional(),
  transport: idSchema,
  ipv4: ipv4Schema.optional(),
  ipv6: ipv6Schema.optional(),
  dynamic: z.boolean().optional(),
  dynamicName: nameSchema.optional(),
  nat: z
    .strictObject({
      forwarded: z.boolean().optional(),
      /** After how long without a packet the translation of a UDP flow is forgotten. */
      mappingSeconds: secondsSchema.optional(),
    })
    .optional(),
  accessOverhead: z.union([z.literal('pppoe'), z.int().min(0).max(256)]).optional(),
  rateUpBps: rateBpsSchema.optional(),
  rateDownBps: rateBpsSchema.optional(),
});

export const linkSchema = z.discriminatedUnion('kind', [cableSchema, landingSchema]);

export type Site = z.infer<typeof siteSchema>;
export type Transport = z.infer<typeof transportSchema>;
export type Plug = z.infer<typeof plugSchema>;
export type Cable = z.infer<typeof cableSchema>;
export type Landing = z.infer<typeof landingSchema>;
export type Link = z.infer<typeof linkSchema>;

export const profileSchema = z.strictObject({
  name: nameSchema,
  basis: textSchema.optional(),
  vniScope: z.enum(['endpoint', 'peer', 'multipoint']).optional(),
  plain: z
    .strictObject({
      oneFlowBps: rateBpsSchema.optional(),
      manyFlowsBps: rateBpsSchema.optional(),
      packetsPerSecond: countSchema.optional(),
    })
    .optional(),
  encrypted: z
    .strictObject({
      oneFlowBps: rateBpsSchema.optional(),
      manyFlowsBps: rateBpsSchema.optional(),
      packetsPerSecond: countSchema.optional(),
    })
    .optional(),
  encryption: z.enum(['offloaded', 'cpu']).optional(),
  cpuWhen: textSchema.optional(),
  reservedGroups: z
    .record(
      z.string().regex(/^0[0-9a-f]$/, 'expected the last octet of 01-80-C2-00-00-0x, 00 to 0f'),
      z.enum(['drop', 'pass', 'peer']),
    )
    .optional(),
  multicastTtl: z.enum(['kept', 'lowered']).optional(),
  oversizeDf: z.enum(['silent', 'icmp', 'fragment']).optional(),
  macTable: countSchema.optional(),
  /** Bits of the integrity value that HMAC-SHA2-256 leaves on a packet. */
  hmacSha256Bits: z.union([z.literal(96), z.literal(128)], 'expected 96 or 128 bits').optional(),
});
export type Profile = z.infer<typeof profileSchema>;
