import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder } from '../model/rank.ts';
import type { Association, End } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { childGroups, hasForwardSecrecy } from './forward-secrecy.ts';
import { associationPlaces } from './places.ts';
import { strongEspProposal } from './strong-suite.ts';

const messages = {
  oneSided: {
    words: 'rekey will fail',
    sentence: (v: { readonly place: string }) => `Only ${v.place} asks for forward secrecy of child keys`,
  },
  groups: {
    words: 'rekey will fail',
    sentence: (v: {
      readonly groupsA: string;
      readonly placeA: string;
      readonly groupsB: string;
      readonly placeB: string;
    }) => `Rekey group ${v.groupsA} at ${v.placeA}, ${v.groupsB} at ${v.placeB}`,
  },
};

/** Lets an end use forward secrecy with the given group first. */
const withGroup = (association: Association, end: End, group: number): MergePatch => ({
  perfectForwardSecrecy: true,
  espProposals: Object.fromEntries(inRankOrder(association[end].espProposals).map(([id]) => [id, { group }])),
});

export const forwardSecrecyMismatch = defineRule({
  id: 'forward-secrecy-mismatch',
  title: 'Both ends of an association renew child keys in the same way',
  severity: 'degrading',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'The first child keys come from the IKE keys without an exchange of their own. Only at the first renewal one end asks for an exchange that the other refuses.',
  seen: 'Everything works after the change and for the first hours; then the tunnel stops, and works again after a restart. Test a rekey before you leave.',
  sources: [{ document: 'RFC 7296', clause: 'section 1.2 and section 1.3.1' }],
  messages,
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]): readonly Fault<typeof messages>[] => {
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      const [a, b] = ends.map((end) => hasForwardSecrecy(association, end));
      if (a === undefined || b === undefined) return [];
      if (a !== b)
        return [
          {
            message: 'oneSided',
            values: { place: places[a ? 'a' : 'b'] },
            elements: [ref],
            properties: ends.map((end) => ({ ref, path: [end, 'perfectForwardSecrecy'] })),
            basis: [a ? 'a' : 'b'],
          },
        ];
      const groups = { a: childGroups(association, 'a'), b: childGroups(association, 'b') };
      if (
        !a ||
        groups.a.length === 0 ||
        groups.b.length === 0 ||
        groups.a.some((group) => groups.b.includes(group))
      )
        return [];
      return [
        {
          message: 'groups',
          values: {
            groupsA: groups.a.join(' or '),
            placeA: places.a,
            groupsB: groups.b.join(' or '),
            placeB: places.b,
          },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'espProposals'] })),
          basis: [[...groups.a], [...groups.b]],
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const association = design.associations[id]!;
    const places = associationPlaces(design, association);
    const from = ends.filter((end) => hasForwardSecrecy(association, end) === true);
    return from.map((end) => {
      const group = childGroups(association, end)[0] ?? strongEspProposal.group;
      const to = otherEnd(end);
      return {
        id: `as-${end}`,
        label: `Group ${group} at ${places[to]}`,
        sentence: `Lets ${places[to]} renew child keys with group ${group}, as ${places[end]} does.`,
        patch: { associations: { [id]: { [to]: withGroup(association, to, group) } } },
      };
    });
  },
});
