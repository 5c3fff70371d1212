import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { actions, roles } from '#contract/session.ts';
import { permits } from '../../server/auth/permissions.ts';

/** Who may do what, as a table for people. */
const matrix = [
  ['action', ...roles],
  ...actions.map((action) => [`\`${action}\``, ...roles.map((role) => (permits(role, action) ? 'yes' : ''))]),
];

// A formatter aligns the columns of tables.
const cellsOf = (line: string): string =>
  line
    .split('|')
    .slice(1, -1)
    .map((cell) => cell.trim())
    .join('|');

test('the table of who may do what in DEVELOPERS.md is the one that the server goes by', () => {
  const text = readFileSync(join(import.meta.dirname, '..', '..', 'DEVELOPERS.md'), 'utf8');
  const written = new Set(text.split('\n').map(cellsOf));
  const missing = matrix.filter((row) => !written.has(row.join('|')));
  const table = matrix.map((row) => `| ${row.join(' | ')} |`).join('\n');
  expect(missing, `DEVELOPERS.md should have:\n${table}`).toEqual([]);
});
