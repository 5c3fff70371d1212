import type { Protocol } from '../model/intent.ts';
import type { Network } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { permitFirst } from './permit-first.ts';
import type { PermittedCrossConnect } from './permitted-cross-connects.ts';
import { permittedCrossConnectFacts, permittedCrossConnects } from './permitted-cross-connects.ts';
import { siteNameOf } from './places.ts';
import { directions, passesFamily, passesProtocol, protocolFrames } from './protocol-frames.ts';
import { countWord, listed } from './wording.ts';

interface Dropped {
  readonly protocols: readonly Protocol[];
  /** Segments that need them. */
  readonly segments: readonly string[];
}

const droppedBy = ({ design }: Network, { forwarder, segments }: PermittedCrossConnect): Dropped => {
  const needs = segments.flatMap((segment) =>
    (design.segments[segment]!.protocols ?? [])
      .filter((protocol) => {
        // Packets of a family that pass one way are told by the check of directions.
        if (protocol === 'ipv4' || protocol === 'ipv6')
          return !directions.some((direction) =>
            passesFamily(forwarder.policy, direction, protocol === 'ipv4' ? 4 : 6),
          );
        return !passesProtocol(forwarder.policy, protocol);
      })
      .map((protocol) => ({ protocol, segment })),
  );
  return {
    protocols: [...new Set(needs.map(({ protocol }) => protocol))].sort(),
    segments: [...new Set(needs.map(({ segment }) => segment))].sort(),
  };
};

export const policyDropsProtocol = defineRule({
  id: 'policy-drops-protocol',
  title: 'A cross-connect’s policy lets through what its segment needs',
  severity: 'blocking',
  looksAt: permittedCrossConnectFacts,
  why: 'A policy written for IP between subnets drops what goes to groups, to everybody or is no IP at all, without a message to anyone.',
  seen: 'Neighbours never come up, or both sides of a redundancy group become active, while pings pass.',
  sources: [
    { document: 'RFC 2328', clause: 'appendix A.1' },
    { document: 'RFC 7761', clause: 'section 4.9' },
    { document: 'RFC 9568', clause: 'section 5.1.1.2' },
    'common practice, no source',
  ],
  messages: {
    dropped: {
      words: 'need filtered',
      sentence: (v: {
        readonly forwarder: string;
        readonly place: string;
        readonly protocols: string;
        readonly letters: string;
      }) => `${v.forwarder} at ${v.place} drops ${v.protocols} of segment ${v.letters}`,
    },
  },
  check: (network) =>
    permittedCrossConnects(network).flatMap((each) => {
      const { protocols, segments } = droppedBy(network, each);
      if (protocols.length === 0) return [];
      const ref = { collection: 'forwarders', id: each.id } as const;
      return [
        {
          message: 'dropped',
          values: {
            forwarder: each.forwarder.name,
            place: siteNameOf(network.design, each.forwarder.device),
            protocols:
              protocols.length > 2
                ? `${countWord(protocols.length)} protocols`
                : listed(protocols.map((protocol) => protocolFrames[protocol].name)),
            letters: listed(segments.map((segment) => network.design.segments[segment]!.letter)),
          },
          elements: [ref, ...segments.map((id) => ({ collection: 'segments' as const, id }))],
          identity: [each.id],
          properties: [
            { ref, path: ['policy'] },
            ...segments.map((id) => ({
              ref: { collection: 'segments' as const, id },
              path: ['protocols'],
            })),
          ],
          basis: protocols,
        },
      ];
    }),
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const each = permittedCrossConnects(network).find((candidate) => candidate.id === id)!;
    const rules = droppedBy(network, each).protocols.map((protocol) => {
      const { name, permit } = protocolFrames[protocol];
      return permit === undefined ? undefined : { name, ...permit };
    });
    const known = rules.filter((rule) => rule !== undefined);
    if (known.length < rules.length) return [];
    return [
      {
        id: 'permit',
        label: 'Permit it first',
        sentence: `Permits ${listed(known.map(({ name }) => name))} both ways before all other rules of ${fault.values.forwarder}.`,
        patch: { forwarders: { [id]: { policy: permitFirst(each.forwarder.policy, known) } } },
      },
    ];
  },
});
