const leastRuns = 5;
const mostRuns = 25;
const enoughMs = 1_500;

/** In time of the processor, all threads of this process together: what else the machine does counts little. */
export interface Times {
  readonly medianMs: number;
  /** What a machine with nothing else to do comes near to. */
  readonly leastMs: number;
}

const cpuMs = (): number => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1_000;
};

/** What a piece of work costs. What it works on is made afresh before each run, by its number, and does not count. */
export const timesOf = <T>(prepare: (run: number) => T, work: (input: T) => unknown): Times => {
  const times: number[] = [];
  const startedAt = performance.now();
  // The first run finds the code uncompiled.
  for (let run = -1; run < mostRuns; run += 1) {
    if (run >= leastRuns && performance.now() - startedAt > enoughMs) break;
    const input = prepare(run);
    const before = cpuMs();
    work(input);
    const took = cpuMs() - before;
    if (run >= 0) times.push(took);
  }
  times.sort((a, b) => a - b);
  return { medianMs: times[Math.floor(times.length / 2)]!, leastMs: times[0]! };
};

/** Bytes on the heap that something keeps alive. Needs --expose-gc. */
export const heldBytes = (make: () => unknown): number => {
  const collect = globalThis.gc;
  if (collect === undefined) throw new Error('start with --expose-gc, or memory cannot be measured');
  collect();
  const before = process.memoryUsage().heapUsed;
  const held = make();
  collect();
  const after = process.memoryUsage().heapUsed;
  return held === undefined ? 0 : after - before;
};
