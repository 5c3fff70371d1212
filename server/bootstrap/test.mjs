// `npm test`, all of it or the steps named after `--`.
import { readFileSync } from 'node:fs';
import { nodeVersionProblem } from './node-version.mjs';

const { engines } = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8'));
const problem = nodeVersionProblem(process.versions.node, engines.node);

if (problem !== null) {
  console.error(problem);
  process.exitCode = 1;
} else {
  // Loaded only now: an old Node version could not read these.
  void Promise.all([import('./command-line.mjs'), import('./run-tests.mjs')]).then(
    ([{ runCommandLine }, { runTests }]) =>
      runCommandLine((lifetime) => runTests(lifetime, process.argv.slice(2)), {
        whenInterrupted: 'Interrupted.',
      }),
  );
}
