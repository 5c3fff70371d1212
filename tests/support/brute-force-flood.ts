import type { Design } from '#engine/model/design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { canComeUp } from '#engine/network/can-come-up.ts';

/**
 * The slow, obvious way to flood: copies of one frame walk the design itself from device to device, round by round. Nothing
 * of it is shared with the flood graph. Spanning tree and link-down are no part of it.
 */

type End = 'a' | 'b';
/** Outermost first. */
type Frame = readonly number[];
type Device = Design['devices'][string];
type Port = Device['ports'][string];
type Cable = Extract<Design['links'][string], { kind: 'cable' }>;

/** A copy on its way along a cable or a tunnel, to the end named. */
interface Copy {
  readonly link: 'cable' | 'tunnel';
  readonly id: string;
  readonly to: End;
  readonly frame: Frame;
}

export interface Flooded {
  readonly storm: boolean;
  /** Copies that each host took; meaningless in a storm. */
  readonly copies: ReadonlyMap<string, number>;
}

const has = (list: readonly number[] | 'all' | undefined, vlan: number): boolean =>
  list === undefined || list === 'all' || list.includes(vlan);
const forwards = (device: Device, member: number): boolean =>
  device.kind !== 'ha-pair' || device.mode === 'active-active' || (device.active ?? 1) === member;
const trunk = (port: Port): boolean =>
  port.mode === 'trunk' ||
  (port.mode === undefined &&
    port.vlan === undefined &&
    (port.allowedVlans !== undefined || port.nativeVlan !== undefined));

export const bruteForceFlood = (design: Design) => {
  const memberOf = (plug: Cable['a']): number =>
    design.devices[plug.device]!.kind === 'ha-pair' ? (plug.member ?? 1) : 1;
  const network = indexNetwork(design);
  const cables = Object.entries(design.links)
    .filter((link): link is [string, Cable] => link[1].kind === 'cable')
    .sort(([a], [b]) => (a < b ? -1 : 1));
  const samePort = (device: Device, x: string, y: string): boolean =>
    x === y ||
    (device.ports[x]!.aggregation !== undefined &&
      device.ports[x]!.aggregation === device.ports[y]!.aggregation);
  const leading = (device: Device, port: string): Port => {
    const members = Object.entries(device.ports)
      .filter(([id]) => samePort(device, id, port))
      .sort(([idA, a], [idB, b]) => a.number - b.number || (idA < idB ? -1 : 1));
    return members[0]![1];
  };

  /** Sends a frame out of a port, or of one cable of the aggregate that the port is in. */
  const send = (deviceId: string, member: number, port: string, frame: Frame): Copy[] => {
    const device = design.devices[deviceId]!;
    const plugged = cables.flatMap(([id, cable]) =>
      (['a', 'b'] as const)
        .filter((end) => {
          const plug = cable[end];
          return plug.device === deviceId && memberOf(plug) === member && samePort(device, plug.port, port);
        })
        .map((end) => ({ id, to: end === 'a' ? ('b' as const) : ('a' as const), cable })),
    );
    const alive = plugged.filter(({ cable }) =>
      [cable.a, cable.b].every((plug) => {
        const at = design.devices[plug.device]!.ports[plug.port]!;
        return at.shut !== true && at.role !== 'member-link';
      }),
    );
    const speaking = alive.filter(({ cable, to }) =>
      forwards(design.devices[cable[to].device]!, memberOf(cable[to])),
    );
    const isAggregate = device.ports[port]!.aggregation !== undefined;
    const used = isAggregate ? [speaking[0] ?? alive[0]].filter((one) => one !== undefined) : alive;
    // Several cables of one aggregate at the far end are one way, too.
    const taken = new Set<string>();
    return used.flatMap(({ id, to, cable }) => {
      const far = cable[to];
      const aggregation = design.devices[far.device]!.ports[far.port]!.aggregation;
      const key = aggregation === undefined ? id : `${far.device} ${memberOf(far)} ${aggregation}`;
      if (taken.has(key)) return [];
      taken.add(key);
      return [{ link: 'cable' as const, id, to, frame }];
    });
  };

  const insideSwitch = (deviceId: string, inPort: string | undefined, frame: Frame): Copy[] => {
    const device = design.devices[deviceId]!;
    const [vlan, ...rest] = frame;
    const done = new Set<string>();
    return Object.keys(device.ports).flatMap((id) => {
      if (device.ports[id]!.role === 'member-link') return [];
      if (inPort !== undefined && samePort(device, id, inPort)) return [];
      const group = device.ports[id]!.aggregation;
      if (group !== undefined && done.has(group)) return [];
      if (group !== undefined) done.add(group);
      const port = leading(device, id);
      if (!trunk(port)) return vlan === (port.vlan ?? 1) ? send(deviceId, 1, id, rest) : [];
      if (vlan === port.nativeVlan) return send(deviceId, 1, id, rest);
      return has(port.allowedVlans, vlan!) ? send(deviceId, 1, id, frame) : [];
    });
  };

  const intoSwitch = (deviceId: string, inPort: string, frame: Frame): Copy[] => {
    const port = leading(design.devices[deviceId]!, inPort);
    const [vlan] = frame;
    if (!trunk(port)) return vlan === undefined ? insideSwitch(deviceId, inPort, [port.vlan ?? 1]) : [];
    if (vlan === undefined)
      return port.nativeVlan === undefined ? [] : insideSwitch(deviceId, inPort, [port.nativeVlan]);
    return vlan === port.nativeVlan || has(port.allowedVlans, vlan)
      ? insideSwitch(deviceId, inPort, frame)
      : [];
  };

  const portPasses = (port: Port, frame: Frame): boolean => {
    const [vlan] = frame;
    if (vlan === undefined) return true;
    if (port.mode === 'access' || (port.mode === undefined && port.vlan !== undefined)) return false;
    return vlan !== port.nativeVlan && has(port.allowedVlans, vlan);
  };

  /** An ARP request through the policy of a cross-connect, for the plain rules that generated designs have. */
  const policyPasses = (forwarder: Design['forwarders'][string], toTunnel: boolean): boolean => {
    if (forwarder.kind === 'bridge') return true;
    const rules = Object.entries(forwarder.policy ?? {}).sort(([, a], [, b]) => (a.rank < b.rank ? -1 : 1));
    for (const [, rule] of rules) {
      if (rule.direction === 'to-tunnel' && !toTunnel) continue;
      if (rule.direction === 'from-tunnel' && toTunnel) continue;
      if (!['any', 'arp', 'broadcast'].includes(rule.frames)) continue;
      return rule.action === 'permit';
    }
    return false;
  };

  const endOn = (tunnelId: string, device: string): End | undefined =>
    (['a', 'b'] as const).find(
      (end) => design.endpoints[design.tunnels[tunnelId]![end].endpoint]!.device === device,
    );
  const strips = (tunnelId: string, end: End): boolean => {
    const mode = design.tunnels[tunnelId]![end].innerTags;
    const device = design.devices[design.endpoints[design.tunnels[tunnelId]![end].endpoint]!.device]!;
    return mode === undefined ? device.settings?.keepInnerTags !== true : mode === 'strip';
  };

  const insideForwarder = (id: string, member: number, inCircuit: string, frame: Frame): Copy[] => {
    const forwarder = design.forwarders[id]!;
    const device = design.devices[forwarder.device]!;
    const from = forwarder.circuits[inCircuit]!;
    const isMultipoint =
      device.profile !== undefined && design.profiles[device.profile]!.vniScope === 'multipoint';
    return Object.entries(forwarder.circuits).flatMap(([circuitId, to]) => {
      if (circuitId === inCircuit) return [];
      if (to.isolation !== undefined && to.isolation === from.isolation) return [];
      if (!policyPasses(forwarder, to.kind === 'tunnel' || from.kind === 'port')) return [];
      if (to.kind === 'tunnel') {
        const end = endOn(to.tunnel, forwarder.device);
        if (end === undefined) return [];
        const side = design.tunnels[to.tunnel]![end];
        if (isMultipoint && from.kind === 'tunnel') {
          const other = design.tunnels[from.tunnel]![endOn(from.tunnel, forwarder.device)!];
          if (other.endpoint === side.endpoint && other.vni !== undefined && other.vni === side.vni)
            return [];
        }
        const owner = design.endpoints[side.endpoint]!.member;
        if (owner !== undefined && device.kind === 'ha-pair' && owner !== member) return [];
        const wire = strips(to.tunnel, end) ? frame.slice(1) : frame;
        return [{ link: 'tunnel' as const, id: to.tunnel, to: end === 'a' ? 'b' : 'a', frame: wire } as Copy];
      }
      const removes =
        to.tag === undefined
          ? typeof to.vlans !== 'string' && to.vlans.length === 1 && to.translate === undefined
          : to.tag === 'removed';
      const wires: Frame[] = [];
      const [vlan, ...rest] = frame;
      if (to.vlans === 'untagged') {
        if (vlan === undefined) wires.push([]);
      } else if (removes) {
        if (to.vlans === 'all') wires.push(frame);
        else if (frame.length < 2) for (const pushed of to.vlans) wires.push([pushed, ...frame]);
      } else if (vlan === undefined) {
        if (to.vlans === 'all') wires.push([]);
      } else {
        for (let wire = 1; wire <= 4094; wire += 1)
          if ((to.translate?.[String(wire)] ?? wire) === vlan && has(to.vlans, wire)) {
            wires.push([wire, ...rest]);
            break;
          }
      }
      return wires
        .filter((wire) => portPasses(leading(device, to.port), wire))
        .flatMap((wire) => send(forwarder.device, member, to.port, wire));
    });
  };

  const intoGateway = (deviceId: string, member: number, inPort: string, frame: Frame): Copy[] => {
    const device = design.devices[deviceId]!;
    if (!forwards(device, member) || !portPasses(leading(device, inPort), frame)) return [];
    const [vlan, ...rest] = frame;
    return Object.entries(design.forwarders)
      .filter(([, forwarder]) => forwarder.device === deviceId)
      .flatMap(([id, forwarder]) =>
        Object.entries(forwarder.circuits).flatMap(([circuitId, circuit]) => {
          if (circuit.kind !== 'port' || !samePort(device, circuit.port, inPort)) return [];
          const claims =
            circuit.vlans === 'all' ||
            (circuit.vlans === 'untagged'
              ? vlan === undefined
              : vlan !== undefined && circuit.vlans.includes(vlan));
          if (!claims) return [];
          const removes =
            circuit.tag === undefined
              ? typeof circuit.vlans !== 'string' &&
                circuit.vlans.length === 1 &&
                circuit.translate === undefined
              : circuit.tag === 'removed';
          const inside =
            vlan === undefined ? [] : removes ? rest : [circuit.translate?.[String(vlan)] ?? vlan, ...rest];
          return insideForwarder(id, member, circuitId, inside);
        }),
      );
  };

  const outOfTunnel = ({ id, to, frame }: Copy): Copy[] => {
    if (!canComeUp(network, { collection: 'tunnels', id }).up) return [];
    const deviceId = design.endpoints[design.tunnels[id]![to].endpoint]!.device;
    const device = design.devices[deviceId]!;
    const owner = design.endpoints[design.tunnels[id]![to].endpoint]!.member;
    const member =
      owner !== undefined && forwards(device, owner)
        ? owner
        : device.kind === 'ha-pair'
          ? (device.active ?? 1)
          : 1;
    if (strips(id, to) && frame.length > 0) return [];
    return Object.entries(design.forwarders)
      .filter(([, forwarder]) => forwarder.device === deviceId)
      .flatMap(([forwarderId, forwarder]) =>
        Object.entries(forwarder.circuits)
          .filter(([, circuit]) => circuit.kind === 'tunnel' && circuit.tunnel === id)
          .flatMap(([circuitId]) => insideForwarder(forwarderId, member, circuitId, frame)),
      );
  };

  const hostFrame = (id: string, port: Port): Frame => {
    const device = design.devices[id]!;
    if (device.kind !== 'host' || !trunk(port) || device.segment === undefined) return [];
    const vlan = design.segments[device.segment]!.sites[device.site]?.vlan;
    return vlan === undefined ? [] : [vlan];
  };

  const step = (copy: Copy, delivered: (host: string) => void): Copy[] => {
    if (copy.link === 'tunnel') return outOfTunnel(copy);
    const plug = (design.links[copy.id] as Cable)[copy.to];
    const device = design.devices[plug.device]!;
    if (device.kind === 'switch') return intoSwitch(plug.device, plug.port, copy.frame);
    if (device.kind !== 'host') return intoGateway(plug.device, memberOf(plug), plug.port, copy.frame);
    if (hostFrame(plug.device, device.ports[plug.port]!).join() === copy.frame.join()) delivered(plug.device);
    return [];
  };

  const keyOf = (copy: Copy): string => `${copy.link} ${copy.id} ${copy.to} ${copy.frame.join('.')}`;

  /** Equal copies of one round walk together, with a count, so that copies that multiply can be followed long enough. */
  const run = (first: readonly Copy[]): Flooded => {
    const copies = new Map<string, number>();
    const seen = new Set<string>();
    let flying = new Map<string, { copy: Copy; count: number }>();
    const put = (into: typeof flying, copy: Copy, count: number): void => {
      const key = keyOf(copy);
      const before = into.get(key);
      into.set(key, { copy, count: (before?.count ?? 0) + count });
    };
    for (const copy of first) put(flying, copy, 1);
    for (let round = 0; flying.size > 0; round += 1) {
      for (const key of flying.keys()) seen.add(key);
      // More rounds than there are crossings: some copy has crossed one twice and will for ever.
      if (round > seen.size) return { storm: true, copies };
      const next: typeof flying = new Map();
      for (const { copy, count } of flying.values())
        for (const out of step(copy, (host) => copies.set(host, (copies.get(host) ?? 0) + count)))
          put(next, out, count);
      flying = next;
    }
    return { storm: false, copies };
  };

  return {
    fromHost: (id: string): Flooded => {
      const host = design.devices[id]!;
      const done = new Set<string>();
      return run(
        Object.entries(host.ports).flatMap(([portId, port]) => {
          if (port.aggregation !== undefined && done.has(port.aggregation)) return [];
          if (port.aggregation !== undefined) done.add(port.aggregation);
          return send(id, 1, portId, hostFrame(id, leading(host, portId)));
        }),
      );
    },
    /** Whether a frame put into any device, in any of these VLANs or untagged, goes round for ever. */
    canStorm: (vlans: readonly number[]): boolean =>
      Object.entries(design.devices).some(([id, device]) => {
        if (device.kind === 'switch')
          return vlans.some((vlan) => run(insideSwitch(id, undefined, [vlan])).storm);
        if (device.kind === 'host') return false;
        return Object.keys(device.ports).some((port) =>
          [1, 2].some((member) =>
            [[], ...vlans.map((vlan) => [vlan])].some(
              (frame) => run(intoGateway(id, member, port, frame)).storm,
            ),
          ),
        );
      }),
  };
};
