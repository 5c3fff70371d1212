import fc from 'fast-check';
import { expect, test } from 'vitest';
import { canonicalJson } from '#engine/model/canonical-json.ts';

test('says what RFC 8785, section 3.2.2 and 3.2.3 give as examples', () => {
  expect(
    canonicalJson({
      numbers: [333333333.3333333, 1e30, 4.5, 2e-3, 0.000000000000000000000000001],
      string: '\u20ac$\u000f\nA\'B"\\\\"/',
      literals: [null, true, false],
    }),
  ).toBe(
    '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}',
  );
  expect(
    canonicalJson({ '\u20ac': 1, '\r': 2, '\ufb33': 3, '1': 4, '\ud83d\ude00': 5, '\u0080': 6, ö: 7 }),
  ).toBe('{"\\r":2,"1":4,"\u0080":6,"ö":7,"€":1,"😀":5,"\ufb33":3}');
});

test('is the same for every order of members, and reads back as the same value', () => {
  fc.assert(
    fc.property(fc.jsonValue(), (value) => {
      const text = canonicalJson(value);
      expect(canonicalJson(JSON.parse(text))).toBe(text);
      expect(JSON.parse(text)).toEqual(JSON.parse(JSON.stringify(value)));
    }),
  );
  expect(canonicalJson({ 10: 'a', 9: 'b' })).toBe('{"10":"a","9":"b"}');
});
