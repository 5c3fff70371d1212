import { deviceOfTunnelEnd, ends, entryOf } from '../network/network.ts';
import type { Fix } from './finding.ts';
import { defineRule } from './define-rule.ts';

export const associationWithoutTunnel = defineRule({
  id: 'association-without-tunnel',
  title: 'Every association protects a tunnel',
  severity: 'advisory',
  looksAt: ['associations', 'tunnels', 'endpoints'],
  why: 'Keys are negotiated for nothing: either it is left over, or a tunnel that was meant to run inside it runs in the clear.',
  seen: 'The association is up, and its counters stand still.',
  sources: ['common practice, no source'],
  messages: {
    empty: {
      words: 'protects nothing',
      sentence: (v: { readonly association: string }) => `No tunnel runs inside ${v.association}`,
    },
  },
  check: ({ design, tunnelsByAssociation }) =>
    Object.entries(design.associations).flatMap(([id, { name }]) =>
      (tunnelsByAssociation.get(id) ?? []).length > 0
        ? []
        : [
            {
              message: 'empty',
              values: { association: name },
              elements: [{ collection: 'associations' as const, id }],
            },
          ],
    ),
  fixes: (fault, network) => {
    const { design } = network;
    const { id } = fault.elements[0]!;
    const devices = ends.map((end) => entryOf(design.associations, id)[end].device).sort();
    const bare = network.tunnelIds.filter((tunnel) => {
      const entry = entryOf(design.tunnels, tunnel);
      return (
        entry.association === undefined &&
        ends
          .map((end) => deviceOfTunnelEnd(network, entry, end))
          .sort()
          .join(' ') === devices.join(' ')
      );
    });
    const notes = Object.entries(design.notes).filter(
      ([, { target }]) => target?.collection === 'associations' && target.id === id,
    );
    const protect: readonly Fix[] =
      bare.length === 0
        ? []
        : [
            {
              id: 'protect',
              label: bare.length === 1 ? 'Protect the tunnel' : 'Protect the tunnels',
              sentence: `Puts what runs bare between the same gateways into ${fault.values.association}.`,
              patch: {
                tunnels: Object.fromEntries(
                  bare.map((tunnel) => [tunnel, { association: id, a: { via: null }, b: { via: null } }]),
                ),
              },
            },
          ];
    return [
      ...protect,
      {
        id: 'remove',
        label: `Remove ${fault.values.association}`,
        sentence: `Removes ${fault.values.association}, which nothing uses.`,
        patch: {
          associations: { [id]: null },
          ...(notes.length === 0
            ? {}
            : { notes: Object.fromEntries(notes.map(([note]) => [note, { target: null }])) }),
        },
      },
    ];
  },
});
