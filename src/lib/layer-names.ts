import type { Layer } from '../engine/wire/layer.ts';

const shortNames: Readonly<Record<string, string>> = {
  preamble: 'preamble',
  'outer-ethernet': 'Eth',
  pppoe: 'PPPoE',
  ppp: 'PPP',
  access: 'access',
  'outer-ip': 'IP',
  'nat-traversal-udp': 'UDP',
  'esp-header': 'ESP',
  'esp-iv': 'IV',
  'vxlan-ip': 'IP',
  'vxlan-udp': 'UDP',
  vxlan: 'VXLAN',
  'inner-ethernet': 'Eth',
  'inner-ip': 'IP',
  'inner-packet': 'packet',
  'inner-payload': 'payload',
  'inner-padding': 'fill',
  'esp-padding': 'pad',
  'esp-trailer': 'end',
  'esp-icv': 'ICV',
  'frame-padding': 'fill',
  fcs: 'FCS',
  gap: 'gap',
};

/** A layer's name where there is room for one word only. */
export const shortNameOf = ({ id, name }: Layer): string =>
  shortNames[id] ?? (/-tag-\d$/.test(id) ? 'tag' : name);

const outsideFrame: ReadonlySet<string> = new Set(['preamble', 'gap']);
const outsideIpPacket: ReadonlySet<string> = new Set([
  ...outsideFrame,
  ...['outer-ethernet', 'pppoe', 'ppp', 'access', 'frame-padding', 'fcs'],
]);

/** Whether a layer is between the Ethernet header and the FCS, both included. */
export const isInFrame = ({ id }: Layer): boolean => !outsideFrame.has(id);

/** Whether a layer is part of the outermost IP packet, which a transport's MTU is compared with. */
export const isInIpPacket = ({ id }: Layer): boolean =>
  !outsideIpPacket.has(id) && !id.startsWith('outer-tag-');
