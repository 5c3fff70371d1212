import { tunnelSegments } from '../flood/tunnel-segments.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { rankAtEnd } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import { accessVlan } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { entryOf, otherEnd, portKey } from '../network/network.ts';
import { segmentPathFacts, segmentsByForwarder } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import type { VlanBarrier } from './parted-segments.ts';
import { isVlanBarrier, meantVlan, partedSegments } from './parted-segments.ts';
import { portLabel, portRef } from './port-label.ts';
import { unusedId } from './unused-id.ts';
import { sentenceStart } from './sentence-start.ts';

interface Gap {
  readonly segment: Id;
  readonly barrier: VlanBarrier;
}

/** Each port once for a segment, whichever way a frame meets it first. */
const gapsOf = (network: Network): readonly Gap[] => {
  const gaps = new Map<string, Gap>();
  for (const { segment, partings } of partedSegments(network))
    for (const { barrier, further } of partings)
      for (const [i, one] of [barrier, ...further].entries()) {
        if (!isVlanBarrier(network, segment, one)) continue;
        // Untagged only because a port before it had no VLAN for the frame: no gap of its own.
        if (i > 0 && one.code === 'no-circuit' && one.vlan === 0) continue;
        const key = `${segment} ${one.device} ${one.port}`;
        if (!gaps.has(key)) gaps.set(key, { segment, barrier: one });
      }
  return [...gaps.values()];
};

const identityOf = ({ segment, barrier }: Gap): readonly string[] => [segment, barrier.device, barrier.port];

/** The host at the other end of the only cable in a port. */
const hostBehind = (
  network: Network,
  device: Id,
  port: Id,
): { readonly device: Id; readonly port: Id } | undefined => {
  const [at, ...more] = network.cablesByPort.get(portKey(device, port)) ?? [];
  const link = at === undefined || more.length > 0 ? undefined : network.design.links[at.cable];
  if (at === undefined || link?.kind !== 'cable') return undefined;
  const far = link[otherEnd(at.end)];
  return entryOf(network.design.devices, far.device).kind === 'host' ? far : undefined;
};

const onPort = (device: Id, port: Id, settings: MergePatch): MergePatch => ({
  devices: { [device]: { ports: { [port]: settings } } },
});

/** The forwarder of a gateway that serves the segment already, by a tunnel or another port; undefined unless there is exactly one. */
const servingForwarder = (network: Network, device: Id, segment: Id): Id | undefined => {
  const carried = tunnelSegments(network);
  const serving = (network.forwardersByDevice.get(device) ?? []).filter(
    (id) =>
      segmentsByForwarder(network).get(id)?.includes(segment) === true ||
      (network.circuitsByForwarder.get(id) ?? []).some(
        ({ circuit }) => circuit.kind === 'tunnel' && carried.get(circuit.tunnel)?.includes(segment) === true,
      ),
  );
  return serving.length === 1 ? serving[0] : undefined;
};

const fixOf = (network: Network, { segment, barrier }: Gap): Fix | undefined => {
  const { design } = network;
  const { device, port } = barrier;
  const entry = entryOf(design.devices, device).ports[port]!;
  const label = portLabel(design, device, port);
  const meant = meantVlan(network, segment, device);
  const host = hostBehind(network, device, port);
  if (barrier.code === 'no-circuit') {
    const forwarder = servingForwarder(network, device, segment);
    if (forwarder === undefined) return undefined;
    const { circuits, name } = entryOf(design.forwarders, forwarder);
    const circuit = {
      kind: 'port',
      rank: rankAtEnd(circuits),
      port,
      vlans: barrier.vlan === 0 ? 'untagged' : [barrier.vlan],
    };
    return {
      id: 'claim',
      label: `Take it into ${name}`,
      sentence: `Lets ${name} take ${barrier.vlan === 0 ? 'untagged frames' : `VLAN ${barrier.vlan}`} from ${label}.`,
      patch: { forwarders: { [forwarder]: { circuits: { [unusedId(circuits, `port-${port}`)]: circuit } } } },
    };
  }
  if (meant === undefined) return undefined;
  if (barrier.code === 'vlan-not-allowed') {
    const { allowedVlans } = entry;
    if (!Array.isArray(allowedVlans)) return undefined;
    return {
      id: 'allow',
      label: `Allow VLAN ${meant}`,
      sentence: `Adds VLAN ${meant} to those that ${label} lets through.`,
      patch: onPort(device, port, {
        allowedVlans: [...(allowedVlans as readonly number[]), meant].sort((a, b) => a - b),
      }),
    };
  }
  if (barrier.code === 'other-access-vlan')
    return {
      id: 'set-vlan',
      label: `Set it to VLAN ${meant}`,
      sentence: `Puts ${label} into VLAN ${meant} instead of ${barrier.has}.`,
      patch: onPort(device, port, { vlan: meant }),
    };
  if (barrier.code === 'no-native-vlan')
    return host === undefined
      ? {
          id: 'native',
          label: `Set native VLAN ${meant}`,
          sentence: `Puts untagged frames at ${label} into VLAN ${meant}.`,
          patch: onPort(device, port, { nativeVlan: meant }),
        }
      : {
          id: 'access',
          label: `Make it an access port`,
          sentence: `Makes ${label} an access port in VLAN ${meant}, as ${entryOf(design.devices, host.device).name} sends untagged frames.`,
          patch: onPort(device, port, {
            mode: 'access',
            vlan: meant,
            ...(entry.allowedVlans === undefined ? {} : { allowedVlans: null }),
          }),
        };
  if (host !== undefined) {
    const { allowedVlans, nativeVlan } = entryOf(design.devices, host.device).ports[host.port]!;
    const name = entryOf(design.devices, host.device).name;
    return {
      id: 'untag-host',
      label: `Let ${name} send untagged`,
      sentence: `Makes the port of ${name} an access port, so that it sends no tags.`,
      patch: onPort(host.device, host.port, {
        mode: 'access',
        ...(allowedVlans === undefined ? {} : { allowedVlans: null }),
        ...(nativeVlan === undefined ? {} : { nativeVlan: null }),
      }),
    };
  }
  const own = accessVlan(entry);
  return own === meant
    ? undefined
    : {
        id: 'trunk',
        label: 'Make it a trunk',
        sentence: `Makes ${label} a trunk that lets VLAN ${meant} through and keeps VLAN ${own} for untagged frames.`,
        patch: onPort(device, port, {
          mode: 'trunk',
          nativeVlan: own,
          allowedVlans: [meant],
          ...(entry.vlan === undefined ? {} : { vlan: null }),
        }),
      };
};

const fieldOf = (code: VlanBarrier['code']): readonly string[] =>
  ({
    'vlan-not-allowed': ['allowedVlans'],
    'other-access-vlan': ['vlan'],
    'no-native-vlan': ['nativeVlan'],
    'tag-at-access-port': ['mode'],
    'no-circuit': [],
  })[code];

interface Values {
  readonly vlan: number;
  readonly has: number;
  readonly segment: string;
  readonly port: string;
}

export const vlanMissingOnPath = defineRule({
  id: 'vlan-missing-on-path',
  title: 'Every port between a segment’s hosts lets its VLAN through',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'A single port that leaves the VLAN out cuts everything behind it off from the rest of the segment.',
  seen: 'Links are up on both sides, yet no address of the far hosts is learned beyond this port; hosts on the same switch still reach each other.',
  sources: ['common practice, no source'],
  messages: {
    'vlan-not-allowed': {
      words: 'VLAN missing',
      sentence: (v: Values) => `VLAN ${v.vlan} of segment ${v.segment} is not allowed at ${v.port}`,
    },
    'other-access-vlan': {
      words: 'wrong VLAN',
      sentence: (v: Values) =>
        sentenceStart(`${v.port} is in VLAN ${v.has}, where segment ${v.segment} has VLAN ${v.vlan}`),
    },
    'no-native-vlan': {
      words: 'no native VLAN',
      sentence: (v: Values) => sentenceStart(`${v.port} drops the untagged frames of segment ${v.segment}`),
    },
    'tag-at-access-port': {
      words: 'tags not taken',
      sentence: (v: Values) =>
        sentenceStart(`${v.port} takes no tags; segment ${v.segment} comes with ${v.vlan}`),
    },
    'no-circuit': {
      words: 'VLAN unclaimed',
      sentence: (v: Values) =>
        `No forwarder takes ${v.vlan === 0 ? 'untagged frames' : `VLAN ${v.vlan}`} of segment ${v.segment} at ${v.port}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return gapsOf(network).map((gap) => {
      const { segment, barrier } = gap;
      const { device, port, code } = barrier;
      const ref = portRef(device, port);
      const field = fieldOf(code);
      const vlan = 'vlan' in barrier ? barrier.vlan : (meantVlan(network, segment, device) ?? 0);
      const has = barrier.code === 'other-access-vlan' ? barrier.has : 0;
      return {
        message: code,
        values: {
          vlan,
          has,
          segment: entryOf(design.segments, segment).letter,
          port: portLabel(design, device, port),
        },
        elements: [ref, { collection: 'segments' as const, id: segment }],
        identity: identityOf(gap),
        basis: [code, vlan, has],
        properties: field.length === 0 ? [] : [{ ref, path: field }],
      };
    });
  },
  fixes: (fault, network) => {
    const gap = gapsOf(network).find((other) => identityOf(other).join(' ') === fault.identity?.join(' '));
    const fix = gap === undefined ? undefined : fixOf(network, gap);
    return fix === undefined ? [] : [fix];
  },
});
