import { createHash, randomBytes } from 'node:crypto';

// 256 bits: nobody guesses one, so a plain hash of it is safe to keep.
const tokenBytes = 32;

/** What stands in a link that is a key, and what of it may be kept. */
export function newLinkToken(): { readonly token: string; readonly hash: Buffer } {
  const token = randomBytes(tokenBytes).toString('base64url');
  return { token, hash: hashLinkToken(token) };
}

export function hashLinkToken(token: string): Buffer {
  return createHash('sha256').update(token).digest();
}
