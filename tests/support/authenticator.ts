import { createHmac } from 'node:crypto';

/** The six digits that an authenticator app shows at a time, worked out from RFC 6238 and RFC 4226 section 5.3 alone. */
export function codeAt(secretText: string, at: Date): string {
  const counter = Buffer.alloc(8);
  counter.writeBigUInt64BE(BigInt(Math.floor(at.getTime() / 30_000)));
  const digest = createHmac('sha1', fromBase32(secretText)).update(counter).digest();
  const offset = digest[19]! & 0xf;
  return String((digest.readUInt32BE(offset) & 0x7fffffff) % 1_000_000).padStart(6, '0');
}

// RFC 4648 section 6.
function fromBase32(text: string): Buffer {
  const bits = [...text].map((letter) =>
    'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567'.indexOf(letter).toString(2).padStart(5, '0'),
  );
  const bytes = bits.join('').match(/.{8}/g) ?? [];
  return Buffer.from(bytes.map((byte) => parseInt(byte, 2)));
}
