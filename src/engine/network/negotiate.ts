import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type { Association, End } from './network.ts';
import { perObject } from './network.ts';

type IkeProposal = NonNullable<Association['a']['ikeProposals']>[string];
type EspProposal = NonNullable<Association['a']['espProposals']>[string];
export type ProposalPart = 'encryption' | 'key length' | 'integrity' | 'pseudorandom function' | 'group';

/** What both ends settle on, from `a` and `b`'s lists. */
export type Agreement<P> =
  | { readonly state: 'agreed'; readonly a: Id; readonly b: Id; readonly proposal: P }
  /** An end doesn't say what it proposes. */
  | { readonly state: 'unknown' }
  /** `parts`: what has nothing in common between the ends; empty where each part would fit but no whole proposal does. */
  | { readonly state: 'differ'; readonly parts: readonly ProposalPart[] };
export interface Negotiation {
  readonly ike: Agreement<IkeProposal>;
  readonly esp: Agreement<EspProposal>;
}

// RFC 5282 section 8, RFC 4106 section 8.2: with a combined-mode algorithm integrity is not proposed apart from it.
const isCombined = (encryption: IkeProposal['encryption']): boolean =>
  encryption.startsWith('aes-gcm') || encryption === 'chacha20-poly1305';

type Values<P> = { readonly part: ProposalPart; readonly of: (proposal: P) => string | number | undefined };
const shared: readonly Values<IkeProposal | EspProposal>[] = [
  { part: 'encryption', of: (p) => p.encryption },
  { part: 'key length', of: (p) => p.keyBits },
  { part: 'integrity', of: (p) => (isCombined(p.encryption) ? 'combined' : p.integrity) },
];
const ikeParts: readonly Values<IkeProposal>[] = [
  ...shared,
  { part: 'pseudorandom function', of: (p) => p.prf },
  { part: 'group', of: (p) => p.group },
];
// RFC 7296 section 1.2: the first child SA is made in IKE_AUTH without a key exchange of its own, so that groups that differ
// there stop a rekey, not the start.
const espParts: readonly Values<EspProposal>[] = shared;

/** An absent value is unknown and fits anything. */
const fits = <P>(parts: readonly Values<P>[], x: P, y: P): boolean =>
  parts.every(({ of }) => of(x) === undefined || of(y) === undefined || of(x) === of(y));

const agree = <P extends { readonly rank: string }>(
  parts: readonly Values<P>[],
  a: { readonly [id: string]: P } | undefined,
  b: { readonly [id: string]: P } | undefined,
  proposer: End,
): Agreement<P> => {
  const listA = inRankOrder(a);
  const listB = inRankOrder(b);
  if (listA.length === 0 || listB.length === 0) return { state: 'unknown' };
  const [first, second] = proposer === 'a' ? [listA, listB] : [listB, listA];
  for (const [id, proposal] of first) {
    const match = second.find(([, other]) => fits(parts, proposal, other));
    if (match !== undefined)
      return {
        state: 'agreed',
        a: proposer === 'a' ? id : match[0],
        b: proposer === 'a' ? match[0] : id,
        proposal,
      };
  }
  const apart = parts.filter((one) => !listA.some(([, x]) => listB.some(([, y]) => fits([one], x, y))));
  // Where encryption differs, what depends on it differs of itself.
  const own = apart.some(({ part }) => part === 'encryption')
    ? apart.filter(({ part }) => part !== 'integrity' && part !== 'key length')
    : apart;
  return { state: 'differ', parts: own.map(({ part }) => part) };
};

/** The end that proposes: the one that starts; a where both or neither do. */
const proposerOf = (association: Association): End =>
  association.a.start === 'answers' && association.b.start !== 'answers' ? 'b' : 'a';

/**
 * Which proposals both ends of an association settle on, or which part has nothing in common. The end that starts
 * proposes; its order of preference decides (RFC 7296 section 2.7).
 */
export const negotiate = perObject((association: Association): Negotiation => {
  const { a, b } = association;
  const proposer = proposerOf(association);
  return {
    ike: agree(ikeParts, a.ikeProposals, b.ikeProposals, proposer),
    esp: agree(espParts, a.espProposals, b.espProposals, proposer),
  };
});
