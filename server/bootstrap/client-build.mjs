import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { projectFolder, setupLog } from './folders.mjs';
import { lastLines, runCommand } from './run-command.mjs';
import { SetupProblem } from './setup-problem.mjs';

/** What the built client depends on, relative to the checkout. */
const sources = [
  'src',
  'public',
  'index.html',
  'vite.config.ts',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
];

/**
 * Builds the client into `dist/` when its sources differ from those it was built from.
 * @param {{ say: (line: string) => void, signal?: AbortSignal }} options
 * @returns {Promise<boolean>} whether it was built
 */
export async function ensureClientBuild({ say, signal }) {
  const output = join(projectFolder, 'dist');
  const stampFile = join(output, '.built-from');
  const hash = hashOfFiles(projectFolder, sources);
  const isBuilt = existsSync(join(output, 'index.html')) && existsSync(stampFile);
  if (isBuilt && readFileSync(stampFile, 'utf8') === hash) return false;
  say('Building the client');
  rmSync(stampFile, { force: true });
  const vite = join(projectFolder, 'node_modules', 'vite', 'bin', 'vite.js');
  const result = await runCommand(process.execPath, [vite, 'build', '--logLevel=warn'], {
    cwd: projectFolder,
    env: { ...process.env, NODE_ENV: 'production' },
    logFile: setupLog,
    signal,
    endsWithUs: true,
  });
  if (!result.ok) {
    throw new SetupProblem(
      `The client cannot be built; put this right and start again:\n${lastLines(result.output, 30)}`,
    );
  }
  writeFileSync(stampFile, hash);
  return true;
}

/**
 * One hash over the names and contents of files and of all that folders hold. What does not exist counts as absent.
 * @param {string} root
 * @param {readonly string[]} paths relative to root
 * @returns {string}
 */
export function hashOfFiles(root, paths) {
  const hash = createHash('sha256');
  for (const path of paths.flatMap((each) => filesUnder(root, each))) {
    const content = readFileSync(join(root, path));
    hash.update(`${path}\n${content.length}\n`).update(content);
  }
  return hash.digest('hex');
}

/**
 * @param {string} root
 * @param {string} path
 * @returns {string[]}
 */
function filesUnder(root, path) {
  const stats = statSync(join(root, path), { throwIfNoEntry: false });
  if (stats === undefined) return [];
  if (!stats.isDirectory()) return [path];
  return readdirSync(join(root, path))
    .sort()
    .flatMap((name) => filesUnder(root, `${path}/${name}`));
}
