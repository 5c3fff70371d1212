import { createHash, randomBytes } from 'node:crypto';
import { Secret, TOTP } from 'otpauth';

// RFC 6238 section 4 and RFC 4226 section 5.3: SHA-1, 30 seconds and 6 digits are what every authenticator app takes.
const algorithm = 'SHA1';
const periodSeconds = 30;
const digits = 6;
// RFC 4226 section 4, R6: a shared secret of 160 bits.
const secretBytes = 20;
// RFC 6238 section 5.2: at most one time step for the way of the code and for clocks that differ.
const stepsEitherWay = 1;
const recoveryCodes = 10;
// 75 bits: no table of hashes reaches them.
const recoveryCharacters = 15;

export function newTotpSecret(): Buffer {
  return randomBytes(secretBytes);
}

/** The secret as people type it into an app: base 32 (RFC 4648 section 6). */
export function totpSecretText(secret: Uint8Array): string {
  return secretOf(secret).base32;
}

/** The address that an authenticator app reads from a picture. */
export function totpUri(secret: Uint8Array, accountName: string): string {
  return new TOTP({
    issuer: 'Longpatch',
    label: accountName,
    secret: secretOf(secret),
    algorithm,
    digits,
    period: periodSeconds,
  }).toString();
}

/** The time step that six digits belong to, counted from 1970; null where they are none of this secret's around `at`. */
export function timeStepOf(code: string, secret: Uint8Array, at: Date): number | null {
  const delta = TOTP.validate({
    token: code,
    secret: secretOf(secret),
    algorithm,
    digits,
    period: periodSeconds,
    timestamp: at.getTime(),
    window: stepsEitherWay,
  });
  return delta === null ? null : Math.floor(at.getTime() / 1000 / periodSeconds) + delta;
}

/** A code without the spaces and hyphens that people type in between. */
export function tidyCode(code: string): string {
  return code.replace(/[\s-]/g, '').toLowerCase();
}

export const isSixDigits = (code: string): boolean => new RegExp(`^\\d{${digits}}$`).test(code);

/** Codes for the day on which the authenticator is lost, such as 'k7m2p-q4xtb-w3hnc'. */
export function newRecoveryCodes(): readonly string[] {
  return Array.from({ length: recoveryCodes }, () => {
    const text = totpSecretText(randomBytes(recoveryCharacters)).toLowerCase();
    return text.slice(0, recoveryCharacters).replace(/(.{5})(?=.)/g, '$1-');
  });
}

export function recoveryCodeHash(code: string): Buffer {
  return createHash('sha256').update(tidyCode(code)).digest();
}

function secretOf(secret: Uint8Array): Secret {
  // The library wants a buffer of its own.
  return new Secret({ buffer: new Uint8Array(secret).buffer });
}
