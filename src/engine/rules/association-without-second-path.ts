import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankAtEnd } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import { associationPath, landingFamilies, landingOf, landingSpeaks } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { unusedId } from './unused-id.ts';

interface Spare {
  readonly association: Id;
  readonly used: Id;
  readonly transport: Id;
  readonly landings: { readonly [E in End]: Id };
}

/** A transport on which both ends land, and which their association can't turn to. */
const spareOf = (network: Network, id: Id): Spare | undefined => {
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
};

export const associationWithoutSecondPath = defineRule({
  id: 'association-without-second-path',
  title: 'An association may turn to every transport that joins its ends',
  severity: 'degrading',
  looksAt: ['associations', 'links', 'devices', 'transports'],
  why: 'Both ends land on a second transport, but the association names addresses of the first alone: when that fails the tunnels are down, although a way is left.',
  seen: 'The first line is cut, the second one is up and idle, and the segment is parted.',
  sources: [{ document: 'RFC 4555', clause: 'section 1.1' }],
  messages: {
    unused: {
      words: 'second path unused',
      sentence: (v: { readonly association: string; readonly used: string; readonly spare: string }) =>
        `${v.association} uses ${v.used} alone, not ${v.spare}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.keys(design.associations).flatMap((id) => {
      const spare = spareOf(network, id);
      if (spare === undefined) return [];
      const ref = { collection: 'associations' as const, id };
      return [
        {
          message: 'unused',
          values: {
            association: entryOf(design.associations, id).name,
            used: entryOf(design.transports, spare.used).name,
            spare: entryOf(design.transports, spare.transport).name,
          },
          elements: [ref, { collection: 'transports' as const, id: spare.transport }],
          identity: [id],
          properties: ends.map((end) => ({ ref, path: [end, 'via'] })),
          basis: [spare.used, spare.transport],
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const spare = spareOf(network, id);
    if (spare === undefined) return [];
    const association = entryOf(network.design.associations, id);
    const added = (end: End): MergePatch => {
      const { via } = association[end];
      if (via === undefined || Object.values(via).some(({ landing }) => landing === spare.landings[end]))
        return {};
      return { via: { [unusedId(via, 'second')]: { rank: rankAtEnd(via), landing: spare.landings[end] } } };
    };
    return [
      {
        id: 'add-path',
        label: `Add ${fault.values.spare}`,
        sentence: `Lets ${fault.values.association} turn to ${fault.values.spare} when ${fault.values.used} fails; both ends must be able to move it, or hold a second one.`,
        patch: { associations: { [id]: { a: added('a'), b: added('b') } } },
      },
    ];
  },
});
