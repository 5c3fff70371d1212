import type { ElementRef } from '../model/design.ts';
import type { Network, PortGroup } from '../network/network.ts';
import { entryOf, otherEnd, portKey } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { listed, namedOrCounted } from './wording.ts';

/** Last octet of the group address of LACP (IEEE 802.1AX, from memory). */
const slowProtocols = '02';

/** Whether the port goes on through cross-connects that hand LACP to the far side, so that the aggregate ends there. */
const isTransparent = (network: Network, { device, port }: PortGroup): boolean => {
  const { profile } = entryOf(network.design.devices, device);
  const claims = network.circuitsByPort.get(portKey(device, port)) ?? [];
  return (
    profile !== undefined &&
    entryOf(network.design.profiles, profile).reservedGroups?.[slowProtocols] === 'pass' &&
    claims.length > 0 &&
    claims.every(({ forwarder }) => entryOf(network.design.forwarders, forwarder).kind === 'cross-connect')
  );
};

const farEnds = (network: Network, group: PortGroup): readonly PortGroup[] =>
  group.bundles
    .filter(({ bundle }) => network.bundles[bundle]!.alive.length > 0)
    .map(({ bundle, end }) => network.bundles[bundle]![otherEnd(end)]);

const isApart = (network: Network, group: PortGroup): boolean => {
  if (group.aggregation === undefined) return false;
  const far = farEnds(network, group);
  if (far.length < 2 || far.every((each) => isTransparent(network, each))) return false;
  const [first] = far;
  const device = entryOf(network.design.devices, first!.device);
  // Two active members of one pair may well be one partner to an aggregate.
  const isOnePartner =
    device.kind === 'ha-pair' &&
    device.mode === 'active-active' &&
    far.every((each) => each.device === first!.device);
  return !isOnePartner;
};

const nameOf = ({ design }: Network, { device, member }: PortGroup): string => {
  const entry = entryOf(design.devices, device);
  return entry.kind === 'ha-pair' ? entry.memberNames[member] : entry.name;
};

export const aggregateEndsApart = defineRule({
  id: 'aggregate-ends-apart',
  title: 'All cables of a link aggregate end at one device',
  severity: 'degrading',
  looksAt: ['devices', 'cables', 'forwarders', 'profiles'],
  why: 'The sender spreads flows over all cables, as if one partner held the other ends. Two devices that don’t act as one, or a member that stands by, lose the flows that come their way.',
  seen: 'With LACP one of the cables never joins the aggregate; with a static one some pairs of hosts reach each other and others, by chance, never do.',
  sources: ['common practice, no source'],
  messages: {
    apart: {
      words: 'aggregate ends apart',
      sentence: (v: { readonly aggregate: string; readonly device: string; readonly far: string }) =>
        `${v.aggregate} of ${v.device} ends at ${v.far}`,
    },
  },
  check: (network) =>
    [...network.portGroupsByDevice.values()]
      .flatMap((groups) => groups.filter((group) => isApart(network, group)))
      .map((group) => {
        const far = farEnds(network, group);
        const cables = group.bundles.flatMap(({ bundle }) => network.bundles[bundle]!.alive);
        const ports = group.ports.map((port): ElementRef => ({
          collection: 'devices',
          id: group.device,
          port,
        }));
        return {
          message: 'apart',
          values: {
            aggregate: group.aggregation!,
            device: nameOf(network, group),
            far: namedOrCounted([...new Set(far.map((each) => nameOf(network, each)))].sort(), 'devices'),
          },
          elements: [...ports, ...cables.map((id): ElementRef => ({ collection: 'links', id }))],
          identity: [group.device, String(group.member), group.aggregation!],
          properties: ports.map((ref) => ({ ref, path: ['aggregation'] })),
          basis: far.map(({ device, member }) => `${device} ${member}`),
        };
      }),
  fixes: (fault, network) => {
    const [device, , aggregation] = fault.identity!;
    const ports = Object.entries(entryOf(network.design.devices, device!).ports)
      .filter(([, port]) => port.aggregation === aggregation)
      .map(([id]) => id)
      .sort();
    return [
      {
        id: 'dissolve',
        label: `Dissolve ${aggregation!}`,
        sentence: `Makes ${listed(ports.map((port) => entryOf(network.design.devices, device!).ports[port]!.name ?? port))} of ${fault.values.device} ports of their own.`,
        patch: {
          devices: {
            [device!]: { ports: Object.fromEntries(ports.map((port) => [port, { aggregation: null }])) },
          },
        },
      },
    ];
  },
});
