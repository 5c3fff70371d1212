import type { Design } from '#engine/model/design.ts';
import { elementIndex, reach } from '#engine/flood/reach.ts';
import { expectedForwarding } from '#engine/flood/expected-forwarding.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { frameOf, isMarked, macOf, senderOf } from './frames.ts';
import type { Lab } from './lab.ts';

/** Copies of a host's broadcast, by 'sender > receiver'. */
export type Copies = Readonly<Record<string, number | 'endless'>>;

const hostsOf = (design: Design): readonly string[] =>
  Object.keys(design.devices)
    .filter((id) => design.devices[id]!.kind === 'host')
    .sort();

const inOrder = (copies: Record<string, number | 'endless'>): Copies =>
  Object.fromEntries(Object.entries(copies).sort(([a], [b]) => (a < b ? -1 : 1)));

/** Who gets how many copies of whose broadcast, as the engine says. */
export const predictedCopies = (design: Design, withoutTunnels: readonly string[] = []): Copies => {
  const network = indexNetwork(design);
  const without = new Set(withoutTunnels.map((id) => elementIndex(network, { collection: 'tunnels', id })!));
  return inOrder(
    Object.fromEntries(
      hostsOf(design).flatMap((host) =>
        reach(network, { host }, { frame: 'other', without }).deliveries.map((delivery) => [
          `${host} > ${delivery.host}`,
          delivery.copies,
        ]),
      ),
    ),
  );
};

/** The same as the kernel does it: every host sends one broadcast, and what arrives is counted. */
export const measuredCopies = async (design: Design, lab: Lab): Promise<Copies> => {
  const hosts = hostsOf(design);
  const frames = hosts.map((from, index) => ({ from, hex: frameOf({ from: index }) }));
  const { cut, captured } = await lab.probe.exchange({ frames });
  if (cut) throw new Error('a storm broke out where copies should have come to an end');
  const copies: Record<string, number> = {};
  for (const host of hosts)
    for (const [hex, count] of captured[host]!) {
      if (!isMarked(hex)) continue;
      const key = `${hosts[senderOf(hex)]} > ${host}`;
      copies[key] = (copies[key] ?? 0) + count;
    }
  return inOrder(copies);
};

/** How many frames a single broadcast may become before its storm is cut. */
const enoughForAStorm = 400;

/** One broadcast of one host, cut short when it goes on: how many copies each host had by then. */
export const oneBroadcast = async (
  lab: Lab,
  host: string,
): Promise<{ readonly storm: boolean; readonly copies: ReadonlyMap<string, number> }> => {
  const { cut, captured } = await lab.probe.exchange({
    frames: [{ from: host, hex: frameOf({ from: 0 }) }],
    atMostFrames: enoughForAStorm,
  });
  const copies = new Map<string, number>();
  for (const name of Object.keys(lab.plan.hosts))
    for (const [hex, count] of captured[name] ?? [])
      if (isMarked(hex)) copies.set(name, (copies.get(name) ?? 0) + count);
  return { storm: cut, copies };
};

/** Circuit by host for a forwarder: the engine's table, or for hosts that move between circuits all of those. */
export const predictedTable = (design: Design, forwarder: string): ReadonlyMap<string, readonly string[]> => {
  const table = new Map<string, readonly string[]>();
  for (const { circuit, hosts } of expectedForwarding(indexNetwork(design), forwarder))
    for (const host of hosts) table.set(host, [...(table.get(host) ?? []), circuit]);
  return table;
};

/** The same as the kernel learned it, after every host has sent; bridges' own addresses are left out. */
export const measuredTable = async (
  design: Design,
  lab: Lab,
  forwarder: string,
): Promise<ReadonlyMap<string, readonly string[]>> => {
  const learned = await lab.forwardingTable(forwarder);
  return new Map(
    hostsOf(design).flatMap((host, index) => {
      const circuits = learned.get(macOf(index));
      return circuits === undefined ? [] : [[host, circuits] as const];
    }),
  );
};
