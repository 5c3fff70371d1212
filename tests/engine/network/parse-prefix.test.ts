import { expect, test } from 'vitest';
import { parsePrefix } from '#engine/network/parse-prefix.ts';

test('a prefix is taken apart in either family', () => {
  const read = (text: string) => {
    const [address, bits] = parsePrefix(text);
    return [address.kind(), address.toString(), bits];
  };
  expect(read('192.0.2.16/28')).toEqual(['ipv4', '192.0.2.16', 28]);
  expect(read('2001:db8::/32')).toEqual(['ipv6', '2001:db8::', 32]);
  expect(read('::ffff:192.0.2.1/96')).toEqual(['ipv6', '::ffff:c000:201', 96]);
});
