import { readdirSync } from 'node:fs';
import { runScript } from './run-script.ts';

const folder = '/run/netns';
// The process that made a namespace stands in its name, so that what a killed run left behind can be told from what is in use.
const ours = /^longpatch-(\d+)-/;

const existing = (): readonly string[] => {
  try {
    return readdirSync(folder);
  } catch {
    return [];
  }
};

const isAlive = (pid: number): boolean => {
  try {
    process.kill(pid, 0);
    return true;
  } catch {
    return false;
  }
};

/** The namespace that stands for something of this run. */
export const netnsOf = (name: string): string => `longpatch-${process.pid}-${name}`;

const remove = async (names: readonly string[]): Promise<void> => {
  if (names.length > 0) await runScript(names.map((name) => `ip netns del ${name}`).join('\n'));
};

/** Removes every namespace that this process made. */
export const removeOwnNamespaces = (): Promise<void> =>
  remove(existing().filter((name) => Number(ours.exec(name)?.[1]) === process.pid));

/** Removes the namespaces of runs that ended without doing so themselves. */
export const removeLeftovers = (): Promise<void> =>
  remove(
    existing().filter((name) => {
      const pid = Number(ours.exec(name)?.[1]);
      return pid > 0 && !isAlive(pid);
    }),
  );
