import type { PermittedCrossConnect } from './permitted-cross-connects.ts';
import { permittedCrossConnectFacts, permittedCrossConnects } from './permitted-cross-connects.ts';
import { defineRule } from './define-rule.ts';
import { permitFirst, type NewRule } from './permit-first.ts';
import { siteNameOf } from './places.ts';
import {
  arpFrames,
  directions,
  discoveryFrames,
  passesAll,
  passesFamily,
  protocolFrames,
} from './protocol-frames.ts';

interface Missing {
  readonly packets: string;
  readonly resolution: string;
  readonly rule: NewRule;
}

/** What the packets that the policy permits need beside themselves and don't get. */
const missingIn = ({ forwarder: { policy } }: PermittedCrossConnect): readonly Missing[] => {
  const passes = (family: 4 | 6): boolean =>
    directions.some((direction) => passesFamily(policy, direction, family));
  const missing: Missing[] = [];
  if (passes(4) && !passesAll(policy, arpFrames))
    missing.push({
      packets: protocolFrames.ipv4.name,
      resolution: 'ARP',
      rule: { name: 'Address resolution', frames: 'arp' },
    });
  if (passes(6) && !passesAll(policy, discoveryFrames))
    missing.push({
      packets: protocolFrames.ipv6.name,
      resolution: 'neighbour discovery',
      // RFC 4443 section 1: ICMPv6.
      rule: { name: 'Neighbour discovery', frames: 'ipv6', protocol: 58 },
    });
  return missing;
};

export const policyDropsAddressResolution = defineRule({
  id: 'policy-drops-address-resolution',
  title: 'A policy that permits IP permits finding the neighbour, too',
  severity: 'blocking',
  looksAt: permittedCrossConnectFacts,
  why: 'Before a host sends its first packet it asks for the neighbour’s MAC address. A policy that drops the question drops everything.',
  seen: 'Nothing crosses, or only until the neighbours’ caches run out; the hosts’ tables show the far side as incomplete.',
  sources: [{ document: 'RFC 826' }, { document: 'RFC 4861', clause: 'section 7.2' }],
  messages: {
    dropped: {
      words: 'resolution dropped',
      sentence: (v: {
        readonly forwarder: string;
        readonly place: string;
        readonly packets: string;
        readonly resolution: string;
      }) => `${v.forwarder} at ${v.place} permits ${v.packets} without ${v.resolution}`,
    },
  },
  check: (network) =>
    permittedCrossConnects(network).flatMap((each) => {
      const missing = missingIn(each);
      if (missing.length === 0) return [];
      const ref = { collection: 'forwarders', id: each.id } as const;
      return [
        {
          message: 'dropped',
          values: {
            forwarder: each.forwarder.name,
            place: siteNameOf(network.design, each.forwarder.device),
            packets: missing.length === 2 ? 'IP' : missing[0]!.packets,
            resolution: missing.map(({ resolution }) => resolution).join(' or '),
          },
          elements: [ref],
          properties: [{ ref, path: ['policy'] }],
          basis: missing.map(({ resolution }) => resolution),
        },
      ];
    }),
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const each = permittedCrossConnects(network).find((candidate) => candidate.id === id)!;
    return [
      {
        id: 'permit',
        label: 'Permit it first',
        sentence: `Permits ${fault.values.resolution.replace(' or ', ' and ')} both ways before all other rules of ${fault.values.forwarder}.`,
        patch: {
          forwarders: {
            [id]: {
              policy: permitFirst(
                each.forwarder.policy,
                missingIn(each).map(({ rule }) => rule),
              ),
            },
          },
        },
      },
    ];
  },
});
