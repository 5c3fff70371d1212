import type { ElementRef } from '../model/design.ts';
import type { Member } from '../model/devices.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Network, Port } from '../network/network.ts';
import { portKey } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { counted } from './wording.ts';

interface Plugged {
  readonly device: string;
  readonly port: string;
  readonly member: Member;
  readonly cables: readonly string[];
  /** A WAN port's landing takes the port too; several transports may come over one line. */
  readonly landings: readonly string[];
}

/** Ports with several cables in them, or with landings: nearly every port has one cable and nothing else. */
const portsOfSeveral = ({ cablesByPort, landingsByPort }: Network): ReadonlySet<string> => {
  const keys = new Set(landingsByPort.keys());
  for (const [key, list] of cablesByPort) if (list.length > 1) keys.add(key);
  return keys;
};

/** Ports with more than one thing plugged in. */
const crowdedPorts = (network: Network): readonly Plugged[] =>
  [...portsOfSeveral(network)].flatMap((key) => {
    const list = network.cablesByPort.get(key) ?? [];
    const landed = network.landingsByPort.get(key) ?? [];
    if (list.length === 0) return [];
    const { cable, end } = list[0]!;
    const link = network.design.links[cable]!;
    if (link.kind !== 'cable') return [];
    const { device, port } = link[end];
    return ([1, 2] as const).flatMap((member) => {
      const cables = [...new Set(list.filter((at) => at.member === member).map((at) => at.cable))];
      const landings = landed.filter((id) => {
        const landing = network.design.links[id]!;
        return (
          landing.kind === 'landing' &&
          (landing.members === undefined || landing.members === 'both' || landing.members === String(member))
        );
      });
      return cables.length > 0 ? [{ device, port, member, cables, landings }] : [];
    });
  });

/** True when a cable may move from the one port to the other without a frame being treated otherwise. */
const isAlike = (x: Port, y: Port): boolean =>
  x.role === y.role &&
  y.shut !== true &&
  x.mode === y.mode &&
  x.vlan === y.vlan &&
  x.nativeVlan === y.nativeVlan &&
  JSON.stringify(x.allowedVlans) === JSON.stringify(y.allowedVlans);

const takeOver = (port: Port): MergePatch => {
  const { mode, vlan, nativeVlan, allowedVlans } = port;
  return Object.fromEntries(
    Object.entries({ mode, vlan, nativeVlan, allowedVlans }).filter(([, value]) => value !== undefined),
  ) as MergePatch;
};

export const portHoldsTwoCables = defineRule({
  id: 'port-holds-two-cables',
  title: 'A port holds one cable',
  severity: 'blocking',
  looksAt: ['links', 'devices'],
  why: 'Only one plug fits. The second cable will be plugged in somewhere, by somebody, without a plan.',
  seen: 'The person on site finds the port taken and chooses another.',
  sources: ['common practice, no source'],
  messages: {
    taken: {
      words: 'port taken twice',
      sentence: (v: { readonly port: string; readonly device: string; readonly count: string }) =>
        `${v.port} of ${v.device} holds ${v.count}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return crowdedPorts(network).flatMap(({ device, port, member, cables, landings }) => {
      if (cables.length + Math.min(landings.length, 1) < 2) return [];
      const entry = design.devices[device]!;
      const isPair = entry.kind === 'ha-pair';
      const ref: ElementRef = {
        collection: 'devices',
        id: device,
        port,
        ...(isPair ? { member } : {}),
      };
      return [
        {
          message: 'taken',
          values: {
            port: `Port ${entry.ports[port]!.name ?? entry.ports[port]!.number}`,
            device: isPair ? entry.memberNames[member] : entry.name,
            count:
              landings.length === 0
                ? counted(cables.length, 'cable', 'cables')
                : `${counted(cables.length, 'cable', 'cables')} beside its transport`,
          },
          elements: [ref, ...[...cables, ...landings].map((id) => ({ collection: 'links' as const, id }))],
          identity: [device, port, ...(isPair ? [String(member)] : [])],
          properties: [],
          basis: [...cables, ...landings],
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const { design } = network;
    const { id: device, port, member = 1 } = fault.elements[0]!;
    const plugged = crowdedPorts(network).find(
      (other) => other.device === device && other.port === port && other.member === member,
    );
    if (port === undefined || plugged === undefined) return [];
    const entry = design.devices[device]!;
    const from = entry.ports[port]!;
    const surplus = plugged.landings.length > 0 ? plugged.cables : plugged.cables.slice(1);
    if (surplus.length !== 1) return [];
    const [cable] = surplus;
    const link = design.links[cable!]!;
    if (link.kind !== 'cable') return [];
    const end =
      link.b.device === device && link.b.port === port && (link.b.member ?? 1) === member ? 'b' : 'a';
    const free = Object.entries(entry.ports)
      .filter(
        ([id, candidate]) =>
          candidate.role === from.role &&
          candidate.shut !== true &&
          !(network.landingsByPort.get(portKey(device, id)) ?? []).length &&
          !(network.cablesByPort.get(portKey(device, id)) ?? []).some((at) => at.member === member),
      )
      .sort(([, x], [, y]) => Number(isAlike(from, y)) - Number(isAlike(from, x)) || x.number - y.number);
    return free.slice(0, 1).map(([id, candidate]): Fix => {
      const name = candidate.name ?? `port ${candidate.number}`;
      const alike = isAlike(from, candidate);
      return {
        id: `move-to-${id}`,
        label: `Move one to ${name}`,
        sentence: `Moves ${link.name ?? 'the second cable'} to ${name} of ${entry.name}${alike ? '' : ', and sets that port up like this one'}.`,
        patch: {
          links: { [cable!]: { [end]: { port: id } } },
          ...(alike ? {} : { devices: { [device]: { ports: { [id]: takeOver(from) } } } }),
        },
      };
    });
  },
});
