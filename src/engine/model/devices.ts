import { z } from 'zod';
import {
  cidrSchema,
  countSchema,
  durationUsSchema,
  idSchema,
  ipSchema,
  mtuSchema,
  nameSchema,
  rateBpsSchema,
  textSchema,
  vlanSchema,
} from './scalars.ts';

export const portRoleSchema = z.enum(['wan', 'lan', 'member-link']);
/**
 * What a port does about spanning tree beyond taking part: `guard` shuts it when a BPDU comes in, `root-guard` blocks it while
 * a better root is heard there, `filter` neither sends nor takes BPDUs. Common practice, no source.
 */
export const portBpdus = ['guard', 'root-guard', 'filter'] as const;

export const memberSchema = z.union([z.literal(1), z.literal(2)], 'expected member 1 or 2');
export type Member = z.infer<typeof memberSchema>;

/** On an HA pair a port is logical: it stands for the port of that number on both members. */
export const portSchema = z.strictObject({
  number: z.int().min(1, 'expected a port number from 1').max(999, 'expected a port number up to 999'),
  name: nameSchema.optional(),
  role: portRoleSchema,
  speedBps: rateBpsSchema.optional(),
  mtu: mtuSchema.optional(),
  shut: z.boolean().optional(),
  mode: z.enum(['access', 'trunk']).optional(),
  vlan: vlanSchema.optional(),
  nativeVlan: vlanSchema.optional(),
  allowedVlans: z.union([z.literal('all'), z.array(vlanSchema).max(4094)]).optional(),
  aggregation: nameSchema.optional(),
  stormLimitPps: countSchema.optional(),
  macLimit: countSchema.optional(),
  bpdus: z.enum(portBpdus).optional(),
});

export const spanningTreeSchema = z.strictObject({
  mode: z.enum(['off', 'on']),
  priority: z
    .int()
    .min(0, 'expected a priority from 0 to 61440')
    .max(61_440, 'expected a priority from 0 to 61440')
    .optional(),
});

const deviceSettingsSchema = z.strictObject({
  ignoreDf: z.boolean().optional(),
  multicastRouting: z.boolean().optional(),
  keepInnerTags: z.boolean().optional(),
  /** From whom the WAN ports take VXLAN outside IPsec. */
  vxlanFrom: z.enum(['anyone', 'peers', 'nobody']).optional(),
  spanningTree: spanningTreeSchema.optional(),
});

const common = {
  site: idSchema,
  name: nameSchema,
  profile: idSchema.optional(),
  settings: deviceSettingsSchema.optional(),
  /** Where the device is administered. */
  managementAddress: ipSchema.optional(),
  ports: z.record(idSchema, portSchema),
  notes: textSchema.optional(),
};

export const hostFaces = ['server', 'controller', 'camera', 'kiosk', 'recorder'] as const;

export const deviceSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('firewall'), ...common }),
  z.strictObject({ kind: z.literal('router'), ...common }),
  z.strictObject({ kind: z.literal('switch'), ...common }),
  z.strictObject({
    kind: z.literal('ha-pair'),
    ...common,
    memberNames: z.strictObject({ 1: nameSchema, 2: nameSchema }),
    mode: z.enum(['active-standby', 'active-active']).optional(),
    active: memberSchema.optional(),
    stateSync: z.boolean().optional(),
    failoverUs: durationUsSchema.optional(),
  }),
  z.strictObject({
    kind: z.literal('host'),
    ...common,
    face: z.enum(hostFaces).optional(),
    segment: idSchema.optional(),
    addresses: z.array(cidrSchema).max(16, 'expected at most 16 addresses').optional(),
  }),
]);

export type Port = z.infer<typeof portSchema>;
export type Device = z.infer<typeof deviceSchema>;
export type DeviceKind = Device['kind'];
export const deviceKinds = [
  'firewall',
  'ha-pair',
  'switch',
  'router',
  'host',
] as const satisfies readonly DeviceKind[];

/** Gateways end tunnels and hold forwarders; switches and hosts do not. */
export const isGateway = (device: { readonly kind: DeviceKind }): boolean =>
  device.kind === 'firewall' || device.kind === 'ha-pair' || device.kind === 'router';
