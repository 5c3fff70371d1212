import type { BpduListener } from '../flood/spanning-tree.ts';
import { bpduReach } from '../flood/spanning-tree.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { joinPatches, patchAt } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule, type Fault } from './define-rule.ts';
import type { PropertyRef } from './finding.ts';
import { siteNameOf } from './places.ts';
import { portRef } from './port-label.ts';
import { devicePortOf, hearings, type Hears } from './tree-ports.ts';
import { countWord, namedOrCounted, sentenceCase } from './wording.ts';

/** Bridges of several sites that hear one another through tunnels, and so elect one root. */
interface Merged {
  readonly bridges: readonly BpduListener[];
  readonly overlay: readonly Hears[];
  readonly tunnels: readonly Id[];
  readonly root: BpduListener;
  /** True where the tree blocks a loop that runs through a tunnel: it is needed there. */
  readonly breaksLoop: boolean;
}

/** The numbers of the bridges by tree: those that hear one another. */
const treeNumbers = (count: number, all: readonly Hears[]): readonly number[] => {
  const number = Array.from({ length: count }, (_, i) => i);
  const rootOf = (i: number): number => (number[i] === i ? i : (number[i] = rootOf(number[i]!)));
  for (const { at, from } of all) {
    const [a, b] = [rootOf(at.bridge), rootOf(from.bridge)];
    number[Math.max(a, b)] = Math.min(a, b);
  }
  return number.map((_own, i) => rootOf(i));
};

const mergedTrees = (network: Network): readonly Merged[] => {
  const { design } = network;
  const listeners = bpduReach(network);
  const isGuarded = (port: Hears['at']): boolean =>
    devicePortOf(network, port)?.facts.bpdus?.endsWith('guard') === true;
  const all = hearings(listeners).filter(({ at, from }) => !isGuarded(at) && !isGuarded(from));
  const numbers = treeNumbers(listeners.length, all);
  const siteOf = (bridge: number): Id => entryOf(design.devices, listeners[bridge]!.place.device).site;
  return [...new Set(numbers)].flatMap((tree): readonly Merged[] => {
    const overlay = all.filter(
      ({ at, from, tunnels }) =>
        numbers[at.bridge] === tree && tunnels.length > 0 && siteOf(at.bridge) !== siteOf(from.bridge),
    );
    const bridges = listeners.filter((_one, i) => numbers[i] === tree);
    const root = bridges.find(({ isRoot }) => isRoot);
    const tunnels = [...new Set(overlay.flatMap((one) => one.tunnels))].sort();
    const isMeant = tunnels.some((id) =>
      tunnelSegments(network)
        .get(id)
        ?.some((segment) => entryOf(design.segments, segment).protocols?.includes('spanning-tree')),
    );
    if (overlay.length === 0 || root === undefined || isMeant) return [];
    const sum = (of: 'blockedPorts' | 'blockedPortsApart'): number =>
      bridges.reduce((total, bridge) => total + bridge[of], 0);
    return [{ bridges, overlay, tunnels, root, breaksLoop: sum('blockedPorts') > sum('blockedPortsApart') }];
  });
};

const priorityProperty = ({ design }: Network, { place }: BpduListener): PropertyRef => {
  const isOwn = place.kind === 'forwarder' && entryOf(design.forwarders, place.forwarder).spanningTree;
  return isOwn
    ? { ref: { collection: 'forwarders', id: place.forwarder }, path: ['spanningTree', 'priority'] }
    : { ref: { collection: 'devices', id: place.device }, path: ['settings', 'spanningTree', 'priority'] };
};

/** Where a tree could end: the ports of switches, and the bridges of gateways, that hear a far site. */
const edgesOf = (network: Network, { overlay }: Merged) => {
  const listeners = bpduReach(network);
  const forwarders = new Set<Id>();
  const ports = new Map<string, { readonly device: Id; readonly port: Id }>();
  for (const { at } of overlay) {
    const { place } = listeners[at.bridge]!;
    if (place.kind === 'forwarder') forwarders.add(place.forwarder);
    else {
      const { device, port } = devicePortOf(network, at)!;
      ports.set(`${device} ${port}`, { device, port });
    }
  }
  return { forwarders: [...forwarders].sort(), ports: [...ports.values()] };
};

const messages = {
  merged: {
    words: 'trees merged',
    sentence: (v: { readonly sites: string; readonly root: string }) =>
      `Spanning tree is one over ${v.sites}, with ${v.root} as its root`,
  },
  rootOpen: {
    words: 'root by chance',
    sentence: (v: { readonly count: number; readonly priority: number; readonly sites: string }) =>
      `${sentenceCase(countWord(v.count))} bridges share the best priority, ${v.priority}, of the tree over ${v.sites}`,
    why: 'The tree that breaks the loop through the overlay takes the bridge with the lowest MAC address as its root where priorities tie. Which way is blocked, the cable or the tunnel, is then an accident, and another one after the next replacement of a switch.',
    seen: 'Traffic between the sites takes the slower of two ways, or turns to it when a switch is added or replaced.',
  },
};

export const spanningTreesMerged = defineRule({
  id: 'spanning-trees-merged',
  title: 'Spanning tree ends at the overlay, or has a chosen root where it breaks a loop through it',
  severity: 'degrading',
  looksAt: segmentPathFacts,
  why: 'Where BPDUs cross the overlay, the trees of the sites become one: one root for all, every change anywhere empties the tables everywhere, and a tunnel that stalls for some seconds has all sites elect anew.',
  seen: 'The root moves to another site; floods of unknown unicast over the WAN after a port at a far site changed; short losses at all sites when a tunnel does.',
  sources: [{ document: 'RFC 4665', clause: 'section 6.8' }, 'common practice, no source'],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    return mergedTrees(network).flatMap((tree): readonly Fault<typeof messages>[] => {
      const { bridges, tunnels, root, breaksLoop } = tree;
      const { place } = root;
      const devices = [...new Set(bridges.map((bridge) => bridge.place.device))].sort();
      const sites = [...new Set(devices.map((id) => siteNameOf(design, id)))];
      const first = bridges[0]!.place;
      const body = {
        elements: [
          { collection: 'devices', id: place.device },
          ...devices
            .filter((id) => id !== place.device)
            .map((id): ElementRef => ({ collection: 'devices', id })),
          ...tunnels.map((id): ElementRef => ({ collection: 'tunnels', id })),
        ] as const,
        identity: [first.device, ...(first.kind === 'forwarder' ? [first.forwarder] : [])],
      };
      const rivals = bridges.filter(({ priority }) => priority === root.priority);
      if (!breaksLoop) {
        const edges = edgesOf(network, tree);
        return [
          {
            message: 'merged',
            values: {
              sites: namedOrCounted(sites, 'sites'),
              root: `${entryOf(design.devices, place.device).name} at ${siteNameOf(design, place.device)}`,
            },
            ...body,
            properties: [
              ...edges.ports.map(({ device, port }) => ({ ref: portRef(device, port), path: ['bpdus'] })),
              ...edges.forwarders.map((id) => ({
                ref: { collection: 'forwarders' as const, id },
                path: ['spanningTree', 'mode'],
              })),
            ],
            basis: [...devices, place.device],
          },
        ];
      }
      if (rivals.length === 1) return [];
      return [
        {
          message: 'rootOpen',
          values: {
            count: rivals.length,
            priority: root.priority,
            sites: namedOrCounted(sites, 'sites'),
          },
          ...body,
          properties: rivals.map((bridge) => priorityProperty(network, bridge)),
          basis: [root.priority, ...rivals.map((bridge) => bridge.place.device)],
          severity: 'advisory',
          severityReason:
            'The loop is broken whichever root is elected; only the way that stays open is not chosen.',
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const { design } = network;
    const tree = mergedTrees(network).find(
      ({ bridges }) =>
        bridges[0]!.place.device === fault.identity?.[0] &&
        (bridges[0]!.place.kind !== 'forwarder' || bridges[0]!.place.forwarder === fault.identity[1]),
    );
    if (tree === undefined) return [];
    if (fault.message === 'rootOpen') {
      // IEEE 802.1Q-2022 section 13.26.3, from memory: priorities go in steps of 4096.
      const priority = tree.root.priority - 4096;
      if (priority < 0) return [];
      const { ref, path } = priorityProperty(network, tree.root);
      const { name } = entryOf(design.devices, tree.root.place.device);
      return [
        {
          id: 'choose-root',
          label: `Make ${name} the root`,
          sentence: `Gives ${name} priority ${priority}, better than every other bridge of the tree.`,
          patch: patchAt([ref.collection, ref.id, ...path], priority),
        },
      ];
    }
    const { ports, forwarders } = edgesOf(network, tree);
    const filtered = (device: Id, port: Id): MergePatch => ({
      devices: { [device]: { ports: { [port]: { bpdus: 'filter' } } } },
    });
    const left = forwarders.flatMap((id): readonly MergePatch[] => {
      const { device, circuits } = entryOf(design.forwarders, id);
      const { profile } = entryOf(design.devices, device);
      const passes =
        profile !== undefined && entryOf(design.profiles, profile).reservedGroups?.['00'] === 'pass';
      return [
        { forwarders: { [id]: { spanningTree: { mode: 'off' } } } },
        // Out of the tree it would pass on what it hears.
        ...Object.values(circuits).flatMap((circuit) =>
          passes && circuit.kind === 'port' ? [filtered(device, circuit.port)] : [],
        ),
      ];
    });
    return [
      {
        id: 'end-at-overlay',
        label: 'End the tree at the overlay',
        sentence:
          forwarders.length === 0
            ? 'Filters BPDUs at the ports that face the overlay, so that each site has a tree and a root of its own.'
            : 'Takes the gateways’ bridges out of spanning tree, so that each site has a tree and a root of its own.',
        patch: joinPatches(design, [...ports.map(({ device, port }) => filtered(device, port)), ...left]),
      },
    ];
  },
});
