import { espIntegrities, espTransforms } from '../../engine/reference/esp.ts';
import { simpleImix } from '../../engine/reference/frame-mixes.ts';
import { IP_HEADER_BYTES, type IpVersion } from '../../engine/reference/ip.ts';
import { TCP_HEADER_BYTES } from '../../engine/reference/tcp.ts';
import { computeWire, type Inward, type Outward } from '../../engine/wire/compute-wire.ts';
import { frameMixFromLetters, type FrameMix } from '../../engine/wire/frame-mix.ts';
import { linkCapacityOf, type LinkCapacity } from '../../engine/wire/frame-rate.ts';
import { weightedTotals } from '../../engine/wire/mean-packet.ts';
import type { Problem } from '../../engine/wire/problem.ts';
import { bareStack, type Stack } from '../../engine/wire/stack.ts';
import {
  singleFlowLimitBps,
  tcpGoodputBps,
  type Goodput,
  type SingleFlowLimit,
} from '../../engine/wire/tcp-goodput.ts';
import { wireFields, type FieldName, type FieldProblems, type WireInputs } from './wire-fields.ts';

/** The frames that fill the link. */
export interface SentMix {
  /** No packet is longer than passes whole: hosts are taken to be set to that. */
  readonly mix: FrameMix;
  /** Whether sizes were longer and count as the largest that passes. */
  readonly shortened: boolean;
  /** Packets in one turn of the mix, and their lengths together: as hosts send them, and on the wire. */
  readonly packets: number;
  readonly innerBytes: number;
  readonly wireBytes: number;
}

export interface WireFigures {
  readonly inputs: WireInputs;
  readonly stack: Stack;
  readonly innerIpVersion: IpVersion;
  readonly outward: Outward;
  readonly inward: Inward;
  readonly sent: SentMix;
  readonly capacity: LinkCapacity;
  /** Segments as long as the host MTU allows; absent where it leaves no room for data. */
  readonly goodput?: Goodput;
  readonly singleFlow?: SingleFlowLimit & { readonly mssBytes: number };
}

export type FiguresAnswer =
  | { readonly ok: true; readonly figures: WireFigures }
  | { readonly ok: false; readonly problems: FieldProblems };

/** Everything the page shows, or which inputs contradict each other. */
export function wireFigures(inputs: WireInputs): FiguresAnswer {
  const contradictions = contradictionsOf(inputs);
  if (Object.keys(contradictions).length > 0) return { ok: false, problems: contradictions };

  const stack = stackOf(inputs);
  const innerIpVersion = inputs.ip;
  const sizes = computeWire({
    stack,
    innerIpVersion,
    innerPacketBytes: inputs.packet,
    transportMtuBytes: inputs.mtu,
    fragmentOuter: false,
  });
  if (!sizes.ok) return refused(inputs, sizes.problems);
  const { outward, inward } = sizes;
  if (outward === undefined || inward === undefined) throw new Error('sizes were asked in both directions');

  const mtuBytes = inward.largestInnerPacketBytes;
  const asked = askedMix(inputs, mtuBytes);
  const mix = asked.map(({ ipBytes, weight }) => ({ ipBytes: Math.min(ipBytes, mtuBytes), weight }));
  const totals = weightedTotals(mix, stack, { innerIpVersion });
  if (!totals.ok) return refused(inputs, totals.problems);
  const capacity = linkCapacityOf(inputs.link, mix, stack, { innerIpVersion });
  if (!capacity.ok) return refused(inputs, capacity.problems);

  const goodput = tcpGoodputBps({
    linkBps: inputs.link,
    mtuBytes,
    ipVersion: innerIpVersion,
    timestamps: inputs.timestamps,
    stack,
  });
  // RFC 9293 section 3.7.1: options are not taken off.
  const mssBytes = mtuBytes - IP_HEADER_BYTES[innerIpVersion] - TCP_HEADER_BYTES;
  const singleFlow = singleFlowLimitBps({
    windowBytes: inputs.window,
    rttUs: inputs.rtt,
    lossPerMillion: inputs.loss,
    mssBytes,
  });
  return {
    ok: true,
    figures: {
      inputs,
      stack,
      innerIpVersion,
      outward,
      inward,
      sent: {
        mix,
        shortened: asked.some(({ ipBytes }) => ipBytes > mtuBytes),
        packets: Number(totals.weight),
        innerBytes: Number(totals.innerPacketBytes),
        wireBytes: Number(totals.wireBytes),
      },
      capacity,
      ...(goodput.ok ? { goodput } : {}),
      ...(singleFlow.ok ? { singleFlow: { ...singleFlow, mssBytes } } : {}),
    },
  };
}

function stackOf(inputs: WireInputs): Stack {
  const { esp: mode, transform, integrity, nat: natTraversal, outer: outerIp } = inputs;
  const suite = { transform, natTraversal, ...(integrity === 'none' ? {} : { integrity }) };
  return {
    ...bareStack,
    innerTags: inputs.tags,
    vxlanOver: inputs.vxlan,
    esp: mode === 'none' ? { mode } : mode === 'tunnel' ? { mode, ...suite, outerIp } : { mode, ...suite },
    accessOverhead: inputs.access,
    accessPayloadBytes: inputs.payload,
  };
}

function askedMix({ mix, letters, packet }: WireInputs, mtuBytes: number): FrameMix {
  if (mix === 'imix') return simpleImix;
  if (mix === 'one') return [{ ipBytes: packet, weight: 1 }];
  const answer = frameMixFromLetters(letters, mtuBytes);
  if (!answer.ok) throw new Error(`letters that were read make no mix: ${letters}`);
  return answer.mix;
}

/** Choices that are fine each by itself and not together, said at the one that gives way. */
function contradictionsOf({ tags, vxlan, esp, transform, integrity }: WireInputs): FieldProblems {
  const { name, aead } = espTransforms[transform];
  return {
    ...(vxlan === 'none' && tags > 0
      ? {
          tags: `Inner tags ${tags}: without VXLAN there is no inner frame to tag. Choose 0, or VXLAN over IPv4 or IPv6.`,
        }
      : {}),
    ...(esp !== 'none' && aead && integrity !== 'none'
      ? {
          integrity: `Integrity ${espIntegrities[integrity].name}: ${name} protects integrity itself. Choose none, or another transform.`,
        }
      : {}),
    // RFC 8221 section 4: encryption without integrity must not be used.
    ...(esp !== 'none' && !aead && integrity === 'none'
      ? {
          integrity: `Integrity none: ${name} needs an algorithm beside it, RFC 8221 section 4. Choose one, such as HMAC-SHA2-256-128.`,
        }
      : {}),
  };
}

const fieldsByRequest: Readonly<Record<string, FieldName>> = {
  innerPacketBytes: 'packet',
  transportMtuBytes: 'mtu',
  'stack.accessPayloadBytes': 'payload',
  linkBps: 'link',
};

const refused = (inputs: WireInputs, problems: readonly Problem[]): FiguresAnswer => ({
  ok: false,
  problems: Object.fromEntries(
    problems.map(({ field, value, expected }) => {
      const name = fieldsByRequest[field] ?? (inputs.mix === 'letters' ? 'letters' : 'mix');
      return [name, `${wireFields[name].label} ${String(value)}: needed is ${expected}.`];
    }),
  ),
});
