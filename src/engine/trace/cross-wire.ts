import { tunnelStates } from '../network/can-come-up.ts';
import type { TunnelReason } from '../network/can-come-up.ts';
import { tagList } from '../network/frame-tags.ts';
import type { End as TunnelSide } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, otherEnd } from '../network/network.ts';
import type { Id } from '../model/scalars.ts';
import type { ElementRef } from '../model/design.ts';
import { stackKey } from '../wire/largest-through.ts';
import type { TagCount } from '../wire/stack.ts';
import { bareStack } from '../wire/stack.ts';
import { tunnelStack } from '../wire/tunnel-stack.ts';
import type { Crossing, End, Following, Hop } from './follower.ts';
import { dropped, namesOf } from './follower.ts';
import type { bytesOnWire } from './hop-wire.ts';
import { outerFate } from './outer-fate.ts';
import type { HopWire } from './trace.ts';

/** What happens on the wire itself, before anybody at its far end looks at the frame. */
export type Crossed = Omit<Hop, 'onward' | 'stopped' | 'crossing'>;
type BytesOf = ReturnType<typeof bytesOnWire>;

const tagCount = (crossing: Crossing): TagCount => tagList(crossing.tags).length as TagCount;

const crossCable = ({ network, frame }: Following, crossing: Crossing, bytesOf: BytesOf): Crossed => {
  const { step, from, to, ref } = namesOf(network, crossing);
  const bundle = network.bundles[crossing.element]!;
  const outerTags = tagCount(crossing);
  const bytes = bytesOf(`cable ${outerTags}`, { ...bareStack, outerTags });
  const ports = (crossing.direction === 0 ? [bundle.a, bundle.b] : [bundle.b, bundle.a]).map((group) => ({
    device: group.device,
    port: group.port,
    mtuBytes: entryOf(network.design.devices, group.device).ports[group.port]?.mtu,
  }));
  const known = ports.map(({ mtuBytes }) => mtuBytes).filter((mtu) => mtu !== undefined);
  const wire: HopWire | undefined =
    bytes === undefined
      ? undefined
      : {
          layers: bytes.layers,
          outerIpPacketBytes: bytes.outerIpPacketBytes,
          frameBytes: bytes.frameBytes,
          ...(known.length === 0 ? {} : { mtuBytes: Math.min(...known) }),
        };
  // RFC 8899 section 1.1: a layer-2 device with a smaller MTU drops, and nobody is told.
  const tight = ports.find(({ mtuBytes }) => mtuBytes !== undefined && frame.payloadBytes > mtuBytes);
  return {
    step,
    from,
    to,
    elements: [ref],
    facts: [],
    ...(wire === undefined ? {} : { wire }),
    ...(tight === undefined
      ? {}
      : {
          end: dropped({
            code: 'oversize-frame',
            device: tight.device,
            port: tight.port,
            packetBytes: frame.payloadBytes,
            mtuBytes: tight.mtuBytes!,
          }),
        }),
  };
};

const isMetAtFarEnd = ({ code }: TunnelReason): boolean =>
  code === 'vni-mismatch' || code === 'udp-port-mismatch';

/** What keeps the sending gateway from sending at all. */
const endAtSender = (tunnel: Id, reasons: readonly TunnelReason[]): End | undefined => {
  const own = reasons.filter((reason) => !isMetAtFarEnd(reason) && reason.code !== 'transport-filters');
  const down = own.find((reason) => reason.code === 'association-down');
  if (down !== undefined)
    return dropped({
      code: 'association-down',
      tunnel,
      association: down.association,
      reasons: down.reasons,
    });
  return own.length === 0 ? undefined : dropped({ code: 'tunnel-down', tunnel, reasons: own });
};

const endAtFarEnd = (
  tunnel: Id,
  device: Id,
  from: TunnelSide,
  reasons: readonly TunnelReason[],
): End | undefined => {
  const port = reasons.find((reason) => reason.code === 'udp-port-mismatch');
  if (port !== undefined)
    return dropped({ code: 'no-such-udp-port', tunnel, device, sent: port[from], has: port[otherEnd(from)] });
  const vni = reasons.find((reason) => reason.code === 'vni-mismatch');
  return vni === undefined
    ? undefined
    : dropped({ code: 'no-such-vni', tunnel, device, sent: vni[from], has: vni[otherEnd(from)] });
};

const crossTunnel = (following: Following, crossing: Crossing, bytesOf: BytesOf): Crossed => {
  const { network, frame, assume } = following;
  const { step, from: fromRef, to, ref } = namesOf(network, crossing);
  const from: TunnelSide = crossing.direction === 0 ? 'a' : 'b';
  const tunnel = entryOf(network.design.tunnels, ref.id);
  const { reasons } = tunnelStates(network).get(ref.id)!;
  const pipe = tunnelStack(network, ref.id, from, tagCount(crossing));
  const elements: ElementRef[] = [ref];
  if (tunnel.association !== undefined) elements.push({ collection: 'associations', id: tunnel.association });
  if (pipe !== undefined) {
    const landings = [pipe.path.landingA, pipe.path.landingB];
    for (const id of from === 'a' ? landings : landings.reverse()) elements.push({ collection: 'links', id });
    elements.push({ collection: 'transports', id: pipe.path.transport });
  }
  const base = { step, from: fromRef, to, elements };
  const atSender = endAtSender(ref.id, reasons);
  if (atSender !== undefined || pipe === undefined)
    return { ...base, facts: [], end: atSender ?? dropped({ code: 'tunnel-down', tunnel: ref.id, reasons }) };

  const { stack } = pipe;
  const bytes = stack === undefined ? undefined : bytesOf(stackKey(stack), stack);
  const { transport } = pipe.path;
  if (bytes === undefined)
    assume(
      'bytes-unknown',
      ref,
      `How long packets become in ${tunnel.name} isn’t known: addresses of its endpoints or a common ESP proposal are missing. They are taken to fit.`,
    );
  else if (pipe.missing.some((one) => one.ref.collection === 'transports'))
    assume(
      'mtu-unknown',
      { collection: 'transports', id: transport },
      `The MTU of ${entryOf(network.design.transports, transport).name} isn’t known; packets are taken to fit what is known of the ports.`,
    );
  const { vni } = tunnel[from];
  const facts: Hop['facts'][number][] = [
    {
      code: 'encapsulated',
      tunnel: ref.id,
      ...(vni === undefined ? {} : { vni }),
      ...(tunnel.association === undefined ? {} : { association: tunnel.association }),
      ...(bytes === undefined ? {} : { packetBytes: bytes.outerIpPacketBytes }),
    },
  ];
  const wire =
    bytes === undefined
      ? undefined
      : {
          layers: bytes.layers,
          outerIpPacketBytes: bytes.outerIpPacketBytes,
          frameBytes: bytes.frameBytes,
          ...(pipe.mtuBytes === undefined ? {} : { mtuBytes: pipe.mtuBytes }),
        };
  let pieces: Hop['pieces'];
  let end: End | undefined;
  if (
    bytes !== undefined &&
    stack !== undefined &&
    pipe.mtuBytes !== undefined &&
    bytes.outerIpPacketBytes > pipe.mtuBytes
  ) {
    const fate = outerFate(
      network,
      {
        tunnel: ref.id,
        from,
        stack,
        packetBytes: bytes.outerIpPacketBytes,
        outerIpVersion: bytes.outerIpVersion,
        mtuBytes: pipe.mtuBytes,
        pipe,
      },
      frame,
      assume,
    );
    if (fate.fate === 'dropped') end = dropped(fate.reason);
    else {
      ({ pieces } = fate);
      facts.push({
        code: 'fragmented',
        tunnel: ref.id,
        by: fate.by,
        because: fate.because,
        pieces: fate.pieces.length,
      });
      if (entryOf(network.design.transports, transport).filters?.includes('fragments') === true)
        end = dropped({ code: 'transport-filters', tunnel: ref.id, transport, filter: 'fragments' });
      else if (tunnel.association === undefined)
        // RFC 7348 section 4.3: the far endpoint may drop fragments without a word.
        assume(
          'reassembly',
          to,
          'The far endpoint is taken to put fragments together again; it may as well drop them without a word.',
        );
    }
  }
  if (end === undefined && reasons.some(({ code }) => code === 'transport-filters'))
    end = dropped({ code: 'transport-filters', tunnel: ref.id, transport, filter: 'udp-4789' });
  end ??= endAtFarEnd(ref.id, deviceOfTunnelEnd(network, tunnel, otherEnd(from)), from, reasons);
  return {
    ...base,
    facts,
    ...(wire === undefined ? {} : { wire }),
    ...(pieces === undefined ? {} : { pieces }),
    ...(end === undefined ? {} : { end }),
  };
};

/** What one copy meets between two devices: the bytes it has there, and what may cut or end it underway. */
export const crossWire = (following: Following, crossing: Crossing, bytesOf: BytesOf): Crossed =>
  crossing.element < following.network.firstTunnelElement
    ? crossCable(following, crossing, bytesOf)
    : crossTunnel(following, crossing, bytesOf);
