import { expect, test } from 'vitest';
import { safeReturnPath, signInPath } from '../../src/lib/return-path.ts';

const origin = 'https://longpatch.example';

test.each([
  ['/designs/d-1', '/designs/d-1'],
  [
    '/workspaces/w-1/engagements?state=draft&q=a%20b#top',
    '/workspaces/w-1/engagements?state=draft&q=a%20b#top',
  ],
  ['/', '/'],
])('a path of this application is where the reader goes back to: %s', (asked, path) => {
  expect(safeReturnPath(asked, origin)).toBe(path);
});

test.each([
  null,
  '',
  'https://elsewhere.example/',
  '//elsewhere.example/',
  '/\\elsewhere.example/',
  '/\t/elsewhere.example/',
  '\t//elsewhere.example',
  'javascript:alert(1)',
  'designs/d-1',
  '/sign-in?return=/sign-in',
  '/..//elsewhere.example',
])('anything else leads to the start: %j', (asked) => {
  expect(safeReturnPath(asked, origin)).toBe('/');
});

test('the way back survives being written into the address', () => {
  const path = '/workspaces/w-1/engagements?state=draft&q=fw & sw';
  const written = new URL(signInPath(path), origin).searchParams.get('return');
  expect(written).toBe(path);
  expect(signInPath('/')).toBe('/sign-in');
});
