export const source = 'RFC 7396, Appendix A (example test cases)';
export const how =
  'From memory of the published table; each row re-checked by hand against the algorithm of section 2. Rows whose document is no object are left out: a design is one.';

/** [original, patch, result] */
export const cases: readonly (readonly [object, object, object])[] = [
  [{ a: 'b' }, { a: 'c' }, { a: 'c' }],
  [{ a: 'b' }, { b: 'c' }, { a: 'b', b: 'c' }],
  [{ a: 'b' }, { a: null }, {}],
  [{ a: 'b', b: 'c' }, { a: null }, { b: 'c' }],
  [{ a: ['b'] }, { a: 'c' }, { a: 'c' }],
  [{ a: 'c' }, { a: ['b'] }, { a: ['b'] }],
  [{ a: { b: 'c' } }, { a: { b: 'd', c: null } }, { a: { b: 'd' } }],
  [{ a: [{ b: 'c' }] }, { a: [1] }, { a: [1] }],
  [{ e: null }, { a: 1 }, { e: null, a: 1 }],
  [{}, { a: { bb: { ccc: null } } }, { a: { bb: {} } }],
];
