import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankAtEnd } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import { associationPath, landingFamilies, landingOf, landingSpeaks } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { perEntry } from './facts.ts';
import { unusedId } from './unused-id.ts';
import { counted, sentenceCase } from './wording.ts';

interface Spare {
  readonly association: Id;
  readonly used: Id;
  readonly transport: Id;
  readonly landings: { readonly [E in End]: Id };
}

/** A transport on which both ends land, and which their association can't turn to. */
const spareOf = perEntry(
  'associations',
  ['gateways', 'landings', 'carriers'],
  (network, id): Spare | undefined => {
    const association = entryOf(network.design.associations, id);
    const path = associationPath(network, id);
    if (!path.ok) return undefined;
    const named = (end: End): readonly Id[] =>
      inRankOrder(association[end].via).map(([, step]) => step.landing);
    const own = (end: End): readonly Id[] =>
      (network.landingsByDevice.get(association[end].device) ?? []).filter((landing) =>
        landingSpeaks(network, landing),
      );
    const mayUse = (end: End): readonly Id[] => (named(end).length > 0 ? named(end) : own(end));
    const meets = (a: Id, b: Id): boolean =>
      landingOf(network, a).transport === landingOf(network, b).transport &&
      landingOf(network, a).transport !== path.transport &&
      landingFamilies(network, a).some((family) => landingFamilies(network, b).includes(family));
    if (mayUse('a').some((a) => mayUse('b').some((b) => meets(a, b)))) return undefined;
    for (const a of own('a')) {
      const b = own('b').find((other) => meets(a, other));
      if (b !== undefined)
        return {
          association: id,
          used: path.transport,
          transport: landingOf(network, a).transport,
          landings: { a, b },
        };
    }
    return undefined;
  },
);

/** Associations that leave the same transport out in favour of the same other: one fault, however many they are. */
const spares = (network: Network): ReadonlyMap<string, readonly Spare[]> => {
  const byTransports = new Map<string, Spare[]>();
  for (const id of Object.keys(network.design.associations).sort()) {
    const spare = spareOf(network, id);
    if (spare === undefined) continue;
    const key = `${spare.used} ${spare.transport}`;
    const list = byTransports.get(key);
    if (list === undefined) byTransports.set(key, [spare]);
    else list.push(spare);
  }
  return byTransports;
};

export const associationWithoutSecondPath = defineRule({
  id: 'association-without-second-path',
  title: 'An association may turn to every transport that joins its ends',
  severity: 'degrading',
  looksAt: ['associations', 'landings', 'gateways', 'carriers'],
  why: 'Both ends land on a second transport, but the association names addresses of the first alone: when that fails the tunnels are down, although a way is left.',
  seen: 'The first line is cut, the second one is up and idle, and the segment is parted.',
  sources: [{ document: 'RFC 4555', clause: 'section 1.1' }],
  messages: {
    unused: {
      words: 'second path unused',
      sentence: (v: {
        readonly associations: string;
        readonly isOne: boolean;
        readonly used: string;
        readonly spare: string;
      }) => `${v.associations} ${v.isOne ? 'uses' : 'use'} ${v.used} alone, not ${v.spare}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...spares(network).values()].map((list) => {
      const { used, transport } = list[0]!;
      const refs = list.map(({ association }) => ({ collection: 'associations' as const, id: association }));
      return {
        message: 'unused',
        values: {
          associations:
            refs.length === 1
              ? entryOf(design.associations, refs[0]!.id).name
              : sentenceCase(counted(refs.length, 'association', 'associations')),
          isOne: refs.length === 1,
          used: entryOf(design.transports, used).name,
          spare: entryOf(design.transports, transport).name,
        },
        elements: [...refs, { collection: 'transports' as const, id: transport }],
        identity: [used, transport],
        properties: refs.flatMap((ref) => ends.map((end) => ({ ref, path: [end, 'via'] }))),
        basis: refs.map(({ id }) => id),
      };
    });
  },
  fixes: (fault, network) => {
    const list = spares(network).get(fault.identity!.join(' ')) ?? [];
    const added = ({ association, landings }: Spare, end: End): MergePatch => {
      const { via } = entryOf(network.design.associations, association)[end];
      if (via === undefined || Object.values(via).some(({ landing }) => landing === landings[end])) return {};
      return { via: { [unusedId(via, 'second')]: { rank: rankAtEnd(via), landing: landings[end] } } };
    };
    const { spare, used } = fault.values;
    return [
      {
        id: 'add-path',
        label: `Add ${spare}`,
        sentence: `Lets ${list.length === 1 ? 'the association' : 'the associations'} turn to ${spare} when ${used} fails; both ends must be able to move it, or hold a second one.`,
        patch: {
          associations: Object.fromEntries(
            list.map((each) => [each.association, { a: added(each, 'a'), b: added(each, 'b') }]),
          ),
        },
      },
    ];
  },
});
