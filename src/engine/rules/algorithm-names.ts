import type { Entry } from '../model/design.ts';
import { espIntegrities } from '../reference/esp.ts';

type Association = Entry<'associations'>;
export type IkeProposal = NonNullable<Association['a']['ikeProposals']>[string];
export type EspProposal = NonNullable<Association['a']['espProposals']>[string];

// RFC 2104 with the hash functions' own names; RFC 4868 section 2.4 for the SHA-2 family.
const prfNames: { readonly [P in NonNullable<IkeProposal['prf']>]: string } = {
  'hmac-md5': 'HMAC-MD5',
  'hmac-sha1': 'HMAC-SHA1',
  'hmac-sha2-256': 'HMAC-SHA2-256',
  'hmac-sha2-384': 'HMAC-SHA2-384',
  'hmac-sha2-512': 'HMAC-SHA2-512',
};

// RFC 4106, RFC 7634, RFC 3602, RFC 3686, RFC 2410, RFC 2451, RFC 2405: as people say them; the ICV is 16 bytes where no length is said.
const encryptionNames: { readonly [E in IkeProposal['encryption']]: string } = {
  'aes-gcm-16': 'AES-GCM',
  'aes-gcm-12': 'AES-GCM-12',
  'aes-gcm-8': 'AES-GCM-8',
  'chacha20-poly1305': 'ChaCha20-Poly1305',
  'aes-cbc': 'AES-CBC',
  'aes-ctr': 'AES-CTR',
  null: 'NULL',
  '3des-cbc': '3DES-CBC',
  'des-cbc': 'DES-CBC',
};

export const encryptionName = (id: IkeProposal['encryption']): string => encryptionNames[id];
export const integrityName = (id: NonNullable<IkeProposal['integrity']>): string => espIntegrities[id].name;
export const prfName = (id: NonNullable<IkeProposal['prf']>): string => prfNames[id];

/** A proposal in one line, as a button or sentence names it. */
export const proposalName = (proposal: IkeProposal | EspProposal): string =>
  [
    [encryptionName(proposal.encryption), proposal.keyBits].filter((part) => part !== undefined).join(' '),
    proposal.integrity === undefined ? undefined : integrityName(proposal.integrity),
    'prf' in proposal && proposal.prf !== undefined ? prfName(proposal.prf) : undefined,
    proposal.group === undefined ? undefined : `group ${proposal.group}`,
  ]
    .filter((part) => part !== undefined)
    .join(', ');
