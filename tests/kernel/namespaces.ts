import { readdirSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
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

const isLeftover = (name: string): boolean => {
  const pid = Number(ours.exec(name)?.[1]);
  return pid > 0 && !isAlive(pid);
};

/** A fresh folder of this run. */
export const makeFolder = (): Promise<string> => mkdtemp(join(tmpdir(), netnsOf('')));

/** Removes the namespaces and folders of runs that ended without doing so themselves. */
export const removeLeftovers = async (): Promise<void> => {
  await remove(existing().filter(isLeftover));
  for (const name of readdirSync(tmpdir()).filter(isLeftover))
    await rm(join(tmpdir(), name), { recursive: true, force: true });
};
