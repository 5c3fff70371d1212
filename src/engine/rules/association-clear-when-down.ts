import { associationPath } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { isTrusted } from './trusted-transport.ts';
import { counted } from './wording.ts';

const messages = {
  clear: {
    words: 'falls to clear',
    sentence: (v: { readonly association: string; readonly places: string }) =>
      `Tunnels leave ${v.places} in clear while ${v.association} is down`,
  },
  unstated: {
    words: 'drop rule unstated',
    sentence: (v: { readonly users: string }) => `Not stated whether ${v.users} packets while down`,
    why: 'A gateway without keys may send the tunnels’ packets by its default route, unprotected. A rule that drops them, or a route to nowhere with a worse metric, keeps them in; a filter on the WAN port keeps UDP 4789 out both ways.',
  },
};

/** Associations with tunnels over transports that are not trusted: where a packet in clear would be seen. */
const exposed = (network: Network): readonly string[] =>
  Object.keys(network.design.associations)
    .sort()
    .filter((id) => {
      if ((network.tunnelsByAssociation.get(id) ?? []).length === 0) return false;
      const path = associationPath(network, id);
      return path.ok && !isTrusted(network.design.transports[path.transport]!);
    });

const dropAt = (ids: readonly (readonly [string, readonly End[]])[]) => ({
  associations: Object.fromEntries(
    ids.map(([id, at]) => [id, Object.fromEntries(at.map((end) => [end, { whenDown: 'drop' }]))]),
  ),
});

export const associationClearWhenDown = defineRule({
  id: 'association-clear-when-down',
  title: 'Without keys the tunnels’ packets are dropped, not sent in clear',
  severity: 'blocking',
  looksAt: ['associations', 'tunnels', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'Whenever the association is down, at every restart at the latest, frames of the segments cross the transport readable, and answers may be taken from anybody.',
  seen: 'Pings between the endpoints go on while the association is down, and a capture on the WAN port shows UDP 4789.',
  sources: [
    { document: 'RFC 7348', clause: 'section 7' },
    { document: 'RFC 4301', clause: 'section 4.4.1' },
    'common practice, no source',
  ],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    const all = exposed(network);
    const clear = all.flatMap((id): Fault<typeof messages>[] => {
      const association = design.associations[id]!;
      const at = ends.filter((end) => association[end].whenDown === 'clear');
      if (at.length === 0) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'clear',
          values: {
            association: association.name,
            places: at.length === 2 ? 'both ends' : places[at[0]!],
          },
          elements: [ref],
          identity: [id],
          properties: at.map((end) => ({ ref, path: [end, 'whenDown'] })),
          basis: at,
        },
      ];
    });
    const unknown = all.filter((id) => {
      const at = ends.map((end) => design.associations[id]![end].whenDown);
      return at.includes(undefined) && !at.includes('clear');
    });
    if (unknown.length === 0) return clear;
    const refs = unknown.map((id) => ({ collection: 'associations' as const, id }));
    return [
      ...clear,
      {
        message: 'unstated',
        values: {
          users:
            unknown.length === 1
              ? `${design.associations[unknown[0]!]!.name} drops`
              : `${counted(unknown.length, 'association', 'associations')} drop`,
        },
        elements: refs,
        identity: ['unstated'],
        properties: refs.flatMap((ref) =>
          ends
            .filter((end) => design.associations[ref.id]![end].whenDown === undefined)
            .map((end) => ({ ref, path: [end, 'whenDown'] })),
        ),
        basis: unknown,
        severity: 'advisory',
        severityReason: 'It may be set up; the design doesn’t say so.',
      },
    ];
  },
  fixes: (fault, { design }) => {
    const at = fault.elements.map(
      ({ id }) => [id, ends.filter((end) => design.associations[id]![end].whenDown !== 'drop')] as const,
    );
    return [
      {
        id: 'drop',
        label: 'Drop while down',
        sentence:
          fault.message === 'clear'
            ? `States that the tunnels’ packets are dropped at ${fault.values.places} while ${fault.values.association} is down, which you must have set up.`
            : 'States that both ends drop the tunnels’ packets while an association is down, which you must have set up.',
        patch: dropAt(at),
      },
    ];
  },
});
