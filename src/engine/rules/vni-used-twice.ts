import { joinPatches } from '../model/merge-patch.ts';
import type { End, Network } from '../network/network.ts';
import { deviceOfTunnelEnd, ends, otherEnd } from '../network/network.ts';
import { VXLAN_UDP_PORT } from '../reference/vxlan.ts';
import { defineRule } from './define-rule.ts';
import { sharedSets } from './grouping.ts';
import { freeVnis } from './vni-use.ts';
import { counted, listed, namedOrCounted } from './wording.ts';

type Scope = 'endpoint' | 'peer' | 'multipoint';

const forwardersOf = (network: Network, tunnel: string, device: string): string =>
  (network.circuitsByTunnel.get(tunnel) ?? [])
    .filter((at) => at.device === device)
    .map((at) => at.forwarder)
    .sort()
    .join(' ');

/**
 * What no two tunnels may share at this end, as the equipment's scope of a VNI has it: the endpoint's number itself, the
 * number towards one peer, or, where one number is a single multipoint circuit, the number in another forwarder.
 */
const marksOf = (network: Network, id: string, end: End): readonly string[] => {
  const { design } = network;
  const tunnel = design.tunnels[id]!;
  const { vni, udpPort, endpoint } = tunnel[end];
  if (vni === undefined) return [];
  const device = deviceOfTunnelEnd(network, tunnel, end);
  const profile = design.devices[device]!.profile;
  const scope: Scope = (profile === undefined ? undefined : design.profiles[profile]?.vniScope) ?? 'endpoint';
  const number = `${vni} ${udpPort ?? VXLAN_UDP_PORT} ${endpoint}`;
  const towardsPeer = `${number} ${tunnel[otherEnd(end)].endpoint}`;
  return scope === 'endpoint' ? [number] : [towardsPeer];
};

/** Tunnels that have their endpoint, VNI and UDP port in common with another: all others share nothing in any scope. */
const repeated = (network: Network): readonly string[] => {
  const first = new Map<string, Map<number, string>>();
  const found = new Set<string>();
  for (const id of network.tunnelIds)
    for (const end of ends) {
      const { vni, udpPort, endpoint } = network.design.tunnels[id]![end];
      if (vni === undefined) continue;
      const number = vni * 0x1_0000 + (udpPort ?? VXLAN_UDP_PORT);
      const here = first.get(endpoint) ?? new Map<number, string>();
      first.set(endpoint, here);
      const other = here.get(number);
      if (other === undefined) here.set(number, id);
      else found.add(other).add(id);
    }
  return [...found].sort();
};

/** Tunnels of one VNI at a multipoint endpoint that lie in different forwarders, which its single circuit can't. */
const splitMultipoint = (
  network: Network,
  tunnels: readonly string[],
): readonly (readonly [string, string])[] => {
  const { design } = network;
  const byNumber = new Map<string, { readonly tunnel: string; readonly forwarders: string }[]>();
  for (const id of tunnels)
    for (const end of ends) {
      const tunnel = design.tunnels[id]!;
      const device = deviceOfTunnelEnd(network, tunnel, end);
      const profile = design.devices[device]!.profile;
      const { vni, udpPort, endpoint } = tunnel[end];
      if (vni === undefined || profile === undefined || design.profiles[profile]?.vniScope !== 'multipoint')
        continue;
      const number = `${vni} ${udpPort ?? VXLAN_UDP_PORT} ${endpoint} split`;
      const forwarders = forwardersOf(network, id, device);
      if (forwarders !== '')
        byNumber.set(number, [...(byNumber.get(number) ?? []), { tunnel: id, forwarders }]);
    }
  return [...byNumber].flatMap(([number, list]) =>
    new Set(list.map(({ forwarders }) => forwarders)).size > 1
      ? list.map(({ tunnel }) => [number, tunnel] as const)
      : [],
  );
};

export const vniUsedTwice = defineRule({
  id: 'vni-used-twice',
  title: 'A VNI names one tunnel at an endpoint, as far as the equipment asks for it',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'gateways', 'profiles', 'forwarders'],
  why: 'The VNI alone tells the receiving endpoint which bridge a frame belongs to. Two tunnels with one number merge their segments, or the equipment refuses the second.',
  seen: 'The second tunnel can’t be saved, or broadcasts and addresses of one segment turn up in the other.',
  sources: [{ document: 'RFC 7348', clause: 'section 4' }],
  messages: {
    shared: {
      words: 'VNI used twice',
      sentence: (v: { readonly vni: string; readonly tunnels: string; readonly endpoints: string }) =>
        `VNI ${v.vni} is used by ${v.tunnels} at ${v.endpoints}`,
    },
  },
  check: (network) => {
    const { design } = network;
    const tunnels = repeated(network);
    const marked = tunnels.flatMap((id) =>
      ends.flatMap((end) => marksOf(network, id, end).map((mark) => [mark, id] as const)),
    );
    return sharedSets([...marked, ...splitMultipoint(network, tunnels)]).map((ids) => {
      const marks = ids.map((id) => ends.flatMap((end) => marksOf(network, id, end)));
      const atSeveral = (endpoint: string): boolean =>
        ids.filter((id) => ends.some((end) => design.tunnels[id]![end].endpoint === endpoint)).length > 1;
      const endpoints = [
        ...new Set(ids.flatMap((id) => ends.map((end) => design.tunnels[id]![end].endpoint))),
      ]
        .filter(atSeveral)
        .sort();
      const vnis = [
        ...new Set(
          ids
            .flatMap((id) =>
              ends
                .map((end) => design.tunnels[id]![end])
                .filter(({ endpoint }) => endpoints.includes(endpoint)),
            )
            .flatMap(({ vni }) => vni ?? []),
        ),
      ].sort((a, b) => a - b);
      const names = ids.map((id) => design.tunnels[id]!.name);
      return {
        message: 'shared',
        values: {
          vni: listed(vnis.map(String)),
          tunnels: namedOrCounted(names, 'tunnels'),
          endpoints: namedOrCounted(
            endpoints.map((id) => design.endpoints[id]!.name),
            'endpoints',
          ),
        },
        elements: [
          ...ids.map((id) => ({ collection: 'tunnels' as const, id })),
          ...endpoints.map((id) => ({ collection: 'endpoints' as const, id })),
        ],
        identity: ids,
        properties: ids.flatMap((id) =>
          ends
            .filter((end) => endpoints.includes(design.tunnels[id]![end].endpoint))
            .map((end) => ({ ref: { collection: 'tunnels' as const, id }, path: [end, 'vni'] })),
        ),
        basis: marks,
      };
    });
  },
  fixes: (fault, { design }, context) => {
    const [, ...others] = fault.elements.filter(({ collection }) => collection === 'tunnels');
    const free = freeVnis(design, context, others.length);
    if (free.length < others.length) return [];
    const [only] = others;
    return [
      {
        id: 'renumber',
        label:
          others.length === 1
            ? `Set ${design.tunnels[only!.id]!.name} to ${free[0]!}`
            : `Renumber ${counted(others.length, 'tunnel', 'tunnels')}`,
        sentence: `Gives ${namedOrCounted(
          others.map(({ id }, i) => `${design.tunnels[id]!.name} VNI ${free[i]!}`),
          'tunnels free VNIs of their own',
        )}, at both ends.`,
        patch: joinPatches(
          design,
          others.map(({ id }, i) => ({ tunnels: { [id]: { a: { vni: free[i]! }, b: { vni: free[i]! } } } })),
        ),
      },
    ];
  },
});
