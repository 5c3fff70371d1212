import { tunnelStates } from '../network/can-come-up.ts';
import { ends } from '../network/network.ts';
import { associationEndOf } from '../network/selectors-cover.ts';
import { defineRule } from './define-rule.ts';
import { duplicateEndpoints } from './endpoint-address-duplicate.ts';
import { insideSegments } from './endpoint-inside-segment.ts';
import { associationPlaces } from './places.ts';
import { coverPatch } from './selector-patch.ts';
import { namedOrCounted } from './wording.ts';

export const associationSelectorsMissLoopbacks = defineRule({
  id: 'association-selectors-miss-loopbacks',
  title: 'The selectors of an association take in the endpoints of its tunnels',
  severity: 'blocking',
  looksAt: [
    'associations',
    'tunnels',
    'endpoints',
    'gateways',
    'sites',
    'addressing',
    'landings',
    'carriers',
  ],
  why: 'IPsec carries only packets that match its selectors at both ends. VXLAN between endpoints that no selector names is dropped, or leaves in clear.',
  seen: 'The association is up, its byte counters stand still, and pings between the endpoints fail.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.9' }],
  messages: {
    missed: {
      words: 'selectors miss endpoints',
      sentence: (v: { readonly association: string; readonly places: string; readonly pairs: string }) =>
        `Selectors at ${v.places} leave out ${v.pairs}`,
    },
  },
  check: (network) => {
    const { design } = network;
    // An address that two endpoints share, or that lies in a segment, is the cause; no selector can be right for it.
    const unsettled = new Set([
      ...duplicateEndpoints(network).flat(),
      ...insideSegments(network).map(({ endpoint }) => endpoint),
    ]);
    return Object.entries(design.associations).flatMap(([id, association]) => {
      const gaps = (network.tunnelsByAssociation.get(id) ?? []).flatMap((tunnelId) => {
        const tunnel = design.tunnels[tunnelId]!;
        if (ends.some((end) => unsettled.has(tunnel[end].endpoint))) return [];
        const { reasons } = tunnelStates(network).get(tunnelId)!;
        return reasons.flatMap((reason) =>
          reason.code === 'selectors-miss'
            ? reason.gaps.map((gap) => ({
                ...gap,
                tunnel: tunnelId,
                side: associationEndOf(network, tunnel, association, gap.end)!,
              }))
            : [],
        );
      });
      if (gaps.length === 0) return [];
      const places = associationPlaces(design, association);
      const sides = ends.filter((end) => gaps.some(({ side }) => side === end));
      // The same pair of endpoints is named once, seen from end a where both ends leave it out.
      const pairs = [
        ...new Set(
          gaps.filter(({ side }) => side === sides[0]).map(({ local, remote }) => `${local} to ${remote}`),
        ),
      ].sort();
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'missed',
          values: {
            association: association.name,
            places: sides.length === 2 ? 'both ends' : places[sides[0]!],
            pairs: namedOrCounted(pairs, 'pairs of endpoints'),
          },
          elements: [
            ref,
            ...[...new Set(gaps.map(({ tunnel }) => tunnel))].map((tunnel) => ({
              collection: 'tunnels' as const,
              id: tunnel,
            })),
          ],
          identity: [id],
          properties: sides.map((side) => ({ ref, path: [side, 'selectors'] })),
          basis: [...new Set(gaps.map(({ side, local, remote }) => `${side} ${local} ${remote}`))].sort(),
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const tunnels = fault.elements.filter(({ collection }) => collection === 'tunnels').map(({ id }) => id);
    return [
      {
        id: 'add-selectors',
        label: 'Add the endpoints',
        sentence: `Adds selectors for ${fault.values.pairs} to ${fault.values.association} at ${fault.values.places}.`,
        patch: coverPatch(network, tunnels),
      },
    ];
  },
});
