import type { Id } from '../model/scalars.ts';
import { associationPath } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';

interface Cut {
  readonly association: Id;
  readonly transport: Id;
  readonly isKnown: boolean;
}

/** Associations that exchange certificates over a transport that drops fragments, and don't cut messages themselves. */
const cutExchanges = (network: Network): readonly Cut[] => {
  const { design } = network;
  return Object.entries(design.associations).flatMap(([id, association]): readonly Cut[] => {
    if (!ends.some((end) => association[end].authentication?.method === 'certificate')) return [];
    const path = associationPath(network, id);
    if (!path.ok || entryOf(design.transports, path.transport).filters?.includes('fragments') !== true)
      return [];
    const stated = ends.map((end) => association[end].ikeFragmentation);
    if (stated.every((each) => each === true)) return [];
    return [{ association: id, transport: path.transport, isKnown: stated.includes(false) }];
  });
};

interface Values {
  readonly association: string;
  readonly transport: string;
}

export const ikeFragmentsDropped = defineRule({
  id: 'ike-fragments-dropped',
  title: 'IKE cuts its long messages itself where a transport drops fragments',
  severity: 'blocking',
  looksAt: ['associations', 'landings', 'carriers', 'gateways'],
  why: 'A certificate makes the message that carries it longer than a packet. IP cuts it, the transport drops the pieces, and the exchange never ends.',
  seen: 'The first two messages are answered, the one with the certificate never is; with a pre-shared key the same line works.',
  sources: [
    { document: 'RFC 7296', clause: 'section 2' },
    { document: 'RFC 7383', clause: 'section 1' },
  ],
  messages: {
    dropped: {
      words: 'IKE fragments dropped',
      sentence: (v: Values) => `${v.transport} drops the fragments of ${v.association}`,
    },
    unknown: {
      words: 'IKE fragmentation unknown',
      sentence: (v: Values) => `Whether IKE fragments ${v.association} itself is not known`,
    },
  },
  check: (network) => {
    const { design } = network;
    return cutExchanges(network).map(({ association, transport, isKnown }) => {
      const ref = { collection: 'associations' as const, id: association };
      const body = {
        values: {
          association: entryOf(design.associations, association).name,
          transport: entryOf(design.transports, transport).name,
        },
        elements: [ref, { collection: 'transports' as const, id: transport }],
        identity: [association],
        properties: ends.map((end) => ({ ref, path: [end, 'ikeFragmentation'] })),
        basis: [transport],
      };
      return isKnown
        ? { message: 'dropped' as const, ...body }
        : {
            message: 'unknown' as const,
            ...body,
            severity: 'advisory' as const,
            severityReason: 'Most equipment does it by default; nobody said so here.',
          };
    });
  },
  fixes: (fault) => [
    {
      id: 'fragment',
      label: 'Let IKE fragment',
      sentence: `Lets both ends of ${fault.values.association} cut long IKE messages themselves.`,
      patch: {
        associations: {
          [fault.elements[0]!.id]: { a: { ikeFragmentation: true }, b: { ikeFragmentation: true } },
        },
      },
    },
  ],
});
