import type { PortCircuit, Port } from './network.ts';

/**
 * The VLAN tags of a frame as one number: the outer VLAN in the low 12 bits, the inner one above; 0 is untagged. Two tags
 * are as many as a frame can have here.
 */
export type Tags = number;
export const untagged: Tags = 0;
export const outerVlan = (tags: Tags): number => tags & 0xfff;
export const innerVlan = (tags: Tags): number => tags >> 12;
export const popTag = (tags: Tags): Tags => tags >> 12;
/** Undefined where the frame has two tags already. */
export const pushTag = (tags: Tags, vlan: number): Tags | undefined =>
  innerVlan(tags) === 0 ? (tags << 12) | vlan : undefined;
export const withOuterVlan = (tags: Tags, vlan: number): Tags => (innerVlan(tags) << 12) | vlan;
/** Outermost first. */
export const tagList = (tags: Tags): readonly number[] =>
  tags === untagged ? [] : innerVlan(tags) === 0 ? [outerVlan(tags)] : [outerVlan(tags), innerVlan(tags)];

// IEEE 802.1Q-2022 table 9-2, from memory: 1 is the default PVID of a bridge's port.
export const defaultVlan = 1;

/** A port whose mode is not stated is a trunk if it names allowed VLANs or a native one, an access port otherwise. */
export const isTrunk = (port: Port): boolean =>
  port.mode === undefined
    ? port.vlan === undefined && (port.allowedVlans !== undefined || port.nativeVlan !== undefined)
    : port.mode === 'trunk';

export const accessVlan = (port: Port): number => port.vlan ?? defaultVlan;

const allowed = (port: Port, vlan: number): boolean =>
  port.allowedVlans === undefined ||
  port.allowedVlans === 'all' ||
  port.nativeVlan === vlan ||
  port.allowedVlans.includes(vlan);

/** The tags of a frame inside a switch, where each has a VLAN, when it comes in at this port; undefined where the port drops it. */
export const switchIn = (port: Port, tags: Tags): Tags | undefined => {
  const vlan = outerVlan(tags);
  if (!isTrunk(port)) return vlan === 0 ? accessVlan(port) : undefined;
  if (vlan === 0) return port.nativeVlan;
  return allowed(port, vlan) ? tags : undefined;
};

/** The tags with which a frame inside a switch leaves at this port; undefined where it may not. */
export const switchOut = (port: Port, tags: Tags): Tags | undefined => {
  const vlan = outerVlan(tags);
  if (!isTrunk(port)) return vlan === accessVlan(port) ? popTag(tags) : undefined;
  if (vlan === port.nativeVlan) return popTag(tags);
  return allowed(port, vlan) ? tags : undefined;
};

/** Whether a gateway's port lets a frame with these tags through, in either direction, before any circuit is asked. */
export const gatewayPortCarries = (port: Port, tags: Tags): boolean => {
  const vlan = outerVlan(tags);
  if (vlan === 0) return true;
  if (port.mode === 'access' || (port.mode === undefined && port.vlan !== undefined)) return false;
  return port.nativeVlan !== vlan && allowed(port, vlan);
};

/** Whether a circuit takes the tag off on the way in: as it says, or where it has a single VLAN and translates nothing. */
export const circuitRemovesTag = (circuit: PortCircuit): boolean =>
  circuit.tag === undefined
    ? typeof circuit.vlans !== 'string' && circuit.vlans.length === 1 && circuit.translate === undefined
    : circuit.tag === 'removed' && circuit.vlans !== 'untagged';

/** The tags inside the forwarder of a frame that comes in on this circuit; undefined where the circuit doesn't claim it. */
export const circuitIn = (circuit: PortCircuit, tags: Tags): Tags | undefined => {
  const vlan = outerVlan(tags);
  if (circuit.vlans === 'untagged') return vlan === 0 ? tags : undefined;
  if (circuit.vlans !== 'all' && !circuit.vlans.includes(vlan)) return undefined;
  if (vlan === 0) return tags;
  return circuitRemovesTag(circuit)
    ? popTag(tags)
    : withOuterVlan(tags, circuit.translate?.[String(vlan)] ?? vlan);
};

const wireVlan = (circuit: PortCircuit, vlan: number): number | undefined => {
  const translate = circuit.translate ?? {};
  const translated = Object.entries(translate)
    .filter(([, inside]) => inside === vlan)
    .map(([wire]) => Number(wire))
    .concat(translate[String(vlan)] === undefined ? [vlan] : [])
    .filter((wire) => circuit.vlans === 'all' || (circuit.vlans as readonly number[]).includes(wire));
  return translated[0];
};

/**
 * The tags with which a frame inside the forwarder leaves on this circuit, one entry for each copy; none where it may not. A
 * circuit of several VLANs that takes their tags off merges them, so that a copy leaves in each.
 */
export const circuitOut = (circuit: PortCircuit, tags: Tags): readonly Tags[] => {
  if (circuit.vlans === 'untagged') return tags === untagged ? [untagged] : [];
  if (circuitRemovesTag(circuit)) {
    if (circuit.vlans === 'all') return [tags];
    return circuit.vlans.map((vlan) => pushTag(tags, vlan)).filter((out) => out !== undefined);
  }
  if (tags === untagged) return circuit.vlans === 'all' ? [untagged] : [];
  const vlan = wireVlan(circuit, outerVlan(tags));
  return vlan === undefined ? [] : [withOuterVlan(tags, vlan)];
};
