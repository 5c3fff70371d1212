import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, diffPatch } from '../model/merge-patch.ts';
import { inRankOrder } from '../model/rank.ts';
import type { Association, DesignFacts, End } from '../network/network.ts';
import { ends, perObject } from '../network/network.ts';
import { keyExchangeGroupNames } from '../reference/key-exchange-groups.ts';
import {
  encryptionName,
  integrityName,
  prfName,
  type EspProposal,
  type IkeProposal,
} from './algorithm-names.ts';
import { weaknessesOf, type Weakness } from './algorithm-weakness.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { strongEspProposal, strongIkeProposal } from './strong-suite.ts';

type Layer = 'ike' | 'esp';
const layers = ['ike', 'esp'] as const;
const fieldOf = { ike: 'ikeProposals', esp: 'espProposals' } as const;

interface Use {
  readonly end: End;
  readonly layer: Layer;
  readonly proposal: string;
  readonly weakness: Weakness;
}

const usesIn = perObject((association: Association): readonly Use[] =>
  ends.flatMap((end) =>
    layers.flatMap((layer) =>
      inRankOrder<IkeProposal | EspProposal>(association[end][fieldOf[layer]]).flatMap(([proposal, entry]) =>
        weaknessesOf(layer, entry).map((weakness) => ({ end, layer, proposal, weakness })),
      ),
    ),
  ),
);

const algorithmName = ({ part, algorithm }: Weakness): string => {
  switch (part) {
    case 'encryption':
      return encryptionName(algorithm as IkeProposal['encryption']);
    case 'integrity':
      return integrityName(algorithm as NonNullable<IkeProposal['integrity']>);
    case 'prf':
      return prfName(algorithm as NonNullable<IkeProposal['prf']>);
    case 'group':
      return `group ${algorithm} (${keyExchangeGroupNames[Number(algorithm)] ?? 'unnamed'})`;
    case 'no-integrity':
      return `${encryptionName(algorithm as IkeProposal['encryption'])} without integrity`;
  }
};

/** The proposal with what is weak in it replaced; what stays keeps its place. */
const strengthened = (
  layer: Layer,
  entry: IkeProposal | EspProposal,
  weak: readonly Weakness[],
): MergePatch => {
  const strong = layer === 'ike' ? strongIkeProposal : strongEspProposal;
  const parts = new Set(weak.map(({ part }) => part));
  const changes: { [field: string]: string | number | null } = {};
  if (parts.has('encryption')) {
    changes.encryption = strong.encryption;
    changes.keyBits = strong.keyBits;
    changes.integrity = null;
    if (layer === 'ike' && (entry as IkeProposal).prf === undefined) changes.prf = strongIkeProposal.prf;
  } else if (parts.has('integrity') || parts.has('no-integrity')) {
    changes.integrity = 'hmac-sha2-256-128';
  }
  if (parts.has('prf')) changes.prf = strongIkeProposal.prf;
  if (parts.has('group')) changes.group = strong.group;
  return changes;
};

/** Replaces the weak parts of the given kind at both ends, then drops proposals that have become equal. */
const strengthen = (design: DesignFacts, id: string, keys: ReadonlySet<string>): MergePatch => {
  let current = design;
  const change = (end: End, layer: Layer, proposal: string, patch: MergePatch | null): void => {
    current = applyPatch(current, {
      associations: { [id]: { [end]: { [fieldOf[layer]]: { [proposal]: patch } } } },
    });
  };
  for (const end of ends)
    for (const layer of layers) {
      for (const [proposal, entry] of inRankOrder<IkeProposal | EspProposal>(
        design.associations[id]![end][fieldOf[layer]],
      )) {
        const weak = weaknessesOf(layer, entry).filter((weakness) => keys.has(weaknessKey(weakness)));
        if (weak.length > 0) change(end, layer, proposal, strengthened(layer, entry, weak));
      }
      const seen = new Set<string>();
      for (const [proposal, { rank: _rank, ...rest }] of inRankOrder<IkeProposal | EspProposal>(
        current.associations[id]![end][fieldOf[layer]],
      )) {
        const text = JSON.stringify(Object.entries(rest).sort());
        if (seen.has(text)) change(end, layer, proposal, null);
        seen.add(text);
      }
    }
  return diffPatch(design, current);
};

const weaknessKey = ({ layer, part, algorithm }: Weakness): string => `${layer}-${part}-${algorithm}`;

export const weakAlgorithm = defineRule({
  id: 'weak-algorithm',
  title: 'Associations propose only algorithms that the standards still recommend',
  severity: 'degrading',
  looksAt: ['associations', 'gateways', 'sites'],
  why: 'An algorithm that can be broken, or soon may be, opens all that the association carries; and a weak proposal beside a strong one may be the one that is chosen.',
  seen: 'Nothing, until an audit or an attacker finds it; newer software may refuse the proposal after an update.',
  sources: [
    { document: 'RFC 8221', clause: 'section 5 and section 6' },
    { document: 'RFC 8247', clause: 'section 2' },
    { document: 'RFC 9395', clause: 'section 5' },
  ],
  messages: {
    forbidden: {
      words: 'forbidden algorithm',
      sentence: (v: {
        readonly association: string;
        readonly layer: string;
        readonly algorithm: string;
        readonly places: string;
      }) => `Forbidden ${v.layer} ${v.algorithm} in ${v.association} at ${v.places}`,
    },
    fading: {
      words: 'weak algorithm',
      sentence: (v: {
        readonly association: string;
        readonly layer: string;
        readonly algorithm: string;
        readonly places: string;
      }) => `Weak ${v.layer} ${v.algorithm} in ${v.association} at ${v.places}`,
    },
    clear: {
      words: 'not encrypted',
      sentence: (v: {
        readonly association: string;
        readonly layer: string;
        readonly algorithm: string;
        readonly places: string;
      }) => `${v.association} may run unencrypted: NULL at ${v.places}`,
      why: 'With NULL encryption packets are protected against change but can be read by anyone on the path.',
      seen: 'Frames of the segments can be read in a capture on the transport, although the association is up.',
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      const uses = usesIn(association);
      if (uses.length === 0) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'associations', id } as const;
      const keys = [...new Set(uses.map(({ weakness }) => weaknessKey(weakness)))].sort();
      return keys.map((key) => {
        const these = uses.filter(({ weakness }) => weaknessKey(weakness) === key);
        const { weakness } = these[0]!;
        return {
          message: weakness.kind,
          values: {
            association: association.name,
            layer: weakness.layer === 'ike' ? 'IKE' : 'ESP',
            algorithm: algorithmName(weakness),
            places: ends.every((end) => these.some((use) => use.end === end))
              ? 'both ends'
              : places[these[0]!.end],
          },
          elements: [ref],
          identity: [id, key],
          properties: these.map(({ end, layer, proposal, weakness: { field } }) => ({
            ref,
            path: [end, fieldOf[layer], proposal, field],
          })),
          basis: [key, ...new Set(these.map(({ end }) => end))],
          sources: weakness.sources,
          ...(weakness.kind === 'forbidden'
            ? {
                severity: 'blocking' as const,
                severityReason: 'The standard forbids it.',
              }
            : {}),
        };
      });
    }),
  fixes: (fault, { design }) => {
    const [id, key] = fault.identity as readonly [string, string];
    const all = new Set(usesIn(design.associations[id]!).map(({ weakness }) => weaknessKey(weakness)));
    const { association, algorithm } = fault.values;
    const one = {
      id: 'replace',
      label: 'Replace at both ends',
      sentence: `Replaces ${algorithm} in ${association} with a recommended algorithm, alike at both ends.`,
      patch: strengthen(design, id, new Set([key])),
    };
    return all.size === 1
      ? [one]
      : [
          {
            id: 'replace-all',
            label: 'Replace all that is weak',
            sentence: `Replaces everything weak in ${association} with recommended algorithms, alike at both ends.`,
            patch: strengthen(design, id, all),
          },
          one,
        ];
  },
});
