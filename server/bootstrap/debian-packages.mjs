import { existsSync, mkdirSync, symlinkSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { setupLog } from './folders.mjs';
import { lastLines, runCommand } from './run-command.mjs';
import { SetupProblem } from './setup-problem.mjs';

/**
 * @typedef {{ name: string, purpose: string, alternative: string, beforeInstall: () => void }} DebianPackage
 */

/** Debian's package for PostgreSQL, without the cluster that it would otherwise start by itself. */
export const postgresPackage = {
  name: 'postgresql',
  purpose: 'PostgreSQL',
  alternative: ', or set DATABASE_URL (for tests TEST_DATABASE_URL) to a PostgreSQL server that you have',
  beforeInstall() {
    const settings = '/etc/postgresql-common/createcluster.conf';
    if (existsSync(settings)) return;
    mkdirSync(dirname(settings), { recursive: true });
    writeFileSync(settings, 'create_main_cluster = false\n');
  },
};

/** What raises network namespaces and looks into them. */
export const namespacePackages = {
  name: 'iproute2 python3',
  purpose: 'what the comparison with the kernel needs',
  alternative: '',
  beforeInstall() {},
};

/** An IKE daemon that carries ESP by itself, kept from being started for this machine: the tests start their own. */
export const ipsecPackages = {
  name: 'charon-systemd strongswan-swanctl libcharon-extra-plugins libstrongswan-standard-plugins libstrongswan-extra-plugins',
  purpose: 'IPsec in user space',
  alternative: '',
  beforeInstall() {
    const unit = '/etc/systemd/system/strongswan.service';
    if (existsSync('/run/systemd/system') && !existsSync(unit)) symlinkSync('/dev/null', unit);
  },
};

export const chromiumPackage = { name: 'chromium', purpose: 'Chromium', alternative: '', beforeInstall() {} };

/**
 * Installs one of Debian's packages; anyone but root is told what to run instead.
 * @param {DebianPackage} wanted
 * @param {{ say: (line: string) => void, signal?: AbortSignal, isRoot?: boolean, hasApt?: boolean }} options
 */
export async function installDebianPackage(
  wanted,
  { say, signal, isRoot = process.getuid?.() === 0, hasApt = existsSync('/usr/bin/apt-get') },
) {
  const install = `apt-get install -y --no-install-recommends ${wanted.name}`;
  if (!hasApt) {
    throw new SetupProblem(
      `${wanted.purpose} is not installed and this system has no apt-get; install ${wanted.purpose}${wanted.alternative}, and start again.`,
    );
  }
  if (!isRoot) {
    throw new SetupProblem(
      `${wanted.purpose} is not installed; run 'sudo ${install}'${wanted.alternative}, and start again.`,
    );
  }
  say(`Installing ${wanted.purpose} (${install})`);
  wanted.beforeInstall();
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const waitForOthers = ['-o', 'DPkg::Lock::Timeout=300'];
  // An installation that was cut off earlier has to be finished before another can begin.
  await runCommand('dpkg', ['--configure', '-a'], { env, logFile: setupLog, signal });
  await runCommand('apt-get', [...waitForOthers, 'update'], { env, logFile: setupLog, signal });
  const result = await runCommand('apt-get', [...waitForOthers, ...install.split(' ').slice(1)], {
    env,
    logFile: setupLog,
    signal,
  });
  if (!result.ok) {
    throw new SetupProblem(
      `'${install}' failed; see '${setupLog}', put it right and start again. It ended with:\n${lastLines(result.output)}`,
    );
  }
}
