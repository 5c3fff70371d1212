import type { Design } from '../../engine/model/design.ts';
import type { Holder, NetworkOverlap, NumberClash } from '../../engine/numbering/number-clashes.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** Whether a holder is this element; for a segment at this site, where one is named. */
export const holderIs = (holder: Holder, collection: string, id: string, site?: string): boolean =>
  holder.by === 'element' &&
  holder.ref.collection === collection &&
  holder.ref.id === id &&
  (site === undefined || holder.path[1] === site);

/** Who holds a number, in words. */
export const holderWords = (design: Design, holder: Holder): string => {
  switch (holder.by) {
    case 'element': {
      const name = nameOf(design, holder.ref);
      const site = holder.path[0] === 'sites' ? design.sites[holder.path[1]!]?.name : undefined;
      return site === undefined ? name : `${name} at ${site}`;
    }
    case 'design':
      return holder.name === undefined ? 'another design' : `design ${holder.name}`;
    case 'reservation':
      return 'a reservation';
    case 'network-in-use':
      return holder.of === undefined ? 'a network in use' : `a network in use (${holder.of})`;
  }
};

const kindWords: { readonly [kind in NumberClash['kind']]: string } = {
  vni: 'VNI',
  vlan: 'VLAN',
  loopback: 'Loopback',
  'tunnel-name': 'Name',
};

/** What a clash is about, such as 'VNI 10110' or 'VLAN 120 at Skerry'. */
export const clashSubject = (design: Design, { kind, value, site }: NumberClash): string =>
  `${kindWords[kind]} ${value}${site === undefined ? '' : ` at ${design.sites[site]?.name ?? site}`}`;

/** The other holders of a number, as a row says them: 'VNI 10110: design Terminals stretch'. */
export const clashWords = (
  design: Design,
  clash: NumberClash,
  isOwn: (holder: Holder) => boolean,
): readonly string[] => {
  const others = clash.holders.filter((holder) => !isOwn(holder));
  return others.length === 0
    ? []
    : [`${clashSubject(design, clash)}: ${others.map((holder) => holderWords(design, holder)).join(', ')}`];
};

/** The other side of an overlap, as a row says it. */
export const overlapWords = (
  design: Design,
  { a, b }: NetworkOverlap,
  isOwn: (holder: Holder) => boolean,
): readonly string[] => {
  const [own, other] = isOwn(a.holder) ? [a, b] : [b, a];
  return [`${own.network} overlaps ${other.network}, ${holderWords(design, other.holder)}`];
};
