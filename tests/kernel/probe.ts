import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { createInterface } from 'node:readline';

export interface NetworkInterface {
  readonly netns: string;
  readonly interface: string;
}

export interface Exchange {
  readonly frames: readonly { readonly from: string; readonly hex: string }[];
  /** The exchange is over when nothing came for so long. */
  readonly quietMs?: number;
  /** Beyond either of these everything is cut: it is a storm. */
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
    exchange: ({ frames, quietMs = 250, atMostMs = 2_000, atMostFrames = 5_000 }) =>
      ask({ do: 'exchange', frames, quietMs, atMostMs, atMostFrames }) as Promise<Captured>,
    end,
  };
};
