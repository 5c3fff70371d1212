import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { createInterface } from 'node:readline';

export interface NetworkInterface {
  readonly netns: string;
  readonly interface: string;
}

export interface Exchange {
  readonly frames: readonly { readonly from: string; readonly hex: string }[];
  /** Frames that are expected at a socket: they are waited for, with patience, on a machine that is busy. */
  readonly atLeast?: Readonly<Record<string, number>>;
  /** The exchange is over when nothing came for so long. */
  readonly quietMs?: number;
  /** When frames come beyond either of these everything is cut: it is a storm. */
  readonly atMostMs?: number;
  readonly atMostFrames?: number;
}

export interface Captured {
  /** True where a limit was reached and the interfaces were taken down. */
  readonly cut: boolean;
  /** By socket: each different frame in hex, and how often it came. */
  readonly captured: { readonly [socket: string]: readonly (readonly [hex: string, count: number])[] };
}

export interface Probe {
  readonly exchange: (exchange: Exchange) => Promise<Captured>;
  readonly end: () => Promise<void>;
}

const patienceMs = 5_000;

/** Starts the process that sends and captures frames, with a raw socket on each interface. */
export const startProbe = async (
  sockets: Readonly<Record<string, NetworkInterface>>,
  cut: readonly { readonly netns: string; readonly interfaces: readonly string[] }[],
): Promise<Probe> => {
  const child = spawn('python3', ['-u', join(import.meta.dirname, 'probe.py')], {
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  const ended = new Promise<void>((resolve) => child.once('close', () => resolve()));
  const lines = createInterface({ input: child.stdout })[Symbol.asyncIterator]();
  const ask = async (command: object): Promise<unknown> => {
    child.stdin.write(`${JSON.stringify(command)}\n`);
    const line = await lines.next();
    if (line.done === true) throw new Error('the probe ended before it answered');
    const answer = JSON.parse(line.value) as { problem?: string };
    if (answer.problem !== undefined) throw new Error(`the probe could not: ${answer.problem}`);
    return answer;
  };
  const end = (): Promise<void> => {
    child.stdin.end();
    return ended;
  };
  try {
    await ask({ do: 'open', sockets, cut });
  } catch (error) {
    await end();
    throw error;
  }
  return {
    exchange: ({ frames, atLeast = {}, quietMs = 250, atMostMs = 2_000, atMostFrames = 5_000 }) => {
      const hasToWait = Object.keys(atLeast).length > 0;
      const limits = {
        patienceMs,
        quietMs,
        atMostMs: hasToWait ? atMostMs + patienceMs : atMostMs,
        atMostFrames,
      };
      return ask({ do: 'exchange', frames, atLeast, ...limits }) as Promise<Captured>;
    },
    end,
  };
};
