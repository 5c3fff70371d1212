import { importTypeScript } from './import-typescript.mjs';
import { SetupProblem } from './setup-problem.mjs';

/**
 * Checks the environment as the server will, before anything slow begins.
 * @param {NodeJS.ProcessEnv} environment
 * @returns {Promise<import('../config.ts').Config & { localUrl: string }>}
 */
export async function checkedConfiguration(environment) {
  /** @type {typeof import('../config.ts')} */
  const { readConfig, localUrl } = await importTypeScript('server/config.ts');
  const result = readConfig(environment);
  if (!result.ok) throw new SetupProblem(result.problems.join('\n'));
  return { ...result.config, localUrl: localUrl(result.config.host, result.config.port) };
}
