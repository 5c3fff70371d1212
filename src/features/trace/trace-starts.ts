import type { Design } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { portKey } from '../../engine/network/network.ts';
import { STANDARD_PAYLOAD_BYTES } from '../../engine/reference/ethernet.ts';
import { whatFits } from '../../engine/trace/what-fits.ts';
import { probeOf, type TraceQuestion, type TraceSource } from './trace-question.ts';

/** A question worth asking of this design, to be asked by one press. */
export interface TraceStart {
  readonly label: string;
  readonly shows: string;
  readonly question: TraceQuestion;
}

interface HostPair {
  readonly from: string;
  readonly to: string;
}

/** For each segment two hosts at different sites, segments with the most sites first. */
const pairsAcross = (design: Design): readonly HostPair[] => {
  const bySegment = new Map<string, Map<string, string>>();
  for (const [id, device] of Object.entries(design.devices)) {
    if (device.kind !== 'host' || device.segment === undefined || device.site === undefined) continue;
    const sites = bySegment.get(device.segment) ?? new Map<string, string>();
    if (!sites.has(device.site)) sites.set(device.site, id);
    bySegment.set(device.segment, sites);
  }
  return [...bySegment.values()]
    .filter((sites) => sites.size > 1)
    .sort((a, b) => b.size - a.size)
    .map((sites) => ({ from: [...sites.values()].at(-1)!, to: [...sites.values()][0]! }));
};

/** The port that a host is cabled to: a frame that comes in there is bound by no MTU of the host's own. */
const portBeside = (design: Design, host: string): TraceSource | undefined => {
  const network = indexNetwork(design);
  for (const port of Object.keys(design.devices[host]!.ports))
    for (const { cable: id } of network.cablesByPort.get(portKey(host, port)) ?? []) {
      const cable = design.links[id];
      if (cable?.kind !== 'cable') continue;
      const { device, port: beside, member } = cable.a.device === host ? cable.b : cable.a;
      const isPair = design.devices[device]?.kind === 'ha-pair';
      return { device, port: beside, ...(isPair ? { member: member ?? 1 } : {}) };
    }
  return undefined;
};

/** A full-size packet between two hosts that doesn't get through whole, where there is one. */
const tooLarge = (design: Design, { from, to }: HostPair): TraceQuestion | undefined => {
  const name = { send: 'tcp-full-size', to } as const;
  for (const source of [{ host: from }, portBeside(design, from)]) {
    if (source === undefined) continue;
    const probe = probeOf(design, { ...name, from: source });
    const largest = probe === undefined ? undefined : whatFits(design, probe)?.largestBytes;
    if (largest === undefined) continue;
    const ports = 'host' in source ? Object.values(design.devices[source.host]!.ports) : [];
    const ownMtu = Math.min(...ports.map(({ mtu }) => mtu ?? Infinity));
    // What the host itself refuses teaches nothing about the path.
    if (ownMtu <= largest) continue;
    return { ...name, from: source, bytes: Math.max(STANDARD_PAYLOAD_BYTES, largest + 1) };
  }
  return undefined;
};

/** Questions that this design has an answer to, most telling first; none where no two sites share a segment. */
export const traceStarts = (design: Design): readonly TraceStart[] => {
  const pairs = pairsAcross(design);
  const [pair] = pairs;
  if (pair === undefined) return [];
  const other = pairs.at(-1)!;
  const name = (id: string): string => design.devices[id]!.name;
  const large = tooLarge(design, pair);
  return [
    {
      label: `A ping from ${name(pair.from)} to ${name(pair.to)}`,
      shows: 'Whether anything passes.',
      question: { send: 'ping', from: { host: pair.from }, to: pair.to },
    },
    ...(large === undefined
      ? []
      : [
          {
            label: `${large.bytes} B from beside ${name(pair.from)} to ${name(pair.to)}`,
            shows: 'A full packet, and the hop where it no longer fits.',
            question: large,
          },
        ]),
    {
      label: `An OSPF hello from ${name(other.to)}`,
      shows: 'Who hears it, and whether its TTL of 1 survives.',
      question: { send: 'ospf', from: { host: other.to } },
    },
    {
      label: `A broadcast from ${name(pair.from)}`,
      shows: 'Everybody who is bothered by it.',
      question: { send: 'arp', from: { host: pair.from } },
    },
  ];
};
