import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankBetween } from '../model/rank.ts';
import type { ProposalPart } from '../network/negotiate.ts';
import { negotiate } from '../network/negotiate.ts';
import type { Association, End } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import {
  encryptionName,
  integrityName,
  prfName,
  proposalName,
  type EspProposal,
  type IkeProposal,
} from './algorithm-names.ts';
import { weaknessesOf } from './algorithm-weakness.ts';
import { defineRule, type Fault } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { associationPlaces } from './places.ts';
import { listed } from './wording.ts';

type Layer = 'ike' | 'esp';
const fieldOf = { ike: 'ikeProposals', esp: 'espProposals' } as const;
const layerName = { ike: 'IKE', esp: 'ESP' } as const;

const proposalsOf = (
  association: Association,
  end: End,
  layer: Layer,
): readonly (readonly [string, IkeProposal | EspProposal])[] =>
  inRankOrder<IkeProposal | EspProposal>(association[end][fieldOf[layer]]);

const partValue = (part: ProposalPart, proposal: IkeProposal | EspProposal): string => {
  switch (part) {
    case 'encryption':
      return encryptionName(proposal.encryption);
    case 'key length':
      return `${proposal.keyBits ?? 'any'} bits`;
    case 'integrity':
      return proposal.integrity === undefined ? 'none' : integrityName(proposal.integrity);
    case 'pseudorandom function':
      return 'prf' in proposal && proposal.prf !== undefined ? prfName(proposal.prf) : 'any';
    case 'group':
      return String(proposal.group ?? 'any');
  }
};

/** The differing part as a button names it. */
const buttonValue = (part: ProposalPart, proposal: IkeProposal | EspProposal): string => {
  if (part === 'group') return `group ${partValue(part, proposal)}`;
  return part === 'key length' ? `${proposal.keyBits ?? 'any'}-bit keys` : partValue(part, proposal);
};

const valuesAt = (association: Association, end: End, layer: Layer, part: ProposalPart): string =>
  [...new Set(proposalsOf(association, end, layer).map(([, proposal]) => partValue(part, proposal)))].join(
    ' or ',
  );

const messages = {
  onePart: {
    words: 'proposals differ',
    sentence: (v: {
      readonly layer: string;
      readonly part: string;
      readonly valueA: string;
      readonly placeA: string;
      readonly valueB: string;
      readonly placeB: string;
    }) => `${v.layer} ${v.part} ${v.valueA} at ${v.placeA}, ${v.valueB} at ${v.placeB}`,
  },
  severalParts: {
    words: 'proposals differ',
    sentence: (v: { readonly layer: string; readonly parts: string }) =>
      `${v.layer} ${v.parts} differ between the ends`,
  },
  noWhole: {
    words: 'proposals differ',
    sentence: (v: { readonly layer: string; readonly placeA: string; readonly placeB: string }) =>
      `No ${v.layer} proposal is alike at ${v.placeA} and ${v.placeB}`,
  },
};

export const associationProposalsDiffer = defineRule({
  id: 'association-proposals-differ',
  title: 'Both ends of an association propose something in common',
  severity: 'blocking',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'The end that answers accepts only a proposal it knows whole. Without one in common there are no keys and no association.',
  seen: 'The end that starts logs that no proposal was chosen and tries again forever.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.7' }],
  messages,
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const agreed = negotiate(association);
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      return (['ike', 'esp'] as const).flatMap((layer): readonly Fault<typeof messages>[] => {
        const agreement = agreed[layer];
        if (agreement.state !== 'differ') return [];
        const [first, ...more] = agreement.parts;
        const body = {
          elements: [ref],
          identity: [id, layer],
          properties: ends.map((end) => ({ ref, path: [end, fieldOf[layer]] })),
          basis: ends.map((end) =>
            proposalsOf(association, end, layer).map(([, proposal]) => proposalName(proposal)),
          ),
        };
        const shared = { layer: layerName[layer], placeA: places.a, placeB: places.b };
        if (first === undefined) return [{ message: 'noWhole', values: shared, ...body }];
        if (more.length > 0)
          return [
            {
              message: 'severalParts',
              values: { layer: layerName[layer], parts: listed(agreement.parts) },
              ...body,
            },
          ];
        return [
          {
            message: 'onePart',
            values: {
              ...shared,
              part: first,
              valueA: valuesAt(association, 'a', layer, first),
              valueB: valuesAt(association, 'b', layer, first),
            },
            ...body,
          },
        ];
      });
    }),
  fixes: (fault, { design }) => {
    const [id, layer] = fault.identity as readonly [string, Layer];
    const association = design.associations[id]!;
    const places = associationPlaces(design, association);
    const agreement = negotiate(association)[layer];
    const part = agreement.state === 'differ' ? (agreement.parts[0] ?? 'encryption') : 'encryption';
    const offered = ends.flatMap((from) => {
      const [entry] = proposalsOf(association, from, layer);
      if (entry === undefined) return [];
      const [proposalId, proposal] = entry;
      const to = otherEnd(from);
      const known = proposalsOf(association, to, layer);
      const taken = new Set(known.map(([other]) => other));
      const stem = taken.has(proposalId) ? `${proposalId.slice(0, 58)}-${from}` : proposalId;
      const free = taken.has(stem) ? `${stem}-${taken.size}` : stem;
      const added = {
        ...proposal,
        rank: rankBetween(undefined, known[0]?.[1].rank),
      } as unknown as MergePatch;
      const fix: Fix = {
        id: `add-at-${to}`,
        label: `Add ${buttonValue(part, proposal)} at ${places[to]}`,
        sentence: `Puts ${proposalName(proposal)}, which ${places[from]} prefers, first at ${places[to]}.`,
        patch: { associations: { [id]: { [to]: { [fieldOf[layer]]: { [free]: added } } } } },
      };
      return [{ fix, weaknesses: weaknessesOf(layer, proposal).length, keyBits: proposal.keyBits ?? 0 }];
    });
    return offered.sort((x, y) => x.weaknesses - y.weaknesses || y.keyBits - x.keyBits).map(({ fix }) => fix);
  },
});
