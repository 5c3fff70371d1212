import { expect, test } from 'vitest';
import { createSecretBox } from '../../../server/auth/secret-box.ts';

const present = 'the present secret of this server, long enough';
const before = 'the secret that this server had before, long enough';
const secret = Buffer.from('what has to be read again');

test('a sealed secret opens with the same server secret and the same owner, and shows nothing of itself', () => {
  const box = createSecretBox([present]);
  const sealed = box.seal(secret, 'a');
  expect(sealed.includes(secret)).toBe(false);
  expect(box.open(sealed, 'a')).toEqual({ secret, isUnderOldKey: false });
  expect(box.seal(secret, 'a')).not.toEqual(sealed);
});

test('beside another owner, changed by a bit, or cut short it does not open', () => {
  const box = createSecretBox([present]);
  const sealed = box.seal(secret, 'a');
  expect(box.open(sealed, 'b')).toBeNull();
  for (let at = 0; at < sealed.length; at += 1) {
    const changed = Buffer.from(sealed);
    changed[at]! ^= 1;
    expect(box.open(changed, 'a')).toBeNull();
  }
  expect(box.open(sealed.subarray(0, -1), 'a')).toBeNull();
});

test('what was sealed under the secret before opens as such, and not without it', () => {
  const sealed = createSecretBox([before]).seal(secret, 'a');
  expect(createSecretBox([present, before]).open(sealed, 'a')).toEqual({ secret, isUnderOldKey: true });
  expect(createSecretBox([present]).open(sealed, 'a')).toBeNull();
});
