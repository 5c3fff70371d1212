import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { unusedId } from './unused-id.ts';

/** Cables in the member-link ports of a pair: from member to member, or elsewhere. */
const memberCables = (network: Network, pair: Id) => {
  const { design } = network;
  const isMemberLink = (device: Id, port: Id): boolean =>
    device === pair && entryOf(design.devices, pair).ports[port]?.role === 'member-link';
  const direct: Id[] = [];
  const astray: { readonly cable: Id; readonly to: Id }[] = [];
  for (const cable of new Set((network.cablesByDevice.get(pair) ?? []).map((at) => at.cable))) {
    const link = entryOf(design.links, cable);
    if (link.kind !== 'cable') continue;
    const [a, b] = [isMemberLink(link.a.device, link.a.port), isMemberLink(link.b.device, link.b.port)];
    if (a && b && (link.a.member ?? 1) !== (link.b.member ?? 1)) direct.push(cable);
    else if (a !== b) astray.push({ cable, to: a ? link.b.device : link.a.device });
  }
  return { direct, astray };
};

/** A member-link port in which neither member has a plug. */
const freeMemberPort = (network: Network, pair: Id): Id | undefined =>
  Object.entries(entryOf(network.design.devices, pair).ports)
    .filter(([port, { role }]) => role === 'member-link' && !network.cablesByPort.has(`${pair}/${port}`))
    .sort(([idA, a], [idB, b]) => a.number - b.number || (idA < idB ? -1 : 1))[0]?.[0];

interface Values {
  readonly first: string;
  readonly second: string;
}

const messages = {
  missing: {
    words: 'member link missing',
    sentence: (v: Values) => `No cable joins ${v.first} and ${v.second}`,
  },
  through: {
    words: 'member link shared',
    sentence: (v: Values & { readonly through: string }) =>
      `${v.first} and ${v.second} watch each other through ${v.through}`,
    why: 'Whatever disturbs what lies between, a storm or a restart, makes each member take the other for dead: both become active just when the network is in trouble.',
    seen: 'A restart of one switch makes the pair fail over, or leaves it with two active members.',
  },
};

export const pairWithoutMemberLink = defineRule({
  id: 'pair-without-member-link',
  title: 'A cable of their own joins the members of an HA pair',
  severity: 'blocking',
  looksAt: ['devices', 'links', 'forwarders', 'endpoints'],
  why: 'The members tell each other over it that they are alive. Where nothing joins them, each takes the other for dead and both become active.',
  seen: 'Both members answer for the same addresses; connections of all sites break at random.',
  sources: ['common practice, no source'],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    return network.deviceIds.flatMap((id): readonly Fault<typeof messages>[] => {
      const pair = entryOf(design.devices, id);
      const isUsed = network.forwardersByDevice.has(id) || network.endpointsByDevice.has(id);
      if (pair.kind !== 'ha-pair' || !isUsed) return [];
      const { direct, astray } = memberCables(network, id);
      if (direct.length > 0) return [];
      const values = { first: pair.memberNames[1], second: pair.memberNames[2] };
      const ref: ElementRef = { collection: 'devices', id };
      const [first] = astray;
      const port = freeMemberPort(network, id);
      const ghost =
        port === undefined
          ? {}
          : {
              mark: {
                kind: 'ghost' as const,
                from: { device: id, port, member: 1 as const },
                to: { device: id, port, member: 2 as const },
                label: pair.ports[port]!.name ?? `port ${pair.ports[port]!.number}`,
              },
            };
      return first === undefined
        ? [{ message: 'missing' as const, values, elements: [ref], identity: [id], ...ghost }]
        : [
            {
              message: 'through' as const,
              values: { ...values, through: entryOf(design.devices, first.to).name },
              elements: [ref, ...astray.map(({ cable }): ElementRef => ({ collection: 'links', id: cable }))],
              identity: [id],
              basis: astray.map(({ to }) => to),
              severity: 'degrading' as const,
              severityReason: 'The members do hear each other, as long as what lies between them works.',
              ...ghost,
            },
          ];
    });
  },
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const port = freeMemberPort(network, id);
    if (port === undefined) return [];
    const cable = unusedId(network.design.links, `cb-${id}-${port}`);
    return [
      {
        id: 'add-link',
        label: 'Join them',
        sentence: `Adds a cable between ${fault.values.first} and ${fault.values.second}.`,
        patch: {
          links: {
            [cable]: {
              kind: 'cable',
              a: { device: id, port, member: 1 },
              b: { device: id, port, member: 2 },
            },
          },
        },
      },
    ];
  },
});
