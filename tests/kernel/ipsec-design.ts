import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { siteId, sitesOnCoast } from '../support/designs.ts';
import { changed } from './changed.ts';

type AssociationEnd = Design['associations'][string]['a'];
type EspProposal = NonNullable<AssociationEnd['espProposals']>[string];
type Ends = { readonly a?: MergePatch; readonly b?: MergePatch };

export interface IpsecCase {
  readonly what: string;
  /** Changes of the association between the head office (a, which starts) and this site (b, which answers). */
  readonly ends: Ends;
  /** Changes of the site's landing. */
  readonly landing?: MergePatch;
}

const esp = (proposal: Omit<EspProposal, 'rank' | 'group'>, rank = 'a0') => ({
  rank,
  group: 19,
  keyBits: null,
  integrity: null,
  ...proposal,
});
const bothWith = (what: string, proposal: Omit<EspProposal, 'rank' | 'group'>): IpsecCase => ({
  what,
  ends: {
    a: { espProposals: { first: esp(proposal) } },
    b: { espProposals: { first: esp(proposal) } },
  },
});

const cbc = { encryption: 'aes-cbc', keyBits: 256, integrity: 'hmac-sha2-256-128' } as const;

export const ipsecCases: readonly IpsecCase[] = [
  bothWith('AES-GCM, 16 bytes', { encryption: 'aes-gcm-16', keyBits: 256 }),
  bothWith('AES-GCM, 12 bytes', { encryption: 'aes-gcm-12', keyBits: 192 }),
  bothWith('AES-GCM, 8 bytes', { encryption: 'aes-gcm-8', keyBits: 128 }),
  bothWith('ChaCha20-Poly1305', { encryption: 'chacha20-poly1305' }),
  bothWith('AES-CBC with HMAC-SHA1', { encryption: 'aes-cbc', keyBits: 128, integrity: 'hmac-sha1-96' }),
  bothWith('AES-CBC with HMAC-SHA2-256', cbc),
  bothWith('AES-CBC with HMAC-SHA2-512', { ...cbc, integrity: 'hmac-sha2-512-256' }),
  bothWith('AES-CTR with HMAC-SHA2-384', {
    encryption: 'aes-ctr',
    keyBits: 128,
    integrity: 'hmac-sha2-384-192',
  }),
  bothWith('NULL with HMAC-SHA2-256', { encryption: 'null', integrity: 'hmac-sha2-256-128' }),
  {
    what: 'ESP proposals of which the second is in common',
    ends: {
      a: { espProposals: { second: esp(cbc, 'a5') } },
      b: { espProposals: { first: esp(cbc) } },
    },
  },
  { what: 'ESP proposals with nothing in common', ends: { b: { espProposals: { first: esp(cbc) } } } },
  {
    what: 'ESP keys of different lengths',
    ends: { b: { espProposals: { first: { keyBits: 128 } } } },
  },
  {
    what: 'groups for renewing child keys that differ',
    ends: { b: { espProposals: { first: { group: 31 } } } },
  },
  { what: 'forward secrecy at one end alone', ends: { b: { perfectForwardSecrecy: false } } },
  {
    what: 'forward secrecy at neither end',
    ends: { a: { perfectForwardSecrecy: false }, b: { perfectForwardSecrecy: false } },
  },
  { what: 'IKE groups that differ', ends: { b: { ikeProposals: { first: { group: 31 } } } } },
  {
    what: 'IKE pseudorandom functions that differ',
    ends: { b: { ikeProposals: { first: { prf: 'hmac-sha2-512' } } } },
  },
  { what: 'IKE versions that differ', ends: { b: { ikeVersion: 1 } } },
  { what: 'two ends that only answer', ends: { a: { start: 'answers' } } },
  { what: 'two ends that both start', ends: { b: { start: 'starts' } } },
  {
    what: 'a site without a fixed address that starts',
    ends: { a: { start: 'answers' }, b: { start: 'starts' } },
    landing: { dynamic: true },
  },
  { what: 'a site without a fixed address that only answers', ends: {}, landing: { dynamic: true } },
  {
    what: 'selectors that miss the far loopback',
    ends: { b: { selectors: { loopbacks: { remote: '10.255.9.9/32' } } } },
  },
];

/** The association, the tunnel and the site of a case, by its place in the list. */
export const namesOf = (index: number) => ({
  association: `as-s0-${siteId(index + 1)}`,
  tunnel: `tn-s0-${siteId(index + 1)}-a`,
  host: `h-${siteId(index + 1)}-a`,
  landing: `ld-${siteId(index + 1)}-coast`,
});

/** The head office, joined to a site for each case. */
export const ipsecDesign = (): Design => {
  const builder = sitesOnCoast(ipsecCases.length + 1);
  ipsecCases.forEach((_case, index) =>
    builder.join('s0', siteId(index + 1), { transport: 'coast', segments: ['a'], vni: () => 10_000 + index }),
  );
  return changed(builder.build(), {
    associations: Object.fromEntries(ipsecCases.map(({ ends }, index) => [namesOf(index).association, ends])),
    links: Object.fromEntries(
      ipsecCases.flatMap(({ landing }, index) =>
        landing === undefined ? [] : [[namesOf(index).landing, landing] as const],
      ),
    ),
  } as MergePatch);
};
