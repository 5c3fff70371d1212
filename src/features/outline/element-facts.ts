import { portWords, socketsOf } from '../../canvas/inspector/port-words.ts';
import { formatRate } from '../../lib/rate-text.ts';
import { vlansOf } from '../../canvas/inspector/tunnel-facts.ts';
import { circuitVlans } from '../../canvas/inspector/vlan-list.ts';
import { carriesWords, subnetWords, transportWords, vlanWords } from '../../drawing/parts/words.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design, Entry } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import { associationPath } from '../../engine/network/association-path.ts';
import { deviceOfTunnelEnd, ends, forwardingMembers, type Network } from '../../engine/network/network.ts';
import { isLocked } from '../../workspace/operations/move-parts.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

// What the drawing says of each element, for those who read it line by line. What is unknown is left out.

type Facts = readonly string[];
const said = (...facts: readonly (string | false | undefined)[]): Facts =>
  facts.filter((fact): fact is string => fact !== undefined && fact !== false && fact !== '');

const counted = (count: number, one: string, many = `${one}s`): string =>
  `${count === 0 ? 'no' : count} ${count === 1 ? one : many}`;

export const siteFacts = (network: Network, design: Design, id: string): Facts => {
  const { zone } = design.sites[id]!;
  return said(
    counted(network.devicesBySite.get(id)?.length ?? 0, 'device'),
    zone !== undefined && `zone ${zone}`,
    design.layout.sites?.[id]?.collapsed === true && 'collapsed on the sheet',
    isLocked(design, { collection: 'sites', id }) && 'place locked',
  );
};

export const deviceFacts = (design: Design, id: string): Facts => {
  const device = design.devices[id]!;
  const segment =
    device.kind === 'host' && device.segment !== undefined ? design.segments[device.segment] : undefined;
  return said(
    device.kind === 'ha-pair' &&
      (device.mode === 'active-active' ? 'both members active' : 'active, standby'),
    device.kind === 'host' && device.face,
    segment !== undefined && `segment ${segment.letter}`,
    ...(device.kind === 'host' ? (device.addresses ?? []) : []),
    isLocked(design, { collection: 'devices', id }) && 'place locked',
  );
};

export const memberFacts = (device: Entry<'devices'>, member: Member): Facts => [
  forwardingMembers(device).includes(member) ? 'active' : 'standby',
];

/** What a port is and where its cable leads; on a pair the port of one member. */
export const portFacts = (
  network: Network,
  design: Design,
  id: string,
  port: string,
  member: Member | undefined,
): Facts => {
  const facts = design.devices[id]!.ports[port]!;
  const plugged = socketsOf(network, id, port)
    .filter((socket) => member === undefined || socket.member === undefined || socket.member === member)
    .flatMap(({ link, peer }) => {
      const entry = link === undefined ? undefined : design.links[link];
      if (entry?.kind === 'landing')
        return entry.members === undefined ||
          entry.members === 'both' ||
          Number(entry.members) === (member ?? 1)
          ? [`on ${design.transports[entry.transport]!.name}`]
          : [];
      if (peer === undefined) return [];
      return [
        `to ${nameOf(design, { collection: 'devices', id: peer.device, port: peer.port, member: peer.member })}`,
      ];
    });
  return said(
    facts.name !== undefined && `port ${facts.number}`,
    portWords(facts),
    facts.speedBps !== undefined && formatRate(facts.speedBps),
    facts.mtu !== undefined && `MTU ${facts.mtu}`,
    facts.aggregation !== undefined && `aggregated in ${facts.aggregation}`,
    facts.shut === true && 'shut',
    ...(plugged.length === 0 ? ['free'] : plugged),
  );
};

export const landingFacts = (landing: Extract<Entry<'links'>, { kind: 'landing' }>): Facts =>
  said(
    landing.ipv4,
    landing.ipv6,
    landing.dynamic === true && 'address changes',
    landing.nat !== undefined && (landing.nat.forwarded === true ? 'behind NAT, forwarded' : 'behind NAT'),
    landing.members !== undefined && landing.members !== 'both' && `member ${landing.members} only`,
    landing.rateUpBps !== undefined && `${formatRate(landing.rateUpBps)} up`,
    landing.rateDownBps !== undefined && `${formatRate(landing.rateDownBps)} down`,
  );

export const endpointFacts = (design: Design, id: string): Facts => {
  const { ipv4, ipv6, member, device } = design.endpoints[id]!;
  const on = design.devices[device]!;
  return said(
    ipv4,
    ipv6,
    ipv4 === undefined && ipv6 === undefined && 'no address yet',
    member !== undefined && on.kind === 'ha-pair' && `on ${on.memberNames[member]} only`,
  );
};

/** Both ends of a tunnel, its VNI at each, what it carries and in what it runs. */
export const tunnelFacts = (network: Network, design: Design, id: string): Facts => {
  const tunnel = design.tunnels[id]!;
  const devices = ends.map((end) => design.devices[deviceOfTunnelEnd(network, tunnel, end)]!.name);
  const [a, b] = [tunnel.a.vni, tunnel.b.vni];
  const letters = (tunnelSegments(network).get(id) ?? []).map((segment) => design.segments[segment]!.letter);
  return said(
    `${devices[0]} to ${devices[1]}`,
    a === b
      ? `VNI ${a ?? 'not set'}${a === undefined ? '' : ' at both ends'}`
      : `VNI ${a ?? 'not set'} at ${devices[0]}, ${b ?? 'not set'} at ${devices[1]}`,
    letters.length === 0 ? 'carries nothing' : `carries ${letters.sort().join(', ')}`,
    tunnel.association === undefined ? 'bare' : `in ${design.associations[tunnel.association]!.name}`,
  );
};

export const associationFacts = (network: Network, design: Design, id: string): Facts => {
  const { a, b } = design.associations[id]!;
  const path = associationPath(network, id);
  return said(
    `${design.devices[a.device]!.name} to ${design.devices[b.device]!.name}`,
    path.ok ? `over ${design.transports[path.transport]!.name}` : 'no way in common',
    counted(network.tunnelsByAssociation.get(id)?.length ?? 0, 'tunnel'),
  );
};

export const transportFacts = (design: Design, id: string): Facts => {
  const { kind, trust, latency, mtu, loss } = transportWords(design.transports[id]!);
  return said(
    kind,
    trust,
    latency,
    mtu,
    loss,
    isLocked(design, { collection: 'transports', id }) && 'place locked',
  );
};

export const forwarderFacts = (network: Network, id: string): Facts => {
  const vlans = vlansOf(network, id);
  return said(
    vlans !== '' && (/^\d/.test(vlans) ? `VLAN ${vlans}` : vlans),
    counted(network.circuitsByForwarder.get(id)?.length ?? 0, 'circuit'),
  );
};

export const circuitFacts = (circuit: Entry<'forwarders'>['circuits'][string]): Facts => {
  const vlans = circuit.kind === 'port' ? circuitVlans.write(circuit.vlans) : '';
  return said(
    /^\d/.test(vlans) ? `VLAN ${vlans}` : vlans === 'all' ? 'all VLANs' : vlans,
    circuit.kind === 'port' && circuit.tag !== undefined && `tag ${circuit.tag}`,
    circuit.isolation !== undefined && `isolation group ${circuit.isolation}`,
  );
};

export const segmentFacts = (segment: Entry<'segments'>): Facts => {
  const [vlan, subnet] = [vlanWords(segment), subnetWords(segment)];
  return said(
    vlan !== '–' && (/^\d+ VLANs$/.test(vlan) ? vlan : `VLAN ${vlan}`),
    subnet !== '–' && subnet,
    carriesWords(segment),
    segment.mtu !== undefined && `MTU ${segment.mtu}`,
    counted(Object.keys(segment.sites).length, 'site'),
  );
};

export const segmentSiteFacts = (at: Entry<'segments'>['sites'][string]): Facts =>
  said(at.vlan === undefined ? 'untagged' : `VLAN ${at.vlan}`, ...(at.subnets ?? []));

export const demandFacts = (design: Design, id: string): Facts => {
  const demand = design.demands[id]!;
  const place = (at: typeof demand.from): string =>
    'site' in at ? design.sites[at.site]!.name : design.devices[at.host]!.name;
  return said(
    `${place(demand.from)} to ${place(demand.to)}`,
    demand.forwardBps !== undefined && formatRate(demand.forwardBps),
    demand.reverseBps !== undefined && `${formatRate(demand.reverseBps)} back`,
  );
};

export const noteFacts = (design: Design, id: string): Facts => {
  const { target, standing } = design.notes[id]!;
  return said(
    standing === true && 'at the head of the sheet',
    target !== undefined && `about ${nameOf(design, target)}`,
    isLocked(design, { collection: 'notes', id }) && 'place locked',
  );
};
