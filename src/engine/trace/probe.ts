import ipaddr from 'ipaddr.js';
import { z } from 'zod';
import { memberSchema } from '../model/devices.ts';
import { idSchema, ipSchema, mtuSchema, udpPortSchema, vlanSchema } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { portGroupAt } from '../network/port-groups.ts';
import { FCS_BYTES, MINIMUM_FRAME_BYTES } from '../reference/ethernet.ts';
import { IP_HEADER_BYTES, ipVersions } from '../reference/ip.ts';
import type { Answer, Problem } from '../wire/problem.ts';

const bounded = (least: number, most: number, unit: string) =>
  z
    .int(`expected a whole number of ${unit} from ${least} to ${most}`)
    .min(least, `expected ${least} to ${most} ${unit}`)
    .max(most, `expected ${least} to ${most} ${unit}`);

// RFC 791 section 3.1 and RFC 8200 section 3: eight bits; a packet with 0 goes nowhere.
const hopLimitSchema = bounded(1, 255, 'hops');

/** Last octet of 01-80-C2-00-00-0x, the addresses that bridges keep to themselves. */
export const reservedOctetSchema = z
  .string()
  .regex(/^0[0-9a-f]$/, 'expected the last octet of 01-80-C2-00-00-0x, 00 to 0f');

const layer2GroupSchema = z
  .string()
  .regex(
    /^[0-9A-F][13579BDF](-[0-9A-F]{2}){5}$/,
    'expected a group address such as 01-1B-19-00-00-00, the first octet odd',
  )
  .refine(
    (mac) => !mac.startsWith('01-80-C2-00-00-0'),
    'expected an address outside 01-80-C2-00-00-0x; send to those as kind reserved',
  )
  .refine((mac) => mac !== 'FF-FF-FF-FF-FF-FF', 'expected a group; send to all as kind broadcast');

const isMulticast = (address: string): boolean =>
  ipSchema.safeParse(address).success && ipaddr.parse(address).range() === 'multicast';

const sourceSchema = z.union(
  [
    z.strictObject({ host: idSchema }),
    z.strictObject({ device: idSchema, port: idSchema, member: memberSchema.optional() }),
  ],
  'expected a host, or a device and its port',
);

const destinationSchema = z.discriminatedUnion(
  'kind',
  [
    z.strictObject({
      kind: z.literal('host'),
      host: idSchema,
      /** Whether the bridges know where it is, because it has sent before; unknown destinations are flooded. */
      learned: z.boolean().default(true),
    }),
    z.strictObject({ kind: z.literal('broadcast') }),
    z.strictObject({
      kind: z.literal('multicast'),
      group: ipSchema.refine(isMulticast, 'expected a multicast group such as 224.0.0.5 or ff02::5'),
    }),
    z.strictObject({ kind: z.literal('reserved'), octet: reservedOctetSchema }),
    z.strictObject({ kind: z.literal('layer-2-group'), mac: layer2GroupSchema }),
  ],
  'expected kind host, broadcast, multicast, reserved or layer-2-group',
);

const ipPacketSchema = z.strictObject({
  kind: z.literal('ip'),
  version: z.enum(ipVersions, 'expected ipv4 or ipv6'),
  /** Whole IP packet, header included. */
  packetBytes: bounded(IP_HEADER_BYTES.ipv4, 65_535, 'bytes'),
  /** DF of an IPv4 packet. An IPv6 packet is never cut underway; here it says whether its own sender may cut it. */
  dontFragment: z.boolean().default(false),
  /** TTL or hop limit as sent. */
  hopLimit: hopLimitSchema.default(64),
  /** Receivers discard what arrives with less. */
  requiredHopLimit: hopLimitSchema.optional(),
  protocol: bounded(0, 255, 'as a protocol number').optional(),
  sourcePort: udpPortSchema.optional(),
  destinationPort: udpPortSchema.optional(),
  /** The MTU that the sender goes by when it cuts; that of its port where nothing is said. */
  sourceMtuBytes: mtuSchema.optional(),
});

const nonIpSchema = z.strictObject({
  kind: z.literal('non-ip'),
  /** Untagged frame from its Ethernet header to its FCS. */
  frameBytes: bounded(MINIMUM_FRAME_BYTES, 9018, 'bytes'),
  /** Absent for frames with a length field, as LLC sends them. */
  etherType: z
    .int()
    .min(0x0600, 'expected an EtherType from 0x0600')
    .max(0xffff, 'expected an EtherType up to 0xffff')
    .optional(),
});

/** One frame to follow: where it starts, where to, and what it is. */
export const probeSchema = z
  .strictObject({
    source: sourceSchema,
    destination: destinationSchema,
    /** VLAN tags as sent, outermost first; a host's own way of tagging where nothing is said. */
    tags: z.array(vlanSchema).max(2, 'expected at most two tags').optional(),
    packet: z.discriminatedUnion('kind', [ipPacketSchema, nonIpSchema], 'expected kind ip or non-ip'),
  })
  .superRefine(({ destination, packet }, context) => {
    const refuse = (path: string[], message: string, input: unknown): void =>
      context.addIssue({ code: 'custom', path, message, input });
    if (packet.kind === 'non-ip') {
      if (destination.kind === 'multicast')
        refuse(
          ['packet', 'kind'],
          'expected kind ip towards an IP group; send other frames to a layer-2-group',
          packet.kind,
        );
      return;
    }
    const { version, packetBytes } = packet;
    // Less than any header has is refused as a number already.
    if (packetBytes >= IP_HEADER_BYTES.ipv4 && packetBytes < IP_HEADER_BYTES[version])
      refuse(
        ['packet', 'packetBytes'],
        `expected at least ${IP_HEADER_BYTES[version]} bytes, the header alone`,
        packetBytes,
      );
    if (destination.kind === 'broadcast' && version === 'ipv6')
      refuse(
        ['destination', 'kind'],
        'expected multicast: IPv6 has no broadcast, ff02::1 reaches all',
        'broadcast',
      );
    if (destination.kind === 'multicast' && ipaddr.parse(destination.group).kind() !== version)
      refuse(
        ['destination', 'group'],
        `expected a group of ${version === 'ipv4' ? 'IPv4, such as 224.0.0.5' : 'IPv6, such as ff02::5'}`,
        destination.group,
      );
    if (destination.kind === 'reserved' || destination.kind === 'layer-2-group')
      refuse(['packet', 'kind'], 'expected kind non-ip towards a group of layer 2', packet.kind);
  });

export type Probe = z.output<typeof probeSchema>;
export type ProbeInput = z.input<typeof probeSchema>;

const referenceProblems = (network: Network, { source, destination }: Probe): readonly Problem[] => {
  const { devices } = network.design;
  const problems: Problem[] = [];
  const hosts = network.deviceIds.filter((id) => devices[id]!.kind === 'host');
  const aHost =
    hosts.length === 0
      ? 'a host; the design has none yet, so start at a port'
      : `a host of the design, such as ${hosts[0]}`;
  if ('host' in source) {
    if (devices[source.host]?.kind !== 'host')
      problems.push({ field: 'probe.source.host', value: source.host, expected: aHost });
  } else if (devices[source.device] === undefined) {
    const expected = `a device of the design${network.deviceIds.length === 0 ? '' : `, such as ${network.deviceIds[0]}`}`;
    problems.push({ field: 'probe.source.device', value: source.device, expected });
  } else if (portGroupAt(network, source.device, source.port, source.member) === undefined) {
    problems.push({
      field: 'probe.source.port',
      value: source.port,
      expected: `a port of ${source.device} that carries frames, ${Object.keys(devices[source.device]!.ports).sort().join(', ') || 'of which it has none'}`,
    });
  }
  if (destination.kind === 'host' && devices[destination.host]?.kind !== 'host')
    problems.push({ field: 'probe.destination.host', value: destination.host, expected: aHost });
  if (destination.kind === 'host' && 'host' in source && source.host === destination.host)
    problems.push({
      field: 'probe.destination.host',
      value: destination.host,
      expected: 'another host than the source: what a host sends itself never leaves it',
    });
  return problems;
};

/** Reads a probe against a design; refuses it with every field that is wrong, its value and what it should be. */
export const readProbe = (network: Network, input: ProbeInput): Answer<{ probe: Probe }> => {
  const parsed = probeSchema.safeParse(input, { reportInput: true });
  if (!parsed.success)
    return {
      ok: false,
      problems: parsed.error.issues.map((issue) => ({
        field: ['probe', ...issue.path.map(String)].join('.'),
        value: issue.input ?? null,
        expected: issue.message.replace(/^expected /, ''),
      })),
    };
  const problems = referenceProblems(network, parsed.data);
  return problems.length > 0 ? { ok: false, problems } : { ok: true, probe: parsed.data };
};

/** Bytes between the Ethernet header and the FCS, tags left out. */
export const payloadBytesOf = (frameBytes: number, headerBytes: number): number =>
  frameBytes - headerBytes - FCS_BYTES;
