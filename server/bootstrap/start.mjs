// `npm start` and, with --dev, `npm run dev`.
import { readFileSync } from 'node:fs';
import { nodeVersionProblem } from './node-version.mjs';

const { engines } = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8'));
const unknown = process.argv.slice(2).filter((argument) => argument !== '--dev');
const problem =
  nodeVersionProblem(process.versions.node, engines.node) ??
  (unknown.length > 0
    ? `'${unknown[0]}' is not an option of npm start; it is set up by the variables PORT, HOST, DATABASE_URL, SESSION_SECRET, SESSION_SECRET_BEFORE, SMTP_URL, MAIL_FROM and PUBLIC_URL.`
    : null);

if (problem !== null) {
  console.error(problem);
  process.exitCode = 1;
} else {
  // Loaded only now: an old Node version could not read these.
  void Promise.all([import('./command-line.mjs'), import('./start-application.mjs')]).then(
    ([{ runCommandLine }, { startApplication }]) =>
      runCommandLine((lifetime) =>
        startApplication(lifetime, { isDevelopment: process.argv.includes('--dev') }),
      ),
  );
}
