import type { Id } from '../model/scalars.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf } from '../network/network.ts';
import { associationEndOf } from '../network/selectors-cover.ts';
import type { Fragment } from '../wire/fragments-of.ts';
import { fragmentsOf } from '../wire/fragments-of.ts';
import { largestThrough } from '../wire/largest-through.ts';
import type { Stack } from '../wire/stack.ts';
import type { TunnelStack } from '../wire/tunnel-stack.ts';
import { mindsInnerDf } from '../wire/tunnel-stack.ts';
import type { TracedFrame } from './traced-frame.ts';
import type { Assumption, DropReason, FragmentCause } from './trace.ts';

/** What becomes of an outermost packet that is longer than its pipe. */
export type OuterFate =
  | {
      readonly fate: 'cut';
      readonly by: 'gateway' | 'underway';
      readonly because: FragmentCause;
      readonly pieces: readonly Fragment[];
    }
  | { readonly fate: 'dropped'; readonly reason: Extract<DropReason, { readonly code: 'oversize' }> };

export interface OuterPacket {
  readonly tunnel: Id;
  readonly from: End;
  readonly stack: Stack;
  readonly packetBytes: number;
  readonly outerIpVersion: 'ipv4' | 'ipv6';
  readonly mtuBytes: number;
  readonly pipe: TunnelStack;
}

type Assume = (code: Assumption['code'], element: Assumption['element'], words: string) => void;

/** DF of the packet that VXLAN makes. The document leaves it open (RFC 7348, whole text): unknown is taken to be set. */
const vxlanDf = (
  network: Network,
  { tunnel, from }: OuterPacket,
  frame: TracedFrame,
  assume: Assume,
): boolean => {
  const { outerDf } = entryOf(network.design.tunnels, tunnel)[from];
  if (outerDf === undefined)
    assume(
      'outer-df',
      { collection: 'tunnels', id: tunnel },
      'The DF bit of the VXLAN packet isn’t stated and is taken to be set: what is too large is dropped. Equipment that clears it has it cut into fragments instead.',
    );
  // Inheriting means DF of an IPv4 packet inside, and set for IPv6, which nobody may cut; from memory of one kernel's driver.
  if (outerDf === 'inherit') return frame.ipVersion !== undefined && frame.mayNotBeCut;
  return outerDf !== 'clear';
};

/** Whose DF the outermost packet has, and whether it is set. RFC 4301 section 8.1: copied, set or cleared for each association. */
const outermostDf = (
  network: Network,
  outer: OuterPacket,
  frame: TracedFrame,
  assume: Assume,
): { readonly of: 'esp' | 'vxlan'; readonly isSet: boolean } => {
  const tunnel = entryOf(network.design.tunnels, outer.tunnel);
  // In transport mode the VXLAN packet's own header stays outermost (RFC 4303 section 3.1.1).
  if (tunnel.association === undefined || outer.stack.esp.mode !== 'tunnel')
    return { of: 'vxlan', isSet: vxlanDf(network, outer, frame, assume) };
  const association = entryOf(network.design.associations, tunnel.association);
  const { outerDf } = association[associationEndOf(network, tunnel, association, outer.from) ?? outer.from];
  if (outerDf === 'copy') return { of: 'vxlan', isSet: vxlanDf(network, outer, frame, assume) };
  if (outerDf === undefined)
    assume(
      'esp-df',
      { collection: 'associations', id: tunnel.association },
      'The DF bit of the ESP packet isn’t stated and is taken to be set: what is too large is dropped. Where it is copied or cleared, fragments may leave instead.',
    );
  return { of: 'esp', isSet: outerDf !== 'clear' };
};

/** What the host hears of a packet that is dropped: nothing, unless its packet can't be cut and the gateway speaks up. */
const answerTo = (
  network: Network,
  outer: OuterPacket,
  frame: TracedFrame,
  habit: string | undefined,
): 'none' | 'icmp' => {
  // RFC 1191 section 4, RFC 8201 section 4: only who would have to cut and may not is told.
  if (habit !== 'icmp' || frame.ipVersion === undefined || !frame.mayNotBeCut) return 'none';
  // RFC 8899 section 1.1: a gateway that isn't told of a limit underway can't tell others.
  const { filters } = entryOf(network.design.transports, outer.pipe.path.transport);
  return outer.pipe.limitedBy === 'underway' && filters?.includes('packet-too-big') === true
    ? 'none'
    : 'icmp';
};

/**
 * Whether an outermost packet that doesn't fit is cut or dropped. DF of the host's packet rules the packet inside, DF of
 * VXLAN and of ESP the outer ones; the outermost decides. IPv6 is never cut underway (RFC 8200 section 4.5), and a tunnel
 * endpoint cuts no VXLAN packet of its own (RFC 7348 section 4.3).
 */
export const outerFate = (
  network: Network,
  outer: OuterPacket,
  frame: TracedFrame,
  assume: Assume,
): OuterFate => {
  const tunnel = entryOf(network.design.tunnels, outer.tunnel);
  const device = deviceOfTunnelEnd(network, tunnel, outer.from);
  const ref = { collection: 'devices', id: device } as const;
  const { profile, settings, name } = entryOf(network.design.devices, device);
  const habit = profile === undefined ? undefined : entryOf(network.design.profiles, profile).oversizeDf;
  const where = outer.pipe.limitedBy;
  const isV6 = outer.outerIpVersion === 'ipv6';
  const df = isV6 ? undefined : outermostDf(network, outer, frame, assume);
  const mindsHost =
    !isV6 && df?.isSet === false && frame.ipVersion !== undefined && frame.mayNotBeCut
      ? mindsInnerDf(habit, where)
      : false;
  const because: FragmentCause | undefined = isV6
    ? undefined
    : df?.isSet === false && !mindsHost
      ? 'df-clear'
      : settings?.ignoreDf === true
        ? 'ignore-df'
        : habit === 'fragment'
          ? 'profile'
          : undefined;
  if (because !== undefined) {
    const cut = fragmentsOf(outer.packetBytes, 'ipv4', outer.mtuBytes);
    if (cut.ok) {
      if (because === 'ignore-df')
        assume(
          'ignore-df',
          ref,
          `${name} is set to ignore DF. That touches everything it forwards, not only this tunnel: no sender behind it can find out a path’s MTU any more.`,
        );
      return { fate: 'cut', by: where, because, pieces: cut.pieces };
    }
  }
  if (habit === undefined && !isV6)
    assume(
      'oversize-df',
      ref,
      `Nothing says what ${name} does with a packet that is too large and must not be cut; it is taken to drop it without a word, which is the worst for whoever looks for the cause.`,
    );
  return {
    fate: 'dropped',
    reason: {
      code: 'oversize',
      tunnel: outer.tunnel,
      device,
      where,
      packetBytes: outer.packetBytes,
      mtuBytes: outer.mtuBytes,
      largestBytes: largestThrough(network, outer.stack, outer.mtuBytes, frame.ipVersion ?? 'ipv4'),
      answer: answerTo(network, outer, frame, habit),
      because: isV6 ? 'outer-ipv6' : 'df-set',
      ...(df === undefined ? {} : { df: mindsHost ? ('host' as const) : df.of }),
    },
  };
};
