import type { Design } from '#engine/model/design.ts';
import type { Lane } from './lanes.ts';
import { bridgeOfForwarder, lanesOf } from './lanes.ts';
import { netnsOf } from './namespaces.ts';
import type { NetworkInterface } from './probe.ts';

type Landing = Extract<Design['links'][string], { kind: 'landing' }>;
type End = 'a' | 'b';

/** What to run to raise a design, and where its parts are then found. */
export interface RaisePlan {
  readonly script: string;
  /** Namespaces that hold bridges. */
  readonly bridging: readonly string[];
  readonly hosts: Readonly<Record<string, NetworkInterface>>;
  /** By landing: the interface of the transport's router towards it, where its packets come in. */
  readonly underlay: Readonly<Record<string, NetworkInterface>>;
  /** By forwarder and interface: the circuit that the interface is; several where tunnels share a device. */
  readonly circuits: Readonly<Record<string, Readonly<Record<string, readonly string[]>>>>;
  /** By tunnel: its interface at each end. */
  readonly tunnels: Readonly<Record<string, readonly NetworkInterface[]>>;
  /** What carries frames between devices, by namespace. */
  readonly cut: readonly { readonly netns: string; readonly interfaces: readonly string[] }[];
}

const transportNetns = (transport: string): string => netnsOf(`transport-${transport}`);
const isGateway = (kind: string): boolean => kind === 'firewall' || kind === 'router' || kind === 'ha-pair';
const bare = (cidr: string): string => cidr.split('/')[0]!;
const isIpv6 = (address: string): boolean => address.includes(':');
const whole = (address: string): string => `${bare(address)}/${isIpv6(address) ? 128 : 32}`;
/** Addresses of a transport's router; documentation addresses that no design uses for a landing. */
const routerAddress = (address: string): string => (isIpv6(address) ? '2001:db8:ffff::1' : '192.0.2.254');

const onlyVia = (design: Design, device: string, via: Design['tunnels'][string]['a']['via']): string => {
  const named = Object.values(via ?? {}).map((entry) => entry.landing);
  const all = Object.keys(design.links).filter((id) => {
    const link = design.links[id]!;
    return link.kind === 'landing' && link.device === device;
  });
  const [landing, ...more] = named.length > 0 ? named : all;
  if (landing === undefined || more.length > 0)
    throw new Error(`tunnel of ${device}: the lab wants one landing for it, not ${more.length + 1}`);
  return landing;
};

/** Lines for one namespace, kept together so that they run as one batch. */
type Lines = Map<string, string[]>;

const quiet = (lines: Lines, netns: string): string[] => {
  const known = lines.get(netns);
  if (known !== undefined) return known;
  const fresh = ['link set lo up'];
  lines.set(netns, fresh);
  return fresh;
};

const addAddress = (netnsLines: string[], address: string, device: string): void => {
  netnsLines.push(`addr add ${whole(address)} dev ${device}${isIpv6(address) ? ' nodad' : ''}`);
};

interface Raised {
  readonly lines: Lines;
  readonly pairs: string[];
  readonly cut: Map<string, string[]>;
}

const plugPair = (
  { lines, pairs, cut }: Raised,
  a: NetworkInterface & { readonly mtuBytes?: number },
  b: NetworkInterface & { readonly mtuBytes?: number },
): void => {
  quiet(lines, a.netns);
  quiet(lines, b.netns);
  pairs.push(
    `link add name ${a.interface} netns ${a.netns} type veth peer name ${b.interface} netns ${b.netns}`,
  );
  for (const end of [a, b]) {
    const mtu = end.mtuBytes === undefined ? '' : ` mtu ${end.mtuBytes}`;
    lines.get(end.netns)!.push(`link set ${end.interface}${mtu} up`);
    cut.set(end.netns, [...(cut.get(end.netns) ?? []), end.interface]);
  }
};

const bridgeLine = (name: string, spanningTree: { mode: string; priority?: number } | undefined): string =>
  // IEEE 802.1Q allows a forward delay from 4 s; the kernel takes 2 s, and no one has to wait longer here. Snooping off:
  // queries of the bridge's own would show up as its own address in forwarding tables.
  `link add name ${name} type bridge mcast_snooping 0 ageing_time 30000${
    spanningTree?.mode === 'on'
      ? ` forward_delay 200 hello_time 100 max_age 600 stp_state 1 priority ${spanningTree.priority ?? 32_768}`
      : ' stp_state 0'
  }`;

const isolationGroups = (forwarder: Design['forwarders'][string]): ReadonlySet<string> =>
  new Set(Object.values(forwarder.circuits).flatMap(({ isolation }) => isolation ?? []));

const raiseBridges = ({ lines }: Raised, design: Design, lanes: readonly Lane[]): void => {
  for (const [id, forwarder] of Object.entries(design.forwarders)) {
    if (isolationGroups(forwarder).size > 1)
      throw new Error(`forwarder ${id}: the kernel knows one isolation group, not several`);
    quiet(lines, netnsOf(forwarder.device)).push(
      bridgeLine(bridgeOfForwarder(design, id), forwarder.spanningTree),
      `link set ${bridgeOfForwarder(design, id)} up`,
    );
  }
  const bridges = new Set(lanes.flatMap(({ a, b }) => [a, b]).map((end) => `${end.device} ${end.bridge}`));
  for (const [id, device] of Object.entries(design.devices)) {
    if (device.kind !== 'switch') continue;
    for (const bridge of bridges) {
      const [owner, name] = bridge.split(' ');
      if (owner === id)
        quiet(lines, netnsOf(id)).push(
          bridgeLine(name!, device.settings?.spanningTree),
          `link set ${name} up`,
        );
    }
  }
};

const enslave = (into: string[], name: string, bridge: string, isolated: boolean): void => {
  into.push(`link set ${name} master ${bridge}`);
  if (isolated) into.push(`link set ${name} type bridge_slave isolated on`);
};

const raiseLandings = (raised: Raised, design: Design): RaisePlan['underlay'] => {
  const underlay: Record<string, NetworkInterface> = {};
  Object.entries(design.links).forEach(([id, link], index) => {
    if (link.kind !== 'landing') return;
    const landing: Landing = link;
    if (landing.nat !== undefined || landing.accessOverhead !== undefined)
      throw new Error(`landing ${id}: the lab raises no NAT and no access overhead`);
    const gateway = netnsOf(landing.device);
    const router = transportNetns(landing.transport);
    const [wan, outside] = [`wan${index}`, `to${index}`];
    const { mtu } = design.transports[landing.transport]!;
    plugPair(
      raised,
      { netns: gateway, interface: wan, mtuBytes: mtu },
      { netns: router, interface: outside, mtuBytes: mtu },
    );
    underlay[id] = { netns: router, interface: outside };
    for (const address of [landing.ipv4, landing.ipv6]) {
      if (address === undefined) continue;
      const gatewayLines = raised.lines.get(gateway)!;
      const routerLines = raised.lines.get(router)!;
      addAddress(gatewayLines, address, wan);
      const next = routerAddress(address);
      gatewayLines.push(`route add ${whole(next)} dev ${wan}`);
      // The router has the same address on every side; interfaces need it only as their neighbour's next hop.
      addAddress(routerLines, next, outside);
      routerLines.push(`route add ${whole(address)} dev ${outside}`);
      // The way to every other landing of the transport.
      for (const other of Object.values(design.links)) {
        if (other.kind !== 'landing' || other.transport !== landing.transport || other === link) continue;
        const far = isIpv6(address) ? other.ipv6 : other.ipv4;
        if (far !== undefined) gatewayLines.push(`route add ${whole(far)} via ${next} dev ${wan} onlink`);
      }
    }
  });
  return underlay;
};

const addressOf = (design: Design, tunnel: Design['tunnels'][string], end: End): string => {
  const { ipv4, ipv6 } = design.endpoints[tunnel[end].endpoint]!;
  return bare((tunnel.family === 6 ? ipv6 : ipv4) ?? ipv6 ?? '');
};

/** Routes for a tunnel without protection: its packets are seen by the transport as they are. */
const routeBareTunnel = (raised: Raised, design: Design, tunnel: Design['tunnels'][string]): void => {
  for (const end of ['a', 'b'] as const) {
    const device = design.endpoints[tunnel[end].endpoint]!.device;
    const id = onlyVia(design, device, tunnel[end].via);
    const landing = design.links[id] as Landing;
    const index = Object.keys(design.links).indexOf(id);
    const [own, far] = [addressOf(design, tunnel, end), addressOf(design, tunnel, end === 'a' ? 'b' : 'a')];
    const outside = (isIpv6(own) ? landing.ipv6 : landing.ipv4)!;
    raised.lines
      .get(netnsOf(device))!
      .push(`route replace ${whole(far)} via ${routerAddress(far)} dev wan${index} onlink`);
    raised.lines
      .get(transportNetns(landing.transport))!
      .push(`route replace ${whole(own)} via ${outside} dev to${index} onlink`);
  }
};

const outerDf = { set: 'set', clear: 'unset', inherit: 'inherit' } as const;

const raiseTunnels = (raised: Raised, design: Design): Pick<RaisePlan, 'tunnels' | 'circuits'> => {
  const tunnels: Record<string, NetworkInterface[]> = {};
  const circuits: Record<string, Record<string, string[]>> = {};
  const shared = new Map<string, string>();
  for (const [id, endpoint] of Object.entries(design.endpoints))
    for (const address of [endpoint.ipv4, endpoint.ipv6])
      if (address !== undefined) addAddress(quiet(raised.lines, netnsOf(endpoint.device)), address, 'lo');
      else if (endpoint.member !== undefined) throw new Error(`endpoint ${id}: the lab raises whole pairs`);
  Object.entries(design.tunnels).forEach(([id, tunnel], index) => {
    if (tunnel.association === undefined) routeBareTunnel(raised, design, tunnel);
    tunnels[id] = [];
    for (const end of ['a', 'b'] as const) {
      const { endpoint, vni, udpPort = 4789, outerDf: df = 'clear' } = tunnel[end];
      const device = design.endpoints[endpoint]!.device;
      const netns = netnsOf(device);
      const into = raised.lines.get(netns)!;
      const { profile } = design.devices[device]!;
      const isMultipoint = profile !== undefined && design.profiles[profile]!.vniScope === 'multipoint';
      const circuit = Object.entries(design.forwarders).flatMap(([forwarder, entry]) =>
        entry.device !== device
          ? []
          : Object.entries(entry.circuits).flatMap(([circuitId, one]) =>
              one.kind === 'tunnel' && one.tunnel === id ? [{ forwarder, circuitId, one }] : [],
            ),
      )[0];
      const far = addressOf(design, tunnel, end === 'a' ? 'b' : 'a');
      const known = isMultipoint ? shared.get(`${endpoint} ${vni}`) : undefined;
      const name = known ?? `vx${index}`;
      tunnels[id].push({ netns, interface: name });
      if (circuit !== undefined) ((circuits[circuit.forwarder] ??= {})[name] ??= []).push(circuit.circuitId);
      if (known !== undefined) {
        into.push(`BRIDGE fdb append 00:00:00:00:00:00 dev ${name} dst ${far}`);
        continue;
      }
      shared.set(`${endpoint} ${vni}`, name);
      const fragments = isIpv6(far) ? '' : ` df ${outerDf[df]}`;
      into.push(
        `link add name ${name} type vxlan id ${vni} local ${addressOf(design, tunnel, end)} remote ${far} dstport ${udpPort} ttl 64${fragments}`,
        `link set ${name} up`,
      );
      if (circuit !== undefined)
        enslave(
          into,
          name,
          bridgeOfForwarder(design, circuit.forwarder),
          circuit.one.isolation !== undefined,
        );
    }
  });
  return { tunnels, circuits };
};

const inside = (netns: string, ...commands: readonly string[]): string =>
  `ip netns exec ${netns} sh -e -c '\n${commands.join('\n')}\n'`;

// A kernel that speaks IPv6 of its own accord would flood a loop before anybody has sent a frame.
const withoutIpv6 = [
  'echo 1 > /proc/sys/net/ipv6/conf/all/disable_ipv6',
  'echo 1 > /proc/sys/net/ipv6/conf/default/disable_ipv6',
];

/** Towards the underlay IPv6 is spoken, at once: nobody else has these addresses. */
const withIpv6Outside = [
  'for interface in /proc/sys/net/ipv6/conf/lo /proc/sys/net/ipv6/conf/wan* /proc/sys/net/ipv6/conf/to*',
  'do if test -d $interface; then echo 0 > $interface/accept_dad; echo 0 > $interface/disable_ipv6; fi',
  'done',
  'echo 1 > /proc/sys/net/ipv6/conf/all/forwarding',
];

const scriptOf = (design: Design, { lines, pairs }: Raised): string => {
  const usesIpv6 = Object.values(design.endpoints).some(({ ipv6 }) => ipv6 !== undefined);
  const routing = new Set([
    ...Object.keys(design.transports).map(transportNetns),
    ...Object.entries(design.devices).flatMap(([id, { kind }]) => (isGateway(kind) ? [netnsOf(id)] : [])),
  ]);
  const parts = [...lines.keys()].flatMap((netns) => [
    `ip netns add ${netns}`,
    inside(netns, ...withoutIpv6, ...(routing.has(netns) ? ['echo 1 > /proc/sys/net/ipv4/ip_forward'] : [])),
  ]);
  parts.push("ip -batch - <<'END'", ...pairs, 'END');
  for (const [netns, commands] of lines) {
    if (usesIpv6 && routing.has(netns)) parts.push(inside(netns, ...withIpv6Outside));
    const flood = commands.filter((line) => line.startsWith('BRIDGE '));
    parts.push(`ip -n ${netns} -batch - <<'END'`, ...commands.filter((line) => !flood.includes(line)), 'END');
    parts.push(...flood.map((line) => `bridge -n ${netns} ${line.slice('BRIDGE '.length)}`));
  }
  return parts.join('\n');
};

/** How to raise a design: a namespace for each device and each transport, a bridge for each forwarder and each VLAN of a switch. */
export const planToRaise = (design: Design): RaisePlan => {
  const raised: Raised = { lines: new Map(), pairs: [], cut: new Map() };
  for (const id of Object.keys(design.devices)) quiet(raised.lines, netnsOf(id));
  const lanes = lanesOf(design);
  raiseBridges(raised, design, lanes);
  const hosts: Record<string, NetworkInterface> = {};
  const portCircuits: Record<string, Record<string, string[]>> = {};
  lanes.forEach((lane, index) => {
    const ends = [
      { netns: netnsOf(lane.a.device), interface: `p${index}a`, mtuBytes: lane.a.mtuBytes },
      { netns: netnsOf(lane.b.device), interface: `p${index}b`, mtuBytes: lane.b.mtuBytes },
    ] as const;
    plugPair(raised, ...ends);
    [lane.a, lane.b].forEach((end, i) => {
      const at = ends[i]!;
      if (end.bridge !== undefined)
        enslave(raised.lines.get(at.netns)!, at.interface, end.bridge, end.isolated);
      else hosts[end.device] = { netns: at.netns, interface: at.interface };
      if (end.circuit !== undefined)
        (portCircuits[end.circuit.forwarder] ??= {})[at.interface] = [end.circuit.id];
    });
  });
  const underlay = raiseLandings(raised, design);
  const { tunnels, circuits } = raiseTunnels(raised, design);
  const bridging = Object.entries(design.devices)
    .filter(([, { kind }]) => kind !== 'host')
    .map(([id]) => netnsOf(id));
  return {
    script: scriptOf(design, raised),
    bridging,
    hosts,
    underlay,
    tunnels,
    circuits: Object.fromEntries(
      Object.keys(design.forwarders).map((id) => [id, { ...portCircuits[id], ...circuits[id] }]),
    ),
    cut: [...raised.cut].map(([netns, interfaces]) => ({ netns, interfaces })),
  };
};
