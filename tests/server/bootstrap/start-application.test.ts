import { expect, test } from 'vitest';
import { announcement } from '../../../server/bootstrap/start-application.mjs';

const facts = { url: 'http://127.0.0.1:3000', firstOwner: null, logFile: null, durationMs: 1234 };

test('the announcement gives the address and everyone who can sign in to the demo', () => {
  const signIns = [
    { email: 'ines@saltmarsh.example', password: 'tide-table', role: 'engineer' },
    { email: 'bo@saltmarsh.example', password: 'lock-gate', role: 'reviewer' },
  ];
  expect(announcement({ ...facts, signIns }).split('\n')).toEqual([
    '',
    'Longpatch is ready at http://127.0.0.1:3000 after 1.2 s.',
    '',
    'Sign in to the demo with one of these (address, password, role):',
    '  ines@saltmarsh.example  tide-table  engineer',
    '  bo@saltmarsh.example    lock-gate   reviewer',
    '',
    'Ctrl-C stops it.',
  ]);
});

test('the announcement names the log when there is one, and no demo when there is none', () => {
  const text = announcement({ ...facts, signIns: [], logFile: '.longpatch/start/server.log' });
  expect(text).toContain("The server's log is '.longpatch/start/server.log'.");
  expect(text).not.toContain('demo');
});

test('the announcement of an empty database says where its first owner goes, and with which code', () => {
  const firstOwner = { url: 'https://plan.ternwick.example/first-owner', code: '12ab-34cd' };
  const lines = announcement({ ...facts, signIns: [], firstOwner }).split('\n');
  const at = lines.indexOf('  12ab-34cd');
  expect(lines[at - 1]).toContain(`${firstOwner.url} with this code, which works once`);
});
