import { mkdirSync, mkdtempSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, relative } from 'node:path';
import { ESLint } from 'eslint';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';

const projectFolder = join(import.meta.dirname, '..', '..');
let tree: string;
let eslint: ESLint;

/** One file in every part of the program. */
const files = [
  ...[
    'reference',
    'model',
    'network',
    'wire',
    'flood',
    'trace',
    'load',
    'rules',
    'sheets',
    'stretch',
    'formats',
    'diff',
  ].map((name) => `src/engine/${name}/x.ts`),
  ...['drawing/tidy', 'contract', 'lib', 'components', 'workspace', 'canvas/nodes', 'pages', 'app'].map(
    (name) => `src/${name}/x.ts`,
  ),
  'src/features/trace/x.ts',
  'src/features/load/x.ts',
  ...['db', 'mail', 'repositories', 'auth', 'services', 'middleware', 'routes', 'bootstrap'].map(
    (name) => `server/${name}/x.ts`,
  ),
  ...['config', 'errors', 'app', 'main'].map((name) => `server/${name}.ts`),
];

beforeAll(() => {
  tree = realpathSync(mkdtempSync(join(tmpdir(), 'longpatch-imports-')));
  for (const file of files) {
    mkdirSync(dirname(join(tree, file)), { recursive: true });
    writeFileSync(join(tree, file), 'export const x = 1;\n');
  }
  eslint = new ESLint({
    cwd: tree,
    overrideConfigFile: join(projectFolder, 'eslint.config.js'),
    overrideConfig: { settings: { 'boundaries/root-path': tree } },
  });
});

afterAll(() => rmSync(tree, { recursive: true, force: true }));

async function rulesBrokenBy(file: string, code: string): Promise<readonly string[]> {
  const [result] = await eslint.lintText(code, { filePath: join(tree, file) });
  return (result?.messages ?? []).map((message) => message.ruleId ?? message.message);
}

function importing(from: string, to: string): string {
  const path = relative(dirname(from), to);
  return `export { x } from '${path.startsWith('.') ? path : `./${path}`}';\n`;
}

describe('imports that follow the order', () => {
  test.each([
    ['src/engine/rules/y.ts', 'src/engine/trace/x.ts'],
    ['src/engine/rules/y.ts', 'src/engine/rules/x.ts'],
    ['src/engine/wire/y.ts', 'src/engine/reference/x.ts'],
    ['src/engine/diff/y.ts', 'src/engine/model/x.ts'],
    ['src/drawing/svg/y.ts', 'src/drawing/tidy/x.ts'],
    ['src/drawing/svg/y.ts', 'src/engine/network/x.ts'],
    ['src/contract/y.ts', 'src/engine/model/x.ts'],
    ['src/workspace/y.ts', 'src/lib/x.ts'],
    ['src/features/trace/y.ts', 'src/canvas/nodes/x.ts'],
    ['src/features/trace/y.ts', 'src/features/trace/x.ts'],
    ['src/pages/y.ts', 'src/features/load/x.ts'],
    ['src/main.tsx', 'src/app/x.ts'],
    ['server/routes/y.ts', 'server/middleware/x.ts'],
    ['server/services/y.ts', 'server/repositories/x.ts'],
    ['server/repositories/y.ts', 'server/errors.ts'],
    ['server/main.ts', 'server/app.ts'],
  ])('%s may import %s', async (from, to) => {
    expect(await rulesBrokenBy(from, importing(from, to))).toEqual([]);
  });
});

describe('imports against the order', () => {
  test.each([
    ['src/engine/model/y.ts', 'src/engine/network/x.ts'],
    ['src/engine/wire/y.ts', 'src/engine/flood/x.ts'],
    ['src/engine/trace/y.ts', 'src/engine/rules/x.ts'],
    ['src/engine/formats/y.ts', 'src/engine/network/x.ts'],
    ['src/engine/model/y.ts', 'src/contract/x.ts'],
    ['src/drawing/svg/y.ts', 'src/contract/x.ts'],
    ['src/drawing/svg/y.ts', 'src/canvas/nodes/x.ts'],
    ['src/components/y.ts', 'src/workspace/x.ts'],
    ['src/canvas/nodes/y.ts', 'src/features/trace/x.ts'],
    ['src/features/trace/y.ts', 'src/features/load/x.ts'],
    ['src/features/trace/y.ts', 'src/pages/x.ts'],
    ['server/repositories/y.ts', 'server/services/x.ts'],
    ['server/services/y.ts', 'server/routes/x.ts'],
    ['server/db/y.ts', 'server/repositories/x.ts'],
    ['server/services/y.ts', 'server/bootstrap/x.ts'],
    ['server/services/y.ts', 'server/app.ts'],
  ])('%s may not import %s', async (from, to) => {
    expect(await rulesBrokenBy(from, importing(from, to))).toContain('boundaries/dependencies');
  });

  test('the server takes only the named parts of src', async () => {
    expect(
      await rulesBrokenBy('server/services/y.ts', importing('server/services/y.ts', 'src/lib/x.ts')),
    ).toContain('no-restricted-imports');
    expect(await rulesBrokenBy('server/services/y.ts', "export { x } from '#engine/model/x.ts';\n")).toEqual(
      [],
    );
  });

  test('a file in a part that the order does not know is an error', async () => {
    expect(await rulesBrokenBy('src/engine/astrology/y.ts', 'export const y = 1;\n')).toContain(
      'boundaries/no-unknown-files',
    );
  });

  test('an import without its extension is an error', async () => {
    expect(await rulesBrokenBy('src/lib/y.ts', "export { x } from './x';\n")).toContain(
      'import-x/extensions',
    );
  });
});

describe('the engine and the drawing are pure', () => {
  test.each([
    "import { readFileSync } from 'node:fs';\nexport const y = readFileSync;\n",
    "import { readFileSync } from 'fs';\nexport const y = readFileSync;\n",
    "import { useState } from 'react';\nexport const y = useState;\n",
    "import pg from 'pg';\nexport const y = pg;\n",
    'export const y = Date.now();\n',
    'export const y = new Date();\n',
    'export const y = Math.random();\n',
    'export const y = window.innerWidth;\n',
    "export const y = document.querySelector('a');\n",
    "export const y = fetch('/');\n",
    'export const y = process.env;\n',
  ])('%j is an error', async (code) => {
    for (const file of ['src/engine/model/y.ts', 'src/drawing/svg/y.ts']) {
      expect(await rulesBrokenBy(file, code)).toEqual([expect.stringMatching(/^no-restricted-/)]);
    }
  });

  test.each(["import { z } from 'zod';\nexport const y = z.string();\n", 'export const y = new Date(0);\n'])(
    '%j is fine',
    async (code) => {
      expect(await rulesBrokenBy('src/engine/model/y.ts', code)).toEqual([]);
    },
  );
});
