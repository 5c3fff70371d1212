import type { Member } from '../model/devices.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { Network, Port } from '../network/network.ts';
import { entryOf, forwardingMembers } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import type { Uplink } from './pair-uplinks.ts';
import { freePorts, isUnplugged, membersReached, switchGroupOf, uplinksOf } from './pair-uplinks.ts';
import { portLabel, portName } from './port-label.ts';
import { unusedId } from './unused-id.ts';

/** For each group of cabled switches that reaches one member alone: its first uplink. */
const lonelySwitches = (network: Network): readonly Uplink[] => {
  const firsts = new Map<string, Uplink>();
  for (const uplink of uplinksOf(network)) {
    const group = switchGroupOf(network, uplink.device);
    if (group === undefined || membersReached(network, group, uplink.pair).size > 1) continue;
    const key = `${group} ${uplink.pair}`;
    if (!firsts.has(key)) firsts.set(key, uplink);
  }
  return [...firsts.values()];
};

const otherMember = (member: Member): Member => (member === 1 ? 2 : 1);

/** What makes a port carry what another carries. */
const like = (port: Port, free: Port): MergePatch => {
  const keys = ['mode', 'vlan', 'nativeVlan', 'allowedVlans'] as const;
  return Object.fromEntries(
    keys.flatMap((key) =>
      JSON.stringify(port[key]) === JSON.stringify(free[key]) ? [] : [[key, port[key] ?? null]],
    ),
  ) as MergePatch;
};

/** The free port that a second uplink would take: one that is set up like the first where there is one. */
const secondPort = (network: Network, { device, port, pair, pairPort, member }: Uplink): Id | undefined => {
  if (!isUnplugged(network, pair, pairPort, otherMember(member))) return undefined;
  const uplink = entryOf(network.design.devices, device).ports[port]!;
  const changes = (free: Port): number => Object.keys(like(uplink, free)).length;
  return [...freePorts(network, device)].sort(([, a], [, b]) => changes(a) - changes(b))[0]?.[0];
};

interface Values {
  readonly switch: string;
  readonly member: string;
  readonly other: string;
}

export const switchSingleHomed = defineRule({
  id: 'switch-single-homed',
  title: 'A switch reaches both members of an HA pair',
  severity: 'blocking',
  looksAt: ['links', 'devices', 'forwarders'],
  why: 'Only the active member forwards. Everything behind a switch that is wired to the other one is cut off, although every device is up.',
  seen: 'All is well until the pair fails over. Then every host behind this switch is silent to the other sites, link lights on, until the pair fails back.',
  sources: ['common practice, no source'],
  messages: {
    atRisk: {
      words: 'one member only',
      sentence: (v: Values) => `${v.switch} is wired to ${v.member} alone, not to ${v.other}`,
    },
    cutOff: {
      words: 'wired to standby',
      sentence: (v: Values) => `${v.switch} is wired to ${v.member} alone, which stands by`,
      seen: 'The link light is on and nobody behind the switch reaches another site until the pair fails over.',
    },
  },
  check: (network) =>
    lonelySwitches(network).map((uplink) => {
      const { design } = network;
      const { device, pair, pairPort, member } = uplink;
      const entry = entryOf(design.devices, pair);
      const names = entry.kind === 'ha-pair' ? entry.memberNames : { 1: entry.name, 2: entry.name };
      const forwards = forwardingMembers(entry).includes(member);
      const free = secondPort(network, uplink);
      return {
        message: forwards ? ('atRisk' as const) : ('cutOff' as const),
        values: {
          switch: entryOf(design.devices, device).name,
          member: names[member],
          other: names[otherMember(member)],
        },
        elements: [
          { collection: 'links' as const, id: uplink.cable },
          { collection: 'devices' as const, id: device },
          { collection: 'devices' as const, id: pair },
        ],
        identity: [device, pair],
        basis: [member, forwards],
        ...(forwards
          ? {
              severityReason:
                'Nothing is wrong until the pair fails over; then everything behind the switch is cut off.',
            }
          : {}),
        ...(free === undefined
          ? {}
          : {
              mark: {
                kind: 'ghost' as const,
                from: { device, port: free },
                to: { device: pair, port: pairPort, member: otherMember(member) },
                label: portLabel(design, pair, pairPort, otherMember(member)),
              },
            }),
      };
    }),
  fixes: (fault, network) => {
    const { design } = network;
    const uplink = lonelySwitches(network).find(({ cable }) => cable === fault.elements[0]!.id);
    const free = uplink === undefined ? undefined : secondPort(network, uplink);
    if (uplink === undefined || free === undefined) return [];
    const { device, port, pair, pairPort, member } = uplink;
    const { ports } = entryOf(design.devices, device);
    const setUp = like(ports[port]!, ports[free]!);
    const isSetUp = Object.keys(setUp).length > 0;
    const other = otherMember(member);
    const id = unusedId(design.links, `${uplink.cable}-${other}`);
    return [
      {
        id: 'second-uplink',
        label: `Add an uplink to ${fault.values.other}`,
        sentence: `Adds a cable from ${portName(design, device, free)} of ${fault.values.switch} to ${portLabel(design, pair, pairPort, other)}${isSetUp ? ', and sets the switch’s port up like its first uplink' : ''}.`,
        patch: {
          links: {
            [id]: {
              kind: 'cable',
              a: { device, port: free },
              b: { device: pair, port: pairPort, member: other },
            },
          },
          ...(isSetUp ? { devices: { [device]: { ports: { [free]: setUp } } } } : {}),
        },
      },
    ];
  },
});
