import type { ElementRef } from '../model/design.ts';
import type { Tags } from '../network/frame-tags.ts';
import { pushTag, untagged } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { portGroupAt } from '../network/port-groups.ts';
import type { Fragment } from '../wire/fragments-of.ts';
import { fragmentsOf } from '../wire/fragments-of.ts';
import type { Crossing, End, Following, Hop } from './follower.ts';
import { dropped, namesOf } from './follower.ts';
import type { Follower } from './follow-crossing.ts';
import { decidersOf, endOf } from './pass-device.ts';
import type { Probe } from './probe.ts';
import type { DecisionFact } from './trace.ts';

/** What a sender makes of its packet before it leaves: whole, cut, or not at all. */
export interface OwnCut {
  readonly pieces?: readonly Fragment[];
  readonly mtuBytes?: number;
  readonly end?: End;
}

const tagsFrom = (list: readonly number[]): Tags =>
  [...list].reverse().reduce((tags, vlan) => pushTag(tags, vlan) ?? tags, untagged);

/** RFC 791 section 2.3 and RFC 8200 section 4.5: a sender cuts its own packets, unless it has forbidden that. */
export const ownCut = (network: Network, { source, packet }: Probe): OwnCut => {
  if (packet.kind !== 'ip') return {};
  const device = 'host' in source ? source.host : source.device;
  const ports = 'host' in source ? Object.values(entryOf(network.design.devices, device).ports) : [];
  const known = [...ports.map(({ mtu }) => mtu), packet.sourceMtuBytes].filter((mtu) => mtu !== undefined);
  const mtuBytes = Math.min(...known);
  const { packetBytes, version, dontFragment } = packet;
  if (packetBytes <= mtuBytes) return {};
  const cut = dontFragment ? undefined : fragmentsOf(packetBytes, version, mtuBytes);
  return cut?.ok === true
    ? { pieces: cut.pieces, mtuBytes }
    : { end: dropped({ code: 'exceeds-own-mtu', device, packetBytes, mtuBytes }) };
};

const segmentFact = (network: Network, { source, destination }: Probe): readonly DecisionFact[] => {
  if (!('host' in source) || destination.kind !== 'host') return [];
  const [from, to] = [source.host, destination.host].map((id) => {
    const device = entryOf(network.design.devices, id);
    return device.kind === 'host' ? device.segment : undefined;
  });
  return from === undefined || to === undefined || from === to ? [] : [{ code: 'other-segment', from, to }];
};

/** The first hop of a trace: the sender, and on what its frame leaves. */
export const sourceHop = (following: Following, follower: Follower, probe: Probe, own: OwnCut): Hop => {
  const { network, frame } = following;
  const { source } = probe;
  const by: ElementRef =
    'host' in source
      ? { collection: 'devices', id: source.host }
      : {
          collection: 'devices',
          id: source.device,
          port: source.port,
          ...(source.member === undefined ? {} : { member: source.member }),
        };
  const facts: DecisionFact[] = [{ code: 'sent', by }, ...segmentFact(network, probe)];
  if (own.mtuBytes !== undefined)
    facts.push({ code: 'cut-by-source', device: by.id, mtuBytes: own.mtuBytes });
  const base = { elements: [by], ...(own.pieces === undefined ? {} : { pieces: own.pieces }) };
  if (own.end !== undefined) return { ...base, facts, end: own.end, onward: [], stopped: [] };
  if (!('host' in source)) {
    const group = portGroupAt(network, source.device, source.port, source.member)!;
    const entered = follower.enter(group, tagsFrom(probe.tags ?? []));
    return { ...base, ...entered, facts: [...facts, ...entered.facts] };
  }
  const stated = probe.tags === undefined ? undefined : tagsFrom(probe.tags);
  const onward: Crossing[] = [];
  const stopped: Hop[] = [];
  const { real, explaining } = decidersOf(network);
  for (const place of real.places.byDevice.get(source.host) ?? []) {
    real.leave(place, -1, untagged, (element, direction, tags) => {
      onward.push({ element, direction, tags: stated ?? tags, hopLimit: frame.hopLimit });
    });
    explaining.leave(place, -1, untagged, (element, direction, tags, _classes, barrier) => {
      const end = barrier === undefined ? undefined : endOf(barrier);
      if (end === undefined) return;
      const { step, from, to, ref } = namesOf(network, { element, direction, tags: stated ?? tags });
      stopped.push({ step, from, to, elements: [ref], facts: [], end, onward: [], stopped: [] });
    });
  }
  const isAlone = onward.length === 0 && stopped.length === 0;
  return {
    ...base,
    facts,
    onward,
    stopped,
    ...(isAlone ? { end: dropped({ code: 'not-cabled', device: source.host }) } : {}),
  };
};
