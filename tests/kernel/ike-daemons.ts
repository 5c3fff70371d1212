import type { ChildProcess } from 'node:child_process';
import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Design } from '#engine/model/design.ts';
import { daemonSettings, ikeSettings } from './ike-settings.ts';
import { ikeControl, ikeDaemon } from './kernel-lack.ts';
import { makeFolder, netnsOf } from './namespaces.ts';
import { runScript } from './run-script.ts';

/** The IKE daemons of a design that is raised. */
export interface IkeDaemons {
  /** Associations that a gateway has an ESP association for, just now. */
  readonly upAt: (device: string) => Promise<ReadonlySet<string>>;
  /** Asks a gateway to renew the child keys of these associations; true for those that then have new ones. */
  readonly renewAt: (
    device: string,
    associations: readonly string[],
  ) => Promise<ReadonlyMap<string, boolean>>;
  readonly end: () => Promise<void>;
}

const startingMs = 20_000;
// One exchange of two packets on one machine; a refusal takes as long.
const renewingMs = 3_000;
const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

const ended = (child: ChildProcess): Promise<void> =>
  new Promise((resolve) => {
    if (child.exitCode !== null || child.signalCode !== null) resolve();
    else child.once('exit', () => resolve());
  });

/** Starts a daemon in the namespace of every gateway that has an association, and gives each its settings. */
export const startIkeDaemons = async (design: Design): Promise<IkeDaemons> => {
  const folder = await makeFolder();
  const devices = [
    ...new Set(Object.values(design.associations).flatMap(({ a, b }) => [a.device, b.device])),
  ].sort();
  const at = (device: string, ending: string): string => join(folder, `${device}.${ending}`);
  const children: ChildProcess[] = [];
  const end = async (): Promise<void> => {
    for (const child of children) child.kill('SIGKILL');
    await Promise.all(children.map(ended));
    await rm(folder, { recursive: true, force: true });
  };
  try {
    for (const device of devices) {
      await writeFile(at(device, 'daemon'), daemonSettings(at(device, 'socket')));
      await writeFile(at(device, 'answering'), ikeSettings(design, device, false));
      await writeFile(at(device, 'settings'), ikeSettings(design, device, true));
      // Should this process be killed, its daemons go with it.
      const inNamespace = ['netns', 'exec', netnsOf(device), 'setpriv', '--pdeathsig', 'KILL', ikeDaemon];
      children.push(
        spawn('ip', inNamespace, {
          stdio: 'ignore',
          env: { ...process.env, STRONGSWAN_CONF: at(device, 'daemon') },
        }),
      );
    }
    for (const startedAt = Date.now(); ; await pause(100)) {
      const silent = devices.filter((device) => !existsSync(at(device, 'socket')));
      if (silent.length === 0) break;
      if (Date.now() - startedAt > startingMs)
        throw new Error(`no IKE daemon came up on ${silent.join(', ')}`);
    }
    // Everybody can answer before anybody starts: a daemon that is refused once does not try again.
    const load = (ending: string): string =>
      devices
        .map(
          (device) =>
            `${ikeControl} --load-all --noprompt --uri unix://${at(device, 'socket')} --file ${at(device, ending)}`,
        )
        .join('\n');
    await runScript(load('answering'));
    await runScript(load('settings'));
  } catch (error) {
    await end();
    throw error;
  }
  const control = (device: string, words: string): Promise<string> =>
    runScript(`${ikeControl} ${words} --uri unix://${at(device, 'socket')}`);
  /** The daemon's own number of the youngest ESP association of each name. */
  const installed = async (device: string): Promise<ReadonlyMap<string, number>> => {
    const shown = await control(device, '--list-sas');
    const numbers = new Map<string, number>();
    for (const [, name, number] of shown.matchAll(/^\s+(\S+): #(\d+), reqid \d+, INSTALLED/gm))
      numbers.set(name!, Math.max(Number(number), numbers.get(name!) ?? 0));
    return numbers;
  };
  return {
    upAt: async (device) => new Set((await installed(device)).keys()),
    renewAt: async (device, associations) => {
      const before = await installed(device);
      for (const name of associations) await control(device, `--rekey --child ${name}`);
      await pause(renewingMs);
      const after = await installed(device);
      return new Map(associations.map((name) => [name, (after.get(name) ?? 0) > before.get(name)!]));
    },
    end,
  };
};
