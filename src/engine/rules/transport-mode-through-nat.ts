import { associationPath, landingOf } from '../network/association-path.ts';
import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { listed } from './wording.ts';

export const transportModeThroughNat = defineRule({
  id: 'transport-mode-through-nat',
  title: 'Associations through NAT use tunnel mode',
  severity: 'degrading',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'In transport mode the addresses that NAT rewrites are those of the protected packet itself, and both ends have to undo it. Two peers behind one NAT can’t be told apart.',
  seen: 'It works with one peer and fails with the second behind the same NAT, or packets arrive with wrong checksums.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23.1' }],
  messages: {
    rewritten: {
      words: 'transport mode, NAT',
      sentence: (v: { readonly association: string; readonly places: string }) =>
        `${v.association} uses transport mode through NAT at ${v.places}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.associations).flatMap(([id, association]) => {
      const modes = ends.map((end) => association[end].mode);
      // Where modes differ the outcome is tunnel mode, or nothing.
      if (!modes.includes('transport') || modes.includes('tunnel')) return [];
      const path = associationPath(network, id);
      if (!path.ok) return [];
      const landings = { a: path.landingA, b: path.landingB };
      const behind = ends.filter((end) => landingOf(network, landings[end]).nat !== undefined);
      if (behind.length === 0) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'rewritten',
          values: { association: association.name, places: listed(behind.map((end) => places[end])) },
          elements: [ref, ...behind.map((end) => ({ collection: 'links' as const, id: landings[end] }))],
          identity: [id],
          properties: ends.map((end) => ({ ref, path: [end, 'mode'] })),
          basis: behind.map((end) => landings[end]),
        },
      ];
    });
  },
  fixes: ({ elements, values }) => [
    {
      id: 'tunnel-mode',
      label: 'Tunnel mode at both ends',
      sentence: `Lets both ends of ${values.association} use tunnel mode.`,
      patch: { associations: { [elements[0]!.id]: { a: { mode: 'tunnel' }, b: { mode: 'tunnel' } } } },
    },
  ],
});
