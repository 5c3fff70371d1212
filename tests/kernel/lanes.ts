import type { Design } from '#engine/model/design.ts';

type Device = Design['devices'][string];
type Cable = Extract<Design['links'][string], { kind: 'cable' }>;
export type Plug = Cable['a'];

/** One end of a lane: the bridge it belongs to, or none on a host. */
export interface LaneEnd {
  readonly device: string;
  readonly bridge?: string;
  readonly isolated: boolean;
  /** The circuit that it is, on a gateway. */
  readonly circuit?: { readonly forwarder: string; readonly id: string };
  readonly mtuBytes?: number;
}

/**
 * A pair of virtual interfaces that carries what one VLAN, or all frames untouched, of a cable would. A kernel need not know VLAN
 * devices for this: where a design puts a tag on and takes it off again, its lane is a cable of its own.
 */
export interface Lane {
  readonly cable: string;
  readonly a: LaneEnd;
  readonly b: LaneEnd;
}

/** `untagged`, a VLAN, `any` VLAN that the other end names, or `raw`: frames as they are. */
type Content = 'untagged' | 'any' | 'raw' | number;
type Claim = LaneEnd & { readonly content: Content };

export const bridgeOfVlan = (vlan: number): string => `vlan${vlan}`;
export const bridgeOfForwarder = (design: Design, forwarder: string): string =>
  `br${Object.keys(design.forwarders).sort().indexOf(forwarder)}`;

const refuse = (what: string): never => {
  throw new Error(`${what}: the lab does not raise this`);
};

const claimsOfGateway = (design: Design, plug: Plug): readonly Claim[] =>
  Object.entries(design.forwarders)
    .filter(([, forwarder]) => forwarder.device === plug.device)
    .flatMap(([forwarder, { circuits, kind }]) =>
      Object.entries(circuits).flatMap(([id, circuit]): readonly Claim[] => {
        if (circuit.kind !== 'port' || circuit.port !== plug.port) return [];
        if (kind !== 'bridge' || circuit.translate !== undefined) return refuse(`circuit ${id}`);
        const at = {
          device: plug.device,
          bridge: bridgeOfForwarder(design, forwarder),
          isolated: circuit.isolation !== undefined,
          circuit: { forwarder, id },
        };
        if (circuit.vlans === 'all') return [{ ...at, content: 'raw' }];
        if (circuit.vlans === 'untagged') return [{ ...at, content: 'untagged' }];
        const [vlan, ...more] = circuit.vlans;
        if (more.length > 0 || circuit.tag === 'kept') return refuse(`circuit ${id}`);
        return [{ ...at, content: vlan! }];
      }),
    );

const claimsOf = (design: Design, plug: Plug): readonly Claim[] => {
  const device: Device = design.devices[plug.device]!;
  const port = device.ports[plug.port]!;
  if (port.shut === true || port.role === 'member-link') return [];
  if (port.aggregation !== undefined || port.nativeVlan !== undefined) return refuse(`port ${plug.port}`);
  const own = { device: plug.device, isolated: false, mtuBytes: port.mtu };
  if (device.kind === 'host') return [{ ...own, content: port.mode === 'trunk' ? 'raw' : 'untagged' }];
  if (device.kind === 'switch') {
    if (port.mode !== 'trunk') {
      const vlan = port.vlan ?? 1;
      return [{ ...own, content: 'untagged', bridge: bridgeOfVlan(vlan) }];
    }
    const { allowedVlans = 'all' } = port;
    return allowedVlans === 'all'
      ? [{ ...own, content: 'any' }]
      : allowedVlans.map((vlan) => ({ ...own, content: vlan, bridge: bridgeOfVlan(vlan) }));
  }
  if (device.kind === 'ha-pair' && (plug.member ?? 1) !== (device.active ?? 1)) return [];
  return claimsOfGateway(design, plug).map((claim) => ({ ...claim, mtuBytes: port.mtu }));
};

const meet = (a: Claim, b: Claim): readonly [Claim, Claim] | undefined => {
  if (a.content === b.content && a.content !== 'any') return [a, b];
  if (a.content === 'any' && typeof b.content === 'number')
    return [{ ...a, bridge: bridgeOfVlan(b.content) }, b];
  if (b.content === 'any' && typeof a.content === 'number')
    return [a, { ...b, bridge: bridgeOfVlan(a.content) }];
  const [raw, other] = a.content === 'raw' ? [a, b] : [b, a];
  if (raw.content !== 'raw' || other.content !== 'untagged') return undefined;
  // A host that sends and takes untagged frames is none the worse for a cable that could carry more; a bridge is.
  return other.bridge === undefined ? [a, b] : refuse(`untagged frames into a port of ${raw.device}`);
};

/** What has to be plugged so that the kernel's bridges are joined as the design's cables, VLANs and circuits say. */
export const lanesOf = (design: Design): readonly Lane[] =>
  Object.entries(design.links).flatMap(([cable, link]) => {
    if (link.kind !== 'cable') return [];
    const far = claimsOf(design, link.b);
    return claimsOf(design, link.a).flatMap((near) =>
      far.flatMap((other) => {
        const met = meet(near, other);
        return met === undefined ? [] : [{ cable, a: met[0], b: met[1] }];
      }),
    );
  });
