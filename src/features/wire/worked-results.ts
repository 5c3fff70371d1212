import type { CellMark } from '../../components/cell.tsx';
import {
  INTER_FRAME_GAP_BYTES,
  JUMBO_PAYLOAD_BYTES,
  PREAMBLE_BYTES,
  STANDARD_PAYLOAD_BYTES,
} from '../../engine/reference/ethernet.ts';
import {
  ICMP_ECHO_HEADER_BYTES,
  IP_HEADER_BYTES,
  SMALLEST_LINK_MTU_BYTES,
  type IpVersion,
} from '../../engine/reference/ip.ts';
import { TCP_HEADER_BYTES, TCP_LOSS_BOUND_CONSTANT } from '../../engine/reference/tcp.ts';
import type { Layer } from '../../engine/wire/layer.ts';
import type { Stack } from '../../engine/wire/stack.ts';
import { groupedNumber, rateAtMost, shareAtMost } from './figure-words.ts';
import { isInFrame, isInIpPacket, shortNameOf } from '../../lib/layer-names.ts';
import type { WireFigures } from './wire-figures.ts';

/** A figure with how it comes about. */
export interface WorkedResult {
  readonly label: string;
  readonly value: string;
  /** The formula with its numbers put in. */
  readonly working: string;
  readonly source: string;
  /** What is bad about the value, where something is. */
  readonly mark?: CellMark;
}

export interface ResultGroup {
  readonly title: string;
  readonly results: readonly WorkedResult[];
}

export const workedResults = (figures: WireFigures): readonly ResultGroup[] => [
  { title: 'The packet as asked', results: asAsked(figures) },
  { title: 'What passes whole', results: whole(figures) },
  { title: `On a link of ${rateAtMost(figures.inputs.link)}`, results: onTheLink(figures) },
];

function asAsked({ inputs, stack, outward, inward }: WireFigures): readonly WorkedResult[] {
  const { layers, totals, fragments } = outward;
  const { outerIpPacketBytes: outer, innerPacketBytes: inner } = totals;
  const packetLayers = layers.filter(isInIpPacket);
  const around = layers.filter((layer) => isInFrame(layer) && !packetLayers.includes(layer));
  const limit = inward.ipMtuBytes;
  const over = outer - limit;
  return [
    {
      label: 'Outer packet',
      value: `${outer} B`,
      working: `${sum(packetLayers)} = ${outer}`,
      source: stackSource(stack),
    },
    {
      label: 'Added bytes',
      value: `${outer - inner} B`,
      working: `${outer} − ${inner} = ${outer - inner}, ${shareAtMost(((outer - inner) / inner) * 1e6)} of the packet`,
      source: 'Difference of the two',
    },
    {
      label: 'Frame on the wire',
      value: `${totals.frameBytes} B`,
      working: `${sum(around)} + packet ${outer} = ${totals.frameBytes}; with preamble ${PREAMBLE_BYTES} and gap ${INTER_FRAME_GAP_BYTES}: ${totals.wireBytes}`,
      source:
        inputs.access === 'pppoe'
          ? 'RFC 894; RFC 2516 section 7; RFC 2544 appendix B'
          : 'RFC 894; RFC 2544 appendix B',
    },
    {
      label: 'In the transport',
      value: over > 0 ? `${over} B over` : 'whole',
      working:
        over > 0
          ? `${outer} − ${limit} = ${over}${fragments === undefined ? '' : `; cut, it would be ${fragments.pieces.map(({ packetBytes }) => packetBytes).join(' + ')}`}`
          : `${limit} − ${outer} = ${-over} to spare`,
      source: `${limitSource(inward)}${over > 0 ? `; ${fragmentSources[outward.outerIpVersion]}` : ''}`,
      ...(over > 0
        ? {
            mark: {
              severity: 'blocking',
              sentence: `Hosts may send ${inward.largestInnerPacketBytes} B at most, or the transport has to carry ${outer} B.`,
            },
          }
        : {}),
    },
  ];
}

function whole({ stack, inward, innerIpVersion }: WireFigures): readonly WorkedResult[] {
  const { largestInnerPacketBytes: largest, outerAtLargestBytes, outerAtNextBytes, settings } = inward;
  const { tcpMssBytes, dfPingPayloadBytes, underlayFor } = settings;
  const after = (version: IpVersion, headerBytes: number) =>
    `${ipNames[version]} ${largest} − ${IP_HEADER_BYTES[version]} − ${headerBytes}`;
  return [
    {
      label: 'Largest inner packet',
      value: `${largest} B`,
      working: `${largest} becomes ${outerAtLargestBytes} ≤ ${inward.ipMtuBytes}; ${largest + 1} becomes ${outerAtNextBytes}`,
      source: `${stackSource(stack)}; ${limitSource(inward)}`,
    },
    {
      label: 'Host and gateway MTU',
      value: `${settings.hostMtuBytes} B`,
      working: 'The largest inner packet, tags not counted',
      source: 'RFC 7348 section 4.3: endpoints must not fragment',
      ...(settings.ipv6MinimumMet
        ? {}
        : {
            mark: {
              severity: 'degrading',
              sentence: `IPv6 needs ${SMALLEST_LINK_MTU_BYTES.ipv6} B on every link (RFC 8200 section 5): this segment cannot carry it.`,
            },
          }),
    },
    {
      label: 'TCP MSS, IPv4 and IPv6',
      value: both(tcpMssBytes),
      working: `${after('ipv4', TCP_HEADER_BYTES)}; ${after('ipv6', TCP_HEADER_BYTES)}`,
      source: 'RFC 9293 section 3.7.1',
    },
    {
      label: 'Ping to test with DF, IPv4 and IPv6',
      value: both(dfPingPayloadBytes),
      working: `${after('ipv4', ICMP_ECHO_HEADER_BYTES)}; ${after('ipv6', ICMP_ECHO_HEADER_BYTES)}: bytes of payload`,
      source: 'RFC 792, echo; RFC 4443 section 4.1',
    },
    ...(['standard', 'jumbo'] as const).map((name): WorkedResult => {
      const hostBytes = name === 'standard' ? STANDARD_PAYLOAD_BYTES : JUMBO_PAYLOAD_BYTES;
      const { transportMtuBytes, accessPayloadBytes } = underlayFor[name];
      const access =
        accessPayloadBytes === transportMtuBytes
          ? ''
          : `; access link payload ${transportMtuBytes} + ${accessPayloadBytes - transportMtuBytes} = ${accessPayloadBytes}`;
      return {
        label: `Transport MTU for ${hostBytes}`,
        value: `${transportMtuBytes} B`,
        working: `An inner ${ipNames[innerIpVersion]} packet of ${hostBytes} with its layers: ${hostBytes} + ${transportMtuBytes - hostBytes}${access}`,
        source: stackSource(stack),
      };
    }),
  ];
}

function onTheLink(figures: WireFigures): readonly WorkedResult[] {
  const { inputs, sent, capacity, goodput, singleFlow, inward } = figures;
  const link = groupedNumber(inputs.link);
  const mean =
    sent.packets === 1
      ? `(8 × ${sent.wireBytes} B)`
      : `(8 × ${groupedNumber(sent.wireBytes)} B of ${sent.packets} packets) × ${sent.packets}`;
  const shortened = sent.shortened ? `; sizes over ${inward.largestInnerPacketBytes} sent at that` : '';
  const results: WorkedResult[] = [
    {
      label: 'Frames',
      value: `${groupedNumber(capacity.packetsPerSecond)} per s`,
      working: `${link} / ${mean}${shortened}`,
      source: inputs.mix === 'one' ? 'RFC 2544 appendix B' : `RFC 2544 appendix B; ${mixSources[inputs.mix]}`,
    },
    {
      label: 'Hosts’ packets',
      value: rateAtMost(capacity.innerRateBps),
      working: `${link} × ${groupedNumber(sent.innerBytes)} / ${groupedNumber(sent.wireBytes)}; ${groupedNumber(capacity.barePacketsPerSecond)} packets per s pass without the stack, ${shareAtMost(capacity.sharePerMillion)} of them with it`,
      source: 'Inner packets over their time on the wire, RFC 2544 appendix B',
    },
  ];
  if (goodput !== undefined) {
    const { segmentBytes, wireBytes, goodputBps } = goodput;
    results.push({
      label: 'TCP goodput',
      value: rateAtMost(goodputBps),
      working: `${link} × ${segmentBytes} / ${wireBytes}: data of a full segment over its time on the wire${inputs.timestamps ? ', timestamps on' : ''}`,
      source: inputs.timestamps ? 'RFC 9293 section 3.1; RFC 7323 section 3.2' : 'RFC 9293 section 3.1',
    });
  }
  if (singleFlow !== undefined) results.push(oneFlow(figures, singleFlow));
  return results;
}

function oneFlow(
  { inputs, goodput }: WireFigures,
  flow: NonNullable<WireFigures['singleFlow']>,
): WorkedResult {
  const rttMs = inputs.rtt / 1000;
  const linkGivesBps = goodput?.goodputBps ?? inputs.link;
  const windowWorking = `${groupedNumber(inputs.window)} B × 8 / ${rttMs} ms = ${rateAtMost(flow.windowLimitBps)}`;
  const lossWorking =
    flow.lossLimitBps === undefined
      ? ''
      : `; ${TCP_LOSS_BOUND_CONSTANT} × ${flow.mssBytes} B × 8 / (${rttMs} ms × √${inputs.loss / 1e6}) = ${rateAtMost(flow.lossLimitBps)}`;
  return {
    label: 'One TCP flow',
    value: rateAtMost(Math.min(flow.limitBps, linkGivesBps)),
    working: `${windowWorking}${lossWorking}; held by the ${flow.limitBps > linkGivesBps ? 'link' : flow.limitedBy}`,
    source:
      flow.lossLimitBps === undefined
        ? 'RFC 7323 section 1.1'
        : 'RFC 7323 section 1.1; RFC 3819 section 8.5.1 (halves its window on loss)',
  };
}

const ipNames = { ipv4: 'IPv4', ipv6: 'IPv6' } as const satisfies Record<IpVersion, string>;

const fragmentSources = {
  ipv4: 'RFC 791 section 3.2',
  ipv6: 'RFC 8200 section 4.5, by the sender only',
} as const satisfies Record<IpVersion, string>;

const mixSources = {
  imix: 'seven of 40 B, four of 576 B, one of 1500 B: common practice, no source',
  letters: 'RFC 6985 section 4',
} as const;

const both = ({ ipv4, ipv6 }: Readonly<Record<IpVersion, number>>): string => `${ipv4} B, ${ipv6} B`;

const sum = (layers: readonly Layer[]): string =>
  layers.map((layer) => `${shortNameOf(layer)} ${layer.bytes}`).join(' + ');

function stackSource({ vxlanOver, esp }: Stack): string {
  const sources = [
    ...(vxlanOver === 'none' ? [] : ['RFC 7348 section 5']),
    ...(esp.mode === 'none' ? [] : ['RFC 4303 section 2']),
    ...(esp.mode !== 'none' && esp.natTraversal ? ['RFC 3948 section 2.1'] : []),
  ];
  return sources.length === 0 ? 'RFC 894' : sources.join('; ');
}

const limitSource = ({ limitedBy }: WireFigures['inward']): string =>
  limitedBy === 'access'
    ? 'access link payload less its overhead, RFC 2516 section 7'
    : 'the transport’s MTU';
