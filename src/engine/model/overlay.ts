import { z } from 'zod';
import { memberSchema, spanningTreeSchema } from './devices.ts';
import {
  cidr4Schema,
  cidr6Schema,
  cidrSchema,
  countSchema,
  idSchema,
  ipSchema,
  mtuSchema,
  nameSchema,
  rankSchema,
  rankedMap,
  secondsSchema,
  textSchema,
  udpPortSchema,
  vlanSchema,
  vniSchema,
} from './scalars.ts';

/** Where tunnels end. `member` marks an endpoint that one member of an HA pair keeps to itself. */
export const endpointSchema = z.strictObject({
  device: idSchema,
  member: memberSchema.optional(),
  name: nameSchema,
  ipv4: cidr4Schema.optional(),
  ipv6: cidr6Schema.optional(),
});

/** Landings in the order in which an end tries them. */
export const viaSchema = rankedMap(z.strictObject({ rank: rankSchema, landing: idSchema }));

export const espEncryptions = [
  'aes-gcm-16',
  'aes-gcm-12',
  'aes-gcm-8',
  'chacha20-poly1305',
  'aes-cbc',
  'aes-ctr',
  'null',
  '3des-cbc',
  'des-cbc',
] as const;
export const integrities = [
  'hmac-md5-96',
  'hmac-sha1-96',
  'hmac-sha2-256-128',
  'hmac-sha2-384-192',
  'hmac-sha2-512-256',
] as const;
export const prfs = ['hmac-md5', 'hmac-sha1', 'hmac-sha2-256', 'hmac-sha2-384', 'hmac-sha2-512'] as const;
/** Key-exchange groups by their IANA transform number. */
export const keyExchangeGroups = [1, 2, 5, 14, 15, 16, 17, 18, 19, 20, 21, 22, 23, 24, 31, 32] as const;

const groupSchema = z
  .int()
  .refine(
    (n) => (keyExchangeGroups as readonly number[]).includes(n),
    `expected one of the groups ${keyExchangeGroups.join(', ')}`,
  );
const keyBitsSchema = z.union(
  [z.literal(128), z.literal(192), z.literal(256)],
  'expected 128, 192 or 256 bits',
);

export const ikeProposalSchema = z.strictObject({
  rank: rankSchema,
  encryption: z.enum(espEncryptions),
  keyBits: keyBitsSchema.optional(),
  integrity: z.enum(integrities).optional(),
  prf: z.enum(prfs).optional(),
  group: groupSchema,
});
export const espProposalSchema = z.strictObject({
  rank: rankSchema,
  encryption: z.enum(espEncryptions),
  keyBits: keyBitsSchema.optional(),
  integrity: z.enum(integrities).optional(),
  group: groupSchema.optional(),
});
export const selectorSchema = z.strictObject({
  rank: rankSchema,
  local: cidrSchema,
  remote: cidrSchema,
  udpPort: udpPortSchema.optional(),
});

export const associationEndSchema = z.strictObject({
  device: idSchema,
  via: viaSchema.optional(),
  ikeVersion: z.union([z.literal(1), z.literal(2)], 'expected IKE version 1 or 2').optional(),
  identity: nameSchema.optional(),
  authentication: z
    .discriminatedUnion('method', [
      z.strictObject({ method: z.literal('certificate') }),
      // Only the name under which the team's vault keeps the key; the key itself has no place in a design.
      z.strictObject({ method: z.literal('pre-shared-key'), vaultEntry: nameSchema }),
    ])
    .optional(),
  ikeProposals: rankedMap(ikeProposalSchema).optional(),
  espProposals: rankedMap(espProposalSchema).optional(),
  selectors: rankedMap(selectorSchema).optional(),
  start: z.enum(['starts', 'on-traffic', 'answers']).optional(),
  liveness: z
    .union([z.literal('off'), z.strictObject({ intervalSeconds: secondsSchema, tries: countSchema })])
    .optional(),
  perfectForwardSecrecy: z.boolean().optional(),
  extendedSequence: z.boolean().optional(),
  ikeLifetimeSeconds: secondsSchema.optional(),
  childLifetimeSeconds: secondsSchema.optional(),
  replayWindow: countSchema.optional(),
  mode: z.enum(['tunnel', 'transport']).optional(),
  outerDf: z.enum(['copy', 'set', 'clear']).optional(),
  natKeepaliveSeconds: secondsSchema.optional(),
  /** Whether long IKE messages are cut by IKE itself, and not by IP. */
  ikeFragmentation: z.boolean().optional(),
  /** What becomes of the tunnels' packets while the association is down. */
  whenDown: z.enum(['drop', 'clear']).optional(),
});
export const associationSchema = z.strictObject({
  name: nameSchema,
  a: associationEndSchema,
  b: associationEndSchema,
  notes: textSchema.optional(),
});

export const tunnelEndSchema = z.strictObject({
  endpoint: idSchema,
  vni: vniSchema.optional(),
  udpPort: udpPortSchema.optional(),
  outerDf: z.enum(['set', 'clear', 'inherit']).optional(),
  innerTags: z.enum(['keep', 'strip']).optional(),
  /** Over IPv6: what the outer UDP header says when this end sends, and whether it takes packets that say zero. */
  udpChecksum: z.enum(['computed', 'zero']).optional(),
  takesZeroChecksum: z.boolean().optional(),
  via: viaSchema.optional(),
});
export const tunnelSchema = z.strictObject({
  name: nameSchema,
  a: tunnelEndSchema,
  b: tunnelEndSchema,
  association: idSchema.optional(),
  family: z.union([z.literal(4), z.literal(6)], 'expected address family 4 or 6').optional(),
  notes: textSchema.optional(),
});

const isolationSchema = z
  .string()
  .regex(/^[A-Za-z0-9-]{1,32}$/, 'expected a group name of letters, digits and dashes');

/**
 * What a forwarder joins. A port's circuit takes the frames whose tag is in `vlans`. `tag` says whether that tag is
 * taken off on the way in and put back on the way out (`removed`, the default for a single VLAN) or stays on the
 * frame (`kept`, the default otherwise). `translate` maps a VLAN on the wire to the one inside the forwarder.
 */
export const circuitSchema = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('port'),
    rank: rankSchema,
    port: idSchema,
    vlans: z.union([
      z.literal('untagged'),
      z.literal('all'),
      z.array(vlanSchema).min(1, 'expected at least one VLAN').max(4094),
    ]),
    tag: z.enum(['removed', 'kept']).optional(),
    translate: z
      .record(z.string().regex(/^\d{1,4}$/, 'expected a VLAN from 1 to 4094'), vlanSchema)
      .optional(),
    isolation: isolationSchema.optional(),
  }),
  z.strictObject({
    kind: z.literal('tunnel'),
    rank: rankSchema,
    tunnel: idSchema,
    isolation: isolationSchema.optional(),
  }),
]);

export const frameKinds = ['any', 'arp', 'ipv4', 'ipv6', 'multicast', 'broadcast', 'ethertype'] as const;
export const policyRuleSchema = z.strictObject({
  rank: rankSchema,
  name: nameSchema.optional(),
  action: z.enum(['permit', 'deny']),
  direction: z.enum(['both', 'to-tunnel', 'from-tunnel']),
  frames: z.enum(frameKinds),
  ethertype: z
    .int()
    .min(0x0600, 'expected an EtherType from 0x0600')
    .max(0xffff, 'expected an EtherType up to 0xffff')
    .optional(),
  sources: z.array(cidrSchema).max(64).optional(),
  destinations: z.array(cidrSchema).max(64).optional(),
  protocol: z.int().min(0).max(255).optional(),
  ports: z.array(udpPortSchema).max(64).optional(),
  log: z.boolean().optional(),
});

export const gatewayInterfaceSchema = z.strictObject({
  addresses: z.array(cidrSchema).max(16).optional(),
  mtu: mtuSchema.optional(),
  redundancy: z
    .strictObject({
      group: z.int().min(1, 'expected a group from 1 to 255').max(255, 'expected a group from 1 to 255'),
      address: ipSchema.optional(),
      priority: z.int().min(1).max(255).optional(),
    })
    .optional(),
  dhcp: z.enum(['none', 'server', 'relay']).optional(),
  routerAdvertisements: z.boolean().optional(),
});

export const forwarderSchema = z.strictObject({
  device: idSchema,
  kind: z.enum(['bridge', 'cross-connect']),
  name: nameSchema,
  circuits: rankedMap(circuitSchema),
  spanningTree: spanningTreeSchema.optional(),
  policy: rankedMap(policyRuleSchema).optional(),
  multicast: z.enum(['flood', 'snoop', 'drop']).optional(),
  /** Whether it asks the segment who is a member of which group. */
  querier: z.boolean().optional(),
  gateway: gatewayInterfaceSchema.optional(),
});

export type Endpoint = z.infer<typeof endpointSchema>;
export type AssociationEnd = z.infer<typeof associationEndSchema>;
export type Association = z.infer<typeof associationSchema>;
export type TunnelEnd = z.infer<typeof tunnelEndSchema>;
export type Tunnel = z.infer<typeof tunnelSchema>;
export type Circuit = z.infer<typeof circuitSchema>;
export type PolicyRule = z.infer<typeof policyRuleSchema>;
export type Forwarder = z.infer<typeof forwarderSchema>;
export type IkeProposal = z.infer<typeof ikeProposalSchema>;
export type EspProposal = z.infer<typeof espProposalSchema>;
export type Selector = z.infer<typeof selectorSchema>;
