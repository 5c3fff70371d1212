import type { Barrier } from '../flood/barrier.ts';
import type { Parting, SegmentReach } from '../flood/segment-reach.ts';
import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankAtEnd, rankBetween } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { ends, entryOf, otherEnd } from '../network/network.ts';
import { segmentPathFacts, segmentsByForwarder } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { endingWords, shutPlugs } from './ending-words.ts';
import type { Fix } from './finding.ts';
import { isVlanBarrier, isolatesTunnels, partedSegments } from './parted-segments.ts';
import { portLabel, portRef } from './port-label.ts';
import { unusedId } from './unused-id.ts';
import { sentenceStart } from './sentence-start.ts';
import { countWord, listed } from './wording.ts';

/** Partings of one segment that one thing causes. */
interface Cause {
  readonly reach: SegmentReach;
  readonly barrier: Barrier;
  readonly partings: readonly Parting[];
}

/** Whether another check blocks for this very reason. */
const isToldElsewhere = (network: Network, segment: Id, barrier: Barrier): boolean => {
  const { design } = network;
  switch (barrier.code) {
    case 'tunnel-down':
      return barrier.reasons.some(({ code }) => code !== 'ends-on-one-device');
    case 'isolation':
      return isolatesTunnels(network, barrier.forwarder, barrier.group);
    case 'filter': {
      const { kind, policy } = entryOf(design.forwarders, barrier.forwarder);
      return kind === 'cross-connect' && Object.values(policy ?? {}).every(({ action }) => action === 'deny');
    }
    case 'standby':
      return (network.portGroupsByDevice.get(barrier.device) ?? [])
        .filter(({ member, ports }) => member === barrier.member && ports.includes(barrier.port))
        .flatMap(({ bundles }) => bundles)
        .some(({ bundle, end }) => {
          const far = network.bundles[bundle]![otherEnd(end)];
          return ['switch', 'host'].includes(entryOf(design.devices, far.device).kind);
        });
    case 'tag-discarded': {
      const tunnel = entryOf(design.tunnels, barrier.tunnel);
      return ends.some((end) => tunnel[end].innerTags === 'keep');
    }
    default:
      return isVlanBarrier(network, segment, barrier);
  }
};

/** The thing that a barrier is, whichever way frames meet it. */
const causeKey = (barrier: Barrier): string =>
  barrier.code === 'not-joined'
    ? barrier.code
    : barrier.code === 'port-shut'
      ? `${barrier.code} ${barrier.cable}`
      : Object.entries(barrier)
          .filter(([key]) => key !== 'direction' && key !== 'reasons')
          .map(([, value]) => String(value))
          .join(' ');

const causesOf = (network: Network): readonly Cause[] =>
  partedSegments(network).flatMap((reach) => {
    const byKey = new Map<string, Cause>();
    for (const parting of reach.partings) {
      const { barrier } = parting;
      if (isToldElsewhere(network, reach.segment, barrier)) continue;
      const key = causeKey(barrier);
      const before = byKey.get(key);
      byKey.set(key, {
        reach,
        barrier: before?.barrier ?? barrier,
        partings: [...(before?.partings ?? []), parting],
      });
    }
    return [...byKey.values()];
  });

const identityOf = ({ reach, barrier }: Cause): readonly string[] => [reach.segment, causeKey(barrier)];

/** The parts that nothing joins: by their sites, or by what stands at them where a site is in several. */
const partsOf = ({
  reach,
  partings,
}: Cause): readonly (readonly { readonly collection: 'sites' | 'devices'; readonly id: Id }[])[] => {
  const apart = new Set(partings.flatMap(({ from, to }) => [`${from} ${to}`, `${to} ${from}`]));
  const parts: { readonly groups: number[]; readonly sites: Set<Id>; readonly devices: Set<Id> }[] = [];
  reach.groups.forEach(({ points }, group) => {
    let part = parts.find(({ groups }) => groups.every((other) => !apart.has(`${group} ${other}`)));
    if (part === undefined) parts.push((part = { groups: [], sites: new Set(), devices: new Set() }));
    part.groups.push(group);
    for (const { site, device } of points) {
      part.sites.add(site);
      part.devices.add(device);
    }
  });
  const sites = parts.flatMap((part) => [...part.sites]);
  const collection = new Set(sites).size === sites.length ? 'sites' : 'devices';
  return parts.map((part) => [...part[collection]].sort().map((id) => ({ collection, id }) as const));
};

const nameOf = (design: DesignFacts, collection: 'sites' | 'devices', id: Id): string =>
  collection === 'sites' ? entryOf(design.sites, id).name : entryOf(design.devices, id).name;

const placeOf = ({ design }: Network, barrier: Barrier): readonly ElementRef[] => {
  if (barrier.code === 'port-shut')
    return shutPlugs(design, barrier.cable).map(({ device, port }) => portRef(device, port));
  if ('forwarder' in barrier) return [{ collection: 'forwarders', id: barrier.forwarder }];
  if ('tunnel' in barrier && barrier.tunnel !== undefined)
    return [{ collection: 'tunnels', id: barrier.tunnel }];
  if ('port' in barrier && barrier.port !== undefined) return [portRef(barrier.device, barrier.port)];
  if ('device' in barrier) return [{ collection: 'devices', id: barrier.device }];
  return [];
};

const openPorts = (network: Network, barrier: Extract<Barrier, { code: 'port-shut' }>): Fix => {
  const { design } = network;
  const shut = shutPlugs(design, barrier.cable);
  const names = listed(shut.map(({ device, port }) => portLabel(design, device, port)));
  const devices: { [device: string]: { ports: { [port: string]: MergePatch } } } = {};
  for (const { device, port } of shut) (devices[device] ??= { ports: {} }).ports[port] = { shut: null };
  return {
    id: 'open',
    label: shut.length === 1 ? 'Open the port' : 'Open both ports',
    sentence: `Opens ${names}.`,
    patch: { devices },
  };
};

const claimTunnel = (
  network: Network,
  segment: Id,
  { tunnel, device }: Extract<Barrier, { code: 'tunnel-unclaimed' }>,
): Fix | undefined => {
  const { design } = network;
  const serving = (network.forwardersByDevice.get(device) ?? []).filter((id) =>
    segmentsByForwarder(network).get(id)?.includes(segment),
  );
  const [forwarder] = serving;
  if (forwarder === undefined || serving.length > 1) return undefined;
  const { circuits, name } = entryOf(design.forwarders, forwarder);
  const circuit = { kind: 'tunnel', rank: rankAtEnd(circuits), tunnel };
  return {
    id: 'claim-tunnel',
    label: `Take it into ${name}`,
    sentence: `Lets ${name} hold ${entryOf(design.tunnels, tunnel).name}.`,
    patch: { forwarders: { [forwarder]: { circuits: { [unusedId(circuits, tunnel)]: circuit } } } },
  };
};

const permitFrames = (network: Network, { reach }: Cause, forwarder: Id): Fix | undefined => {
  const { kind, policy, name, multicast } = entryOf(network.design.forwarders, forwarder);
  if (multicast === 'drop' && reach.frame === 'ipv6')
    return {
      id: 'flood-multicast',
      label: 'Let multicast through',
      sentence: `Lets ${name} flood multicast, without which IPv6 hosts don’t find each other.`,
      patch: { forwarders: { [forwarder]: { multicast: 'flood' } } },
    };
  if (kind !== 'cross-connect') return undefined;
  const rank = rankBetween(undefined, inRankOrder(policy)[0]?.[1].rank);
  // RFC 4443 section 1: ICMPv6, which carries neighbour discovery, is protocol 58.
  const frames: MergePatch = reach.frame === 'ipv6' ? { frames: 'ipv6', protocol: 58 } : { frames: 'arp' };
  const words = reach.frame === 'ipv6' ? 'IPv6 neighbour discovery' : 'ARP';
  return {
    id: 'permit',
    label: `Permit ${words}`,
    sentence: `Permits ${words} both ways as the first rule of ${name}.`,
    patch: {
      forwarders: {
        [forwarder]: {
          policy: {
            [unusedId(policy ?? {}, 'address-resolution')]: {
              rank,
              action: 'permit',
              direction: 'both',
              ...frames,
            },
          },
        },
      },
    },
  };
};

/** Parts with more than this in all are counted, not listed. */
const namedAtMost = 4;

const apartFault = ({ design }: Network, cause: Cause) => {
  const { segment } = cause.reach;
  const parts = partsOf(cause);
  const all = [...parts].sort((a, b) => a.length - b.length).flat();
  const named = parts
    .map((part) => listed(part.map(({ collection, id }) => nameOf(design, collection, id))))
    .join('; ');
  return {
    message: 'apart' as const,
    values: {
      segment: entryOf(design.segments, segment).letter,
      count: countWord(parts.length),
      parts: all.length > namedAtMost ? '' : `: ${named}`,
    },
    elements: [...all, { collection: 'segments' as const, id: segment }],
    identity: identityOf(cause),
    basis: parts.map((part) => part.map(({ id }) => id)),
  };
};

const endsFault = (network: Network, cause: Cause) => {
  const { reach, barrier } = cause;
  return {
    message: 'ends' as const,
    values: {
      cause: sentenceStart(endingWords(network.design, barrier, reach.frame)),
      segment: entryOf(network.design.segments, reach.segment).letter,
    },
    elements: [...placeOf(network, barrier), { collection: 'segments' as const, id: reach.segment }],
    identity: identityOf(cause),
    basis: [barrier.code],
  };
};

export const segmentHostsParted = defineRule({
  id: 'segment-hosts-parted',
  title: 'All hosts of a segment hear each other',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'The segment was promised as one network, and it isn’t one: what a host sends to all does not reach all.',
  seen: 'Hosts of one part answer each other and nobody else. Everything that was configured looks up and healthy.',
  sources: ['common practice, no source'],
  messages: {
    apart: {
      words: 'segment parted',
      sentence: (v: { readonly segment: string; readonly count: string; readonly parts: string }) =>
        `Nothing joins ${v.count} parts of segment ${v.segment}${v.parts}`,
    },
    ends: {
      words: 'hosts parted',
      sentence: (v: { readonly cause: string; readonly segment: string }) =>
        `${v.cause}: segment ${v.segment} is parted`,
    },
  },
  check: (network) =>
    causesOf(network).map((cause) =>
      cause.barrier.code === 'not-joined' ? apartFault(network, cause) : endsFault(network, cause),
    ),
  fixes: (fault, network) => {
    const cause = causesOf(network).find(
      (other) => identityOf(other).join(' ') === fault.identity?.join(' '),
    );
    if (cause === undefined) return [];
    const { barrier, reach } = cause;
    const fix =
      barrier.code === 'port-shut'
        ? openPorts(network, barrier)
        : barrier.code === 'tunnel-unclaimed'
          ? claimTunnel(network, reach.segment, barrier)
          : barrier.code === 'filter'
            ? permitFrames(network, cause, barrier.forwarder)
            : undefined;
    return fix === undefined ? [] : [fix];
  },
});
