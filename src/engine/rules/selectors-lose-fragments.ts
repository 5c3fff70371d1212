import type { MergePatch } from '../model/merge-patch.ts';
import type { Network } from '../network/network.ts';
import { ends } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { capacitiesOf, isFragmented, needOf } from './segment-capacity.ts';

/** Tunnels whose packets are cut into fragments for the size that a segment needs, in order of id. */
const fragmented = (network: Network): readonly string[] =>
  [
    ...new Set(
      [...capacitiesOf(network)].flatMap(([segment, capacities]) => {
        const need = needOf(network, segment)?.needBytes ?? 0;
        return capacities
          .filter(({ tunnel, largestBytes }) => largestBytes < need && isFragmented(network, tunnel))
          .map(({ tunnel }) => tunnel);
      }),
    ),
  ].sort();

export const selectorsLoseFragments = defineRule({
  id: 'selectors-lose-fragments',
  title: 'Selectors name no port where packets may be fragments',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'Only the first fragment of a packet has a port. The others match no selector that names one, and are dropped before they are encrypted.',
  seen: 'Small packets cross, large ones never arrive whole; the sending gateway counts packets without a policy.',
  sources: [{ document: 'RFC 4301', clause: 'section 7.1 and section 7.3' }],
  messages: {
    lost: {
      words: 'fragments not selected',
      sentence: (v: { readonly association: string; readonly places: string }) =>
        `Selectors of ${v.association} lose fragments at ${v.places}`,
    },
  },
  check: (network) => {
    const { design } = network;
    const namingPorts = Object.entries(design.associations).flatMap(([id, association]) => {
      const at = ends.filter((end) => {
        const selectors = Object.values(association[end].selectors ?? {});
        return selectors.length > 0 && selectors.every(({ udpPort }) => udpPort !== undefined);
      });
      return at.length === 0 ? [] : [{ id, association, at }];
    });
    if (namingPorts.length === 0) return [];
    const cut = new Set(fragmented(network));
    return namingPorts.flatMap(({ id, association, at }) => {
      const tunnels = (network.tunnelsByAssociation.get(id) ?? []).filter((tunnel) => {
        const { a, b } = design.tunnels[tunnel]!;
        // RFC 4301 section 8.2.1: what has DF clear may be cut before encryption, what has it set never is.
        return cut.has(tunnel) && [a, b].some(({ outerDf }) => outerDf === 'clear' || outerDf === 'inherit');
      });
      if (tunnels.length === 0) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'lost',
          values: {
            association: association.name,
            places: at.length === 2 ? 'both ends' : places[at[0]!],
          },
          elements: [ref, ...tunnels.map((tunnel) => ({ collection: 'tunnels' as const, id: tunnel }))],
          identity: [id],
          properties: at.map((end) => ({ ref, path: [end, 'selectors'] })),
          basis: [...at, ...tunnels],
        },
      ];
    });
  },
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const anyPort = (selectors: object): MergePatch =>
      Object.fromEntries(Object.keys(selectors).map((selector) => [selector, { udpPort: null }]));
    return [
      {
        id: 'any-port',
        label: 'Select any port',
        sentence: `Lets the selectors of ${fault.values.association} name addresses only.`,
        patch: {
          associations: {
            [id]: Object.fromEntries(
              ends.map((end) => [end, { selectors: anyPort(design.associations[id]![end].selectors ?? {}) }]),
            ),
          },
        },
      },
    ];
  },
});
