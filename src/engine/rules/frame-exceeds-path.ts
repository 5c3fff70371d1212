import type { Network } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { lowerSegment, raisePath } from './packet-size-fixes.ts';
import { siteNameOf } from './places.ts';
import { capacitiesOf, gatewaysOf, isFragmented, needOf, type Tight } from './segment-capacity.ts';
import { outermostBytes } from './tunnel-capacity.ts';
import { counted, countWord, sentenceCase } from './wording.ts';

const messages = {
  segment: {
    words: 'packets too large',
    sentence: (v: {
      readonly segment: string;
      readonly needBytes: number;
      readonly largestBytes: number;
      readonly tunnel: string;
      readonly others: number;
    }) =>
      `${v.segment} needs ${v.needBytes}-byte packets, ${v.others === 0 ? `${v.tunnel} takes ${v.largestBytes}` : `${counted(v.others + 1, 'tunnel', 'tunnels')} take less`}`,
  },
  hosts: {
    words: 'packets too large',
    sentence: (v: {
      readonly needBytes: number;
      readonly hosts: string;
      readonly isOne: boolean;
      readonly largestBytes: number;
      readonly tunnel: string;
    }) =>
      `${v.hosts} send${v.isOne ? 's' : ''} ${v.needBytes}-byte packets, ${v.tunnel} takes ${v.largestBytes}`,
  },
  gateway: {
    words: 'gateway MTU large',
    sentence: (v: {
      readonly forwarder: string;
      readonly place: string;
      readonly mtuBytes: number;
      readonly largestBytes: number;
    }) => `${v.forwarder} at ${v.place} sends ${v.mtuBytes}-byte packets, ${v.largestBytes} fit`,
    why: 'A bridge can’t answer that a packet is too big. The gateway could, for everything that comes from elsewhere, if its own MTU were right.',
    seen: 'Downloads from other networks to hosts of the far sites stall, while those hosts reach each other.',
  },
};

export const frameExceedsPath = defineRule({
  id: 'frame-exceeds-path',
  title: 'The largest packet of a segment fits whole through every tunnel that carries it',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'VXLAN and IPsec make every packet longer. What no longer fits the transport is dropped, and a bridge has no way to tell the sender.',
  seen: 'Pings and logins work; file transfers, web pages and certificate exchanges hang.',
  sources: [
    { document: 'RFC 7348', clause: 'section 4.3' },
    { document: 'RFC 8899', clause: 'section 1.1' },
    { document: 'RFC 4303', clause: 'section 2.4' },
  ],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    return [...capacitiesOf(network)].flatMap(([segment, capacities]): Fault<typeof messages>[] => {
      const { name } = design.segments[segment]!;
      const ref = { collection: 'segments', id: segment } as const;
      const need = needOf(network, segment);
      const tight = capacities.filter(({ largestBytes }) => largestBytes < (need?.needBytes ?? 0));
      const [worst] = tight;
      if (need === undefined || worst === undefined) return gatewayFaults(network, segment, capacities);
      const { needBytes, hosts } = need;
      const tunnelRefs = tight.map(({ tunnel }) => ({ collection: 'tunnels' as const, id: tunnel }));
      const packetBytes = outermostBytes(needBytes, worst.stack);
      const cut = tight.every(({ tunnel }) => isFragmented(network, tunnel));
      const tunnel = design.tunnels[worst.tunnel]!.name;
      const body = {
        elements: [...tunnelRefs.slice(0, 1), ref, ...tunnelRefs.slice(1)],
        identity: [segment],
        basis: [needBytes, ...tight.map((one) => `${one.tunnel} ${one.largestBytes}`)],
        ...(packetBytes === undefined
          ? {}
          : {
              mark: {
                kind: 'overhang' as const,
                tunnel: worst.tunnel,
                end: worst.end,
                packetBytes,
                mtuBytes: worst.mtuBytes,
              },
            }),
        ...(cut
          ? {
              severity: 'degrading' as const,
              severityReason:
                'Outer packets may be fragmented here, which carries everything at twice the packets and breaks wherever fragments are dropped.',
            }
          : {}),
      };
      return [
        hosts.length === 0
          ? {
              message: 'segment',
              values: {
                segment: name,
                needBytes,
                largestBytes: worst.largestBytes,
                tunnel,
                others: tight.length - 1,
              },
              properties: [{ ref, path: ['mtu'] }],
              ...body,
            }
          : {
              message: 'hosts',
              values: {
                needBytes,
                largestBytes: worst.largestBytes,
                tunnel,
                isOne: hosts.length === 1,
                hosts:
                  hosts.length === 1
                    ? design.devices[hosts[0]!]!.name
                    : sentenceCase(`${countWord(hosts.length)} hosts`),
              },
              properties: [{ ref, path: ['mtu'] }],
              ...body,
            },
      ];
    });
  },
  fixes: (fault, network) => {
    if (fault.message === 'gateway') {
      const { id } = fault.elements[0]!;
      const { largestBytes, forwarder } = fault.values;
      return [
        {
          id: 'lower-gateway',
          label: `Set its MTU to ${largestBytes}`,
          sentence: `Sets the MTU of the gateway on ${forwarder} to ${largestBytes} bytes, so that it can tell senders elsewhere.`,
          patch: { forwarders: { [id]: { gateway: { mtu: largestBytes } } } },
        },
      ];
    }
    const segment = fault.identity![0]!;
    const capacities = capacitiesOf(network).get(segment) ?? [];
    return [
      ...lowerSegment(network, segment, capacities),
      ...raisePath(
        network,
        fault.values.needBytes,
        capacities.filter(({ largestBytes }) => largestBytes < fault.values.needBytes),
      ),
    ];
  },
});

const gatewayFaults = (
  network: Network,
  segment: string,
  capacities: readonly Tight[],
): Fault<typeof messages>[] => {
  const { design } = network;
  const largestBytes = capacities[0]?.largestBytes;
  if (largestBytes === undefined) return [];
  const { protocols } = design.segments[segment]!;
  return gatewaysOf(network, segment).flatMap((id): Fault<typeof messages>[] => {
    const forwarder = design.forwarders[id]!;
    const mtuBytes = forwarder.gateway!.mtu!;
    if (mtuBytes <= largestBytes) return [];
    const ref = { collection: 'forwarders', id } as const;
    return [
      {
        message: 'gateway',
        values: {
          forwarder: forwarder.name,
          place: siteNameOf(design, forwarder.device),
          mtuBytes,
          largestBytes,
        },
        elements: [ref, { collection: 'segments', id: segment }],
        properties: [{ ref, path: ['gateway', 'mtu'] }],
        basis: [mtuBytes, largestBytes],
        // RFC 2328 section 10.6, RFC 3719 section 6: their full-size packets decide whether routers become neighbours.
        ...(protocols?.includes('ospf') === true || protocols?.includes('is-is') === true
          ? {
              sources: [
                { document: 'RFC 2328', clause: 'section 10.6' },
                { document: 'RFC 3719', clause: 'section 6' },
              ],
            }
          : {
              severity: 'degrading' as const,
              severityReason: 'Hosts that keep to the segment’s own MTU are not touched.',
              sources: [{ document: 'RFC 1191', clause: 'section 4' }],
            }),
      },
    ];
  });
};
