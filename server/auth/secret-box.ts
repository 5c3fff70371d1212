import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';

/** Keeps secrets that have to be read again, such that the database alone gives none of them away. */
export interface SecretBox {
  /** `owner` is bound into it: put beside another's name it doesn't open. */
  seal(secret: Uint8Array, owner: string): Buffer;
  /** Null where it was sealed under a key that this server doesn't have. */
  open(sealed: Buffer, owner: string): { readonly secret: Buffer; readonly isUnderOldKey: boolean } | null;
}

// NIST SP 800-38D section 8.2.2 (random nonces of 96 bits) and section 5.2.1.2 (a tag of 128 bits).
const nonceBytes = 12;
const tagBytes = 16;
const algorithm = 'aes-256-gcm';

/** Seals under a key made of the first secret, and opens what was sealed under any of them. */
export function createSecretBox(serverSecrets: readonly string[]): SecretBox {
  // RFC 5869: one key for this use alone, whatever else the server's secret serves for.
  const keys = serverSecrets.map((secret) =>
    Buffer.from(hkdfSync('sha256', secret, '', 'longpatch second step', 32)),
  );
  const [first] = keys;
  if (first === undefined) throw new Error('a secret box needs a secret');
  return {
    seal(secret, owner) {
      const nonce = randomBytes(nonceBytes);
      const cipher = createCipheriv(algorithm, first, nonce, { authTagLength: tagBytes });
      cipher.setAAD(Buffer.from(owner));
      const text = Buffer.concat([cipher.update(secret), cipher.final()]);
      return Buffer.concat([nonce, cipher.getAuthTag(), text]);
    },
    open(sealed, owner) {
      for (const key of keys) {
        const secret = opened(key, sealed, owner);
        if (secret !== null) return { secret, isUnderOldKey: key !== first };
      }
      return null;
    },
  };
}

function opened(key: Buffer, sealed: Buffer, owner: string): Buffer | null {
  const decipher = createDecipheriv(algorithm, key, sealed.subarray(0, nonceBytes), {
    authTagLength: tagBytes,
  });
  decipher.setAAD(Buffer.from(owner));
  decipher.setAuthTag(sealed.subarray(nonceBytes, nonceBytes + tagBytes));
  try {
    return Buffer.concat([decipher.update(sealed.subarray(nonceBytes + tagBytes)), decipher.final()]);
  } catch {
    // The tag doesn't fit: another key, another owner, or a damaged value.
    return null;
  }
}
