import { execFileSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { basename, join } from 'node:path';
import { describe, expect, test } from 'vitest';

const projectFolder = join(import.meta.dirname, '..', '..');
const files = execFileSync('git', ['ls-files', '-z'], { cwd: projectFolder, encoding: 'utf8' })
  .split('\0')
  .filter((path) => path !== '' && existsSync(join(projectFolder, path)));

const rootFiles = [
  'README.md',
  'DEVELOPERS.md',
  'LICENSE',
  'package.json',
  'package-lock.json',
  'tsconfig.json',
  'vite.config.ts',
  'vitest.config.ts',
  'tailwind.config.ts',
  'eslint.config.js',
  'knexfile.ts',
  'index.html',
];
const rootFolders = ['src', 'server', 'migrations', 'seeds', 'tests', 'public'];

const kebabCase = /^[a-z0-9]+(-[a-z0-9]+)*$/;
const migrationName = /^\d{8,14}_[a-z]+(_[a-z0-9]+)+$/;

/** A name without the endings that say what kind of file it is: `x.test.ts`, `x.config.js`, `x.d.ts`. */
function stem(name: string): string {
  return name.replace(/(\.(test|bench|config|worker|d))?\.[a-z0-9]+$/, '');
}

function linesMatching(paths: readonly string[], pattern: RegExp): readonly string[] {
  return paths
    .filter(
      (path) =>
        path !== 'package-lock.json' && /\.([cm]?[jt]sx?|json|md|html|css|csv|svg|sh)$|(^|\/)run$/.test(path),
    )
    .flatMap((path) =>
      readFileSync(join(projectFolder, path), 'utf8')
        .split('\n')
        .flatMap((line, index) => (pattern.test(line) ? [`${path}:${index + 1}: ${line.trim()}`] : [])),
    );
}

describe('the tree', () => {
  test('holds something', () => {
    expect(files.length).toBeGreaterThan(20);
  });

  test('has in its root only what belongs there', () => {
    const strays = files.filter((path) => {
      const [first = '', ...rest] = path.split('/');
      return !first.startsWith('.') && !(rest.length > 0 ? rootFolders : rootFiles).includes(first);
    });
    expect(strays).toEqual([]);
  });

  test('has kebab-case names', () => {
    const strays = files
      .filter((path) => path.includes('/') && basename(path) !== 'README.md')
      .flatMap((path) => {
        const folders = path.split('/').slice(0, -1);
        const isDated = path.startsWith('migrations/') || path.startsWith('seeds/');
        const isNamed =
          kebabCase.test(stem(basename(path))) || (isDated && migrationName.test(stem(basename(path))));
        return isNamed && folders.every((folder) => kebabCase.test(folder.replace(/^\./, ''))) ? [] : [path];
      });
    expect(strays).toEqual([]);
  });

  test('has no name that says nothing', () => {
    const strays = files.filter((path) =>
      path
        .split('/')
        .some(
          (name) =>
            name === 'index.tsx' || ['utils', 'util', 'helpers', 'helper', 'common'].includes(stem(name)),
        ),
    );
    expect(strays).toEqual([]);
  });
});

describe('package.json', () => {
  const manifest = JSON.parse(readFileSync(join(projectFolder, 'package.json'), 'utf8')) as {
    readonly dependencies: Readonly<Record<string, string>>;
    readonly devDependencies: Readonly<Record<string, string>>;
  };

  test('names every package with one exact version', () => {
    const loose = Object.entries({ ...manifest.dependencies, ...manifest.devDependencies }).filter(
      ([, version]) => !/^\d+\.\d+\.\d+(-[\w.]+)?$/.test(version),
    );
    expect(loose).toEqual([]);
  });
});

describe('what is written in the files', () => {
  // Put together here, so that this file does not find itself.
  const unfinished = new RegExp(`\\b(${['TO' + 'DO', 'FIX' + 'ME', 'XX' + 'X', 'HA' + 'CK'].join('|')})\\b`);

  test('leaves nothing for later', () => {
    expect(linesMatching(files, unfinished)).toEqual([]);
  });

  test('skips no test and runs none alone', () => {
    const narrowed = /\b(it|test|describe)\.(skip|only|todo)\b/;
    expect(
      linesMatching(
        files.filter((path) => path.startsWith('tests/')),
        narrowed,
      ),
    ).toEqual([]);
  });

  test('names no path of one machine', () => {
    expect(linesMatching(files, /(^|[^\w.-])\/(work|farm|home|root|Users)\/\w/)).toEqual([]);
  });

  test('switches off neither the order of imports nor the purity of the engine', () => {
    const program = files.filter((path) => path.startsWith('src/') || path.startsWith('server/'));
    expect(
      linesMatching(
        program,
        /eslint-disable.*(boundaries|no-restricted)|eslint-disable(-next-line|-line)?\s*(\*\/)?$/,
      ),
    ).toEqual([]);
  });
});
