import type { DeepReadonly, Design } from '../../engine/model/design.ts';
import type { Device, Member, Port } from '../../engine/model/devices.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { joinPatches } from '../../engine/model/merge-patch.ts';
import { rankAtEnd } from '../../engine/model/rank.ts';
import type { Plug } from '../../engine/model/underlay.ts';
import type { NewId, Operation } from './operation.ts';
import { refused } from './operation.ts';
import { isUnclaimed, segmentBridge } from './segment-bridge.ts';

/** One end of a cable that somebody pulls: a pip, or a device's body, which stands for its first fitting free port. */
export interface PullEnd {
  readonly device: string;
  readonly port?: string;
  readonly member?: Member;
}

const memberOf = (device: DeepReadonly<Device>, member: Member | undefined): Member | undefined =>
  device.kind === 'ha-pair' ? (member ?? 1) : undefined;

/** The links in a port; on a pair those of the given member. */
export const linksIn = (
  design: Design,
  device: string,
  port: string,
  member: Member | undefined,
): readonly string[] =>
  Object.entries(design.links)
    .filter(([, link]) => {
      if (link.kind === 'landing')
        return (
          link.device === device &&
          link.port === port &&
          (member === undefined ||
            link.members === undefined ||
            link.members === 'both' ||
            Number(link.members) === member)
        );
      return [link.a, link.b].some(
        (plug) =>
          plug.device === device &&
          plug.port === port &&
          (member === undefined || (plug.member ?? 1) === member),
      );
    })
    .map(([id]) => id);

const portName = (
  device: DeepReadonly<Device>,
  id: string,
  port: DeepReadonly<Port>,
  member: Member | undefined,
): string =>
  `${member !== undefined && device.kind === 'ha-pair' ? device.memberNames[member] : device.name}, port ${port.name ?? port.number ?? id}`;

const byNumber = (device: DeepReadonly<Device>): readonly (readonly [string, DeepReadonly<Port>])[] =>
  Object.entries(device.ports).sort(([, a], [, b]) => a.number - b.number);

/** The free port of a device that a cable to `peer` fits best: access for a host, trunk otherwise. */
const firstFree = (
  design: Design,
  id: string,
  member: Member | undefined,
  peer: DeepReadonly<Device>,
): string | undefined => {
  const device = design.devices[id]!;
  const wanted = peer.kind === 'host' ? 'access' : 'trunk';
  const free = byNumber(device).filter(
    ([port, facts]) =>
      facts.role === 'lan' && facts.shut !== true && linksIn(design, id, port, member).length === 0,
  );
  return (free.find(([, facts]) => (facts.mode ?? wanted) === wanted) ?? free[0])?.[0];
};

interface Found {
  readonly plug: Plug;
  readonly patch: MergePatch;
}

/** The plug for an end, with a new port on the device where none is free. */
const plugFor = (design: Design, end: PullEnd, peer: DeepReadonly<Device>, newId: NewId): Found => {
  const device = design.devices[end.device]!;
  const member = memberOf(device, end.member);
  const withMember = member === undefined ? {} : { member };
  const port = end.port ?? firstFree(design, end.device, member, peer);
  if (port !== undefined) return { plug: { device: end.device, port, ...withMember }, patch: {} };
  const number = Math.max(0, ...Object.values(device.ports).map((facts) => facts.number)) + 1;
  const fresh = newId('p');
  const mode = device.kind === 'host' || peer.kind === 'host' ? 'access' : 'trunk';
  return {
    plug: { device: end.device, port: fresh, ...withMember },
    patch: {
      devices: {
        [end.device]: {
          ports: { [fresh]: { number, role: 'lan', mode, speedBps: 1_000_000_000, mtu: 1500 } },
        },
      },
    },
  };
};

/** Why a cable between two ends can't be pulled; undefined when it can. */
export const whyNoCable = (design: Design, a: PullEnd, b: PullEnd): string | undefined => {
  const [deviceA, deviceB] = [design.devices[a.device], design.devices[b.device]];
  if (deviceA === undefined || deviceB === undefined) return 'That device is no longer there.';
  const ports = [
    [a, deviceA],
    [b, deviceB],
  ] as const;
  for (const [end, device] of ports) {
    if (end.port === undefined) continue;
    const port = device.ports[end.port];
    if (port === undefined) return 'That port is no longer there.';
    const name = portName(device, end.port, port, end.member);
    if (linksIn(design, end.device, end.port, memberOf(device, end.member)).length > 0)
      return `${name} already holds a cable: remove it first, or take a free port.`;
    if (port.role === 'wan') return `${name} is a WAN port: land it on a transport instead.`;
  }
  const linkEnds = ports.map(([end, device]) =>
    end.port === undefined ? undefined : device.ports[end.port]?.role === 'member-link',
  );
  if (linkEnds.some((is) => is === true)) {
    const samePair =
      a.device === b.device && deviceA.kind === 'ha-pair' && (a.member ?? 1) !== (b.member ?? 1);
    if (!samePair) return 'A member link joins the two members of one HA pair.';
    return undefined;
  }
  if (a.device === b.device) return `A cable from ${deviceA.name} to itself would close a loop.`;
  if (deviceA.kind === 'host' && deviceB.kind === 'host')
    return 'Two hosts need a switch between them to be on a segment.';
  return undefined;
};

/**
 * What a host needs of the port that it is plugged into, where nothing says otherwise yet: its segment's VLAN on a
 * switch's access port, a place in its segment's bridge on a gateway.
 */
const setUpFor = (design: Design, host: DeepReadonly<Device>, plug: Plug): MergePatch => {
  const other = design.devices[plug.device]!;
  const port = other.ports[plug.port];
  if (host.kind !== 'host' || host.segment === undefined) return {};
  if (other.kind === 'switch') {
    const vlan = design.segments[host.segment]?.sites[other.site]?.vlan;
    if (vlan === undefined || port?.vlan !== undefined || port?.mode === 'trunk') return {};
    return { devices: { [plug.device]: { ports: { [plug.port]: { mode: 'access', vlan } } } } };
  }
  const bridge = segmentBridge(design, plug.device, host.segment);
  if (bridge === undefined || !isUnclaimed(design, plug.device, plug.port)) return {};
  const circuit = {
    kind: 'port',
    rank: rankAtEnd(design.forwarders[bridge]!.circuits),
    port: plug.port,
    vlans: 'untagged',
  };
  return {
    devices: { [plug.device]: { ports: { [plug.port]: { mode: 'access', allowedVlans: null } } } },
    forwarders: { [bridge]: { circuits: { [`host-${plug.port}`]: circuit } } },
  };
};

/** A cable between two pips or bodies; the port that a host goes into is set up for it. */
export const pullCable = (design: Design, a: PullEnd, b: PullEnd, newId: NewId): Operation => {
  const why = whyNoCable(design, a, b);
  if (why !== undefined) return refused(why);
  const [deviceA, deviceB] = [design.devices[a.device]!, design.devices[b.device]!];
  const endA = plugFor(design, a, deviceB, newId);
  const endB = plugFor(design, b, deviceA, newId);
  const id = newId('cb');
  return {
    ok: true,
    label: `Cable ${deviceA.name} to ${deviceB.name}`,
    patch: joinPatches(design, [
      endA.patch,
      endB.patch,
      { links: { [id]: { kind: 'cable', a: { ...endA.plug }, b: { ...endB.plug } } } },
      setUpFor(design, deviceA, endB.plug),
      setUpFor(design, deviceB, endA.plug),
    ]),
    created: [{ collection: 'links', id }],
  };
};

/** Why a port can't land on a transport; undefined when it can. */
export const whyNoLanding = (design: Design, end: PullEnd, transport: string): string | undefined => {
  const device = design.devices[end.device];
  const target = design.transports[transport];
  if (device === undefined || target === undefined) return 'That is no longer there.';
  if (device.kind === 'host' || device.kind === 'switch')
    return `A ${device.kind} does not land on a routed transport: a firewall, an HA pair or a router does.`;
  const port = end.port === undefined ? firstFreeWan(design, end) : end.port;
  const facts = port === undefined ? undefined : device.ports[port];
  if (port === undefined || facts === undefined)
    return `${device.name} has no free WAN port: add one in its inspector.`;
  const name = portName(device, port, facts, undefined);
  if (facts.role !== 'wan') return `${name} is a LAN port: only WAN ports land on a transport.`;
  if (linksIn(design, end.device, port, undefined).length > 0)
    return `${name} has already landed: remove that landing first.`;
  return undefined;
};

const firstFreeWan = (design: Design, end: PullEnd): string | undefined =>
  byNumber(design.devices[end.device]!).find(
    ([id, port]) => port.role === 'wan' && linksIn(design, end.device, id, undefined).length === 0,
  )?.[0];

/** A WAN port's landing; both members of a pair land their port of that number. */
export const landPort = (design: Design, end: PullEnd, transport: string, newId: NewId): Operation => {
  const why = whyNoLanding(design, end, transport);
  if (why !== undefined) return refused(why);
  const port = end.port ?? firstFreeWan(design, end)!;
  const id = newId('ld');
  return {
    ok: true,
    label: `Land ${design.devices[end.device]!.name} on ${design.transports[transport]!.name}`,
    patch: { links: { [id]: { kind: 'landing', device: end.device, port, transport } } },
    created: [{ collection: 'links', id }],
  };
};
