import { describe, expect, test } from 'vitest';
import {
  isSixDigits,
  newRecoveryCodes,
  newTotpSecret,
  recoveryCodeHash,
  timeStepOf,
  totpSecretText,
  totpUri,
} from '../../../server/auth/one-time-codes.ts';
import vectors from '../../reference/rfc6238-totp.json' with { type: 'json' };
import { codeAt } from '../../support/authenticator.ts';

const secret = Buffer.from(vectors.secret, 'ascii');
const at = (unixSeconds: number): Date => new Date(unixSeconds * 1000);

describe('a code of RFC 6238 appendix B', () => {
  test.each(vectors.rows)('fits at $unixSeconds s', ({ unixSeconds, timeStep, eightDigits }) => {
    const code = eightDigits.slice(2);
    expect(timeStepOf(code, secret, at(unixSeconds))).toBe(timeStep);
    expect(codeAt(totpSecretText(secret), at(unixSeconds))).toBe(code);
  });

  test.each(vectors.rows)(
    'of $unixSeconds s fits one time step either way and no more',
    ({ unixSeconds, timeStep, eightDigits }) => {
      const code = eightDigits.slice(2);
      for (const steps of [-1, 1]) {
        expect(timeStepOf(code, secret, at(unixSeconds + steps * 30))).toBe(timeStep);
        expect(timeStepOf(code, secret, at(unixSeconds + steps * 60))).toBeNull();
      }
    },
  );
});

test('a code of another secret does not fit', () => {
  const now = new Date();
  expect(timeStepOf(codeAt(totpSecretText(newTotpSecret()), now), newTotpSecret(), now)).toBeNull();
});

test('the address for an authenticator app carries what it needs to know', () => {
  const uri = new URL(totpUri(secret, 'r.halloran@ternwick.example'));
  expect(uri.protocol).toBe('otpauth:');
  expect(decodeURIComponent(uri.pathname)).toContain('Longpatch:r.halloran@ternwick.example');
  expect(Object.fromEntries(uri.searchParams)).toEqual({
    issuer: 'Longpatch',
    secret: 'GEZDGNBVGY3TQOJQGEZDGNBVGY3TQOJQ',
    algorithm: 'SHA1',
    digits: '6',
    period: '30',
  });
});

test('recovery codes are ten, differ, and count however they are typed', () => {
  const codes = newRecoveryCodes();
  expect(new Set(codes).size).toBe(10);
  for (const code of codes) expect(code).toMatch(/^[a-z2-7]{5}-[a-z2-7]{5}-[a-z2-7]{5}$/);
  const [code = ''] = codes;
  expect(recoveryCodeHash(` ${code.toUpperCase().replace(/-/g, ' ')} `)).toEqual(recoveryCodeHash(code));
  expect(codes.every((each) => !isSixDigits(each))).toBe(true);
});
