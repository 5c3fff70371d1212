import type { Design } from '#engine/model/design.ts';
import { bridgeOfForwarder } from './lanes.ts';
import { netnsOf, removeLeftovers, removeOwnNamespaces } from './namespaces.ts';
import type { Probe } from './probe.ts';
import { startProbe } from './probe.ts';
import type { RaisePlan } from './raise-plan.ts';
import { planToRaise } from './raise-plan.ts';
import { runScript } from './run-script.ts';

/** A design, raised in this machine's kernel. */
export interface Lab {
  readonly plan: RaisePlan;
  readonly probe: Probe;
  /** Takes a tunnel out of service at both ends. */
  readonly failTunnel: (id: string) => Promise<void>;
  /** What a forwarder has learned: by MAC address the circuits that its interface stands for. */
  readonly forwardingTable: (forwarder: string) => Promise<ReadonlyMap<string, readonly string[]>>;
  readonly remove: () => Promise<void>;
}

const settlingMs = 20_000;
const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

/** Waits until every port of every bridge has decided whether it forwards. */
const settle = async (plan: RaisePlan): Promise<void> => {
  const script = plan.bridging.map((netns) => `bridge -n ${netns} link`).join('\n');
  for (const startedAt = Date.now(); ; await pause(100)) {
    const ports = (await runScript(script)).split('\n').filter((line) => line.includes(' state '));
    const open = ports.filter((line) => !/ state (forwarding|blocking) /.test(line));
    if (open.length === 0) return;
    if (Date.now() - startedAt > settlingMs) throw new Error(`ports that never settled:\n${open.join('\n')}`);
  }
};

/** Raises a design; what was made is removed again where that fails. */
export const raiseLab = async (design: Design): Promise<Lab> => {
  await removeLeftovers();
  const plan = planToRaise(design);
  try {
    await runScript(plan.script);
    await settle(plan);
    const underlay = Object.fromEntries(
      Object.entries(plan.underlay).map(([id, at]) => [`underlay ${id}`, at]),
    );
    const probe = await startProbe({ ...plan.hosts, ...underlay }, plan.cut);
    return {
      plan,
      probe,
      failTunnel: async (id) => {
        await runScript(
          plan.tunnels[id]!.map((at) => `ip -n ${at.netns} link set ${at.interface} down`).join('\n'),
        );
      },
      forwardingTable: async (forwarder) => {
        const netns = netnsOf(design.forwarders[forwarder]!.device);
        const shown = await runScript(
          `bridge -n ${netns} -j fdb show br ${bridgeOfForwarder(design, forwarder)} dynamic`,
        );
        const entries = JSON.parse(shown || '[]') as readonly {
          mac: string;
          ifname: string;
          master?: string;
        }[];
        return new Map(
          entries
            .filter((entry) => entry.master !== undefined)
            .map((entry) => [entry.mac, plan.circuits[forwarder]![entry.ifname] ?? []]),
        );
      },
      remove: async () => {
        await probe.end();
        await removeOwnNamespaces();
      },
    };
  } catch (error) {
    await removeOwnNamespaces();
    throw error;
  }
};

/** Raises a design for as long as something is done with it. */
export const withLab = async <T>(design: Design, visit: (lab: Lab) => Promise<T>): Promise<T> => {
  const lab = await raiseLab(design);
  try {
    return await visit(lab);
  } finally {
    await lab.remove();
  }
};
