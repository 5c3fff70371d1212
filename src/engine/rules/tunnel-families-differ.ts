import { applyPatch, diffPatch } from '../model/merge-patch.ts';
import type { Family } from '../network/association-path.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { End, Network, Tunnel } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { betterAddress, families, familyField, readdressPatch } from './endpoint-addresses.ts';
import type { Fix } from './finding.ts';
import { tunnelPlaces } from './places.ts';
import { listed } from './wording.ts';

const familiesAt = ({ design }: Network, tunnel: Tunnel, end: End): readonly Family[] =>
  families.filter((family) => design.endpoints[tunnel[end].endpoint]![familyField(family)] !== undefined);

/** True when both ends have addresses, but none of one family. */
const sharesNone = (network: Network, tunnel: Tunnel): boolean => {
  const [a, b] = ends.map((end) => familiesAt(network, tunnel, end));
  return a!.length > 0 && b!.length > 0 && !a!.some((family) => b!.includes(family));
};

/** Gives one end an address of a family that the other end has, and the selectors with it. */
const addFamily = (network: Network, ids: readonly string[], end: End, family: Family): Fix[] => {
  const { design } = network;
  const tunnel = design.tunnels[ids[0]!]!;
  const { endpoint } = tunnel[end];
  const far = design.endpoints[tunnel[otherEnd(end)].endpoint]![familyField(family)];
  const better = far === undefined ? undefined : betterAddress(network, endpoint, family, far);
  if (better === undefined) return [];
  const agreed = applyPatch(design, {
    tunnels: Object.fromEntries(ids.map((id) => [id, { family }])),
  });
  const readdressed = applyPatch(
    agreed,
    readdressPatch(indexNetwork(agreed), endpoint, family, better.address),
  );
  const plain = better.address.split('/')[0]!;
  const names = listed(ids.map((id) => design.tunnels[id]!.name));
  return [
    {
      id: `add-${familyField(family)}-${end}`,
      label: `Give ${design.endpoints[endpoint]!.name} ${plain}`,
      sentence: `Gives ${design.endpoints[endpoint]!.name} ${better.isNamed ? `${plain}, which its selectors name,` : `the free address ${plain}`} and lets ${names} run over IPv${family}.`,
      patch: diffPatch(design, readdressed),
    },
  ];
};

const messages = {
  apart: {
    words: 'IPv4 meets IPv6',
    sentence: (v: {
      readonly placeA: string;
      readonly familyA: number;
      readonly placeB: string;
      readonly familyB: number;
    }) => `Only IPv${v.familyA} at ${v.placeA}, only IPv${v.familyB} at ${v.placeB}`,
  },
  asked: {
    words: 'family missing',
    sentence: (v: { readonly tunnel: string; readonly family: number; readonly place: string }) =>
      `${v.place} has no IPv${v.family} address for ${v.tunnel}`,
  },
};

export const tunnelFamiliesDiffer = defineRule({
  id: 'tunnel-families-differ',
  title: 'Both ends of a tunnel have addresses of one family',
  severity: 'blocking',
  looksAt: [
    'tunnels',
    'endpoints',
    'gateways',
    'sites',
    'associations',
    'landings',
    'addressing',
    'carriers',
  ],
  why: 'VXLAN travels in IPv4 or in IPv6; an end that has only the other has no address to send to or from. IPsec around it may use either, the endpoints may not.',
  seen: 'The tunnel can’t be entered as planned, or stays down without sending a packet.',
  sources: [{ document: 'RFC 7348', clause: 'section 5' }],
  messages,
  check: (network) => {
    const { design } = network;
    const differing = [...tunnelStates(network)].flatMap(([id, { reasons }]) =>
      reasons.some(({ code }) => code === 'families-differ') ? [id] : [],
    );
    const byPair = new Map<string, string[]>();
    for (const id of differing) {
      const { a, b, family } = design.tunnels[id]!;
      const pair = [a.endpoint, b.endpoint].sort().join(' ');
      // Endpoints with nothing in common are one cause, however many tunnels they end; a family asked for is the tunnel's own.
      const key = sharesNone(network, design.tunnels[id]!) ? pair : `${pair} ${family ?? ''} ${id}`;
      byPair.set(key, [...(byPair.get(key) ?? []), id]);
    }
    return [...byPair.values()].map((ids): Fault<typeof messages> => {
      const [first] = ids;
      const tunnel = design.tunnels[first!]!;
      const places = tunnelPlaces(design, tunnel);
      const has = { a: familiesAt(network, tunnel, 'a'), b: familiesAt(network, tunnel, 'b') };
      const refs = ids.map((id) => ({ collection: 'tunnels' as const, id }));
      const endpoints = ends.map((end) => ({ collection: 'endpoints' as const, id: tunnel[end].endpoint }));
      const body = {
        elements: [...refs, ...endpoints],
        basis: [tunnel.family ?? 0, ...has.a, 0, ...has.b],
        mark: { kind: 'cut' as const, tunnel: first! },
      };
      if (sharesNone(network, tunnel))
        return {
          message: 'apart',
          values: { placeA: places.a, familyA: has.a[0]!, placeB: places.b, familyB: has.b[0]! },
          identity: [...endpoints.map(({ id }) => id)].sort(),
          properties: endpoints.flatMap((ref, i) =>
            (i === 0 ? has.a : has.b).map((family) => ({ ref, path: [familyField(family)] })),
          ),
          ...body,
        };
      const family = tunnel.family!;
      const lacking = ends.find((end) => has[end].length > 0 && !has[end].includes(family))!;
      return {
        message: 'asked',
        values: { tunnel: tunnel.name, family, place: places[lacking] },
        identity: [first!],
        properties: [
          { ref: refs[0]!, path: ['family'] },
          { ref: refs[0]!, path: [lacking, 'endpoint'] },
        ],
        ...body,
      };
    });
  },
  fixes: (fault, network) => {
    const { design } = network;
    const ids = fault.elements.filter(({ collection }) => collection === 'tunnels').map(({ id }) => id);
    const tunnel = design.tunnels[ids[0]!]!;
    const has = { a: familiesAt(network, tunnel, 'a'), b: familiesAt(network, tunnel, 'b') };
    const [common] = families.filter((family) => ends.every((end) => has[end].includes(family)));
    const fixes: Fix[] =
      common === undefined
        ? []
        : [
            {
              id: 'set-family',
              label: `Run over IPv${common}`,
              sentence: `Lets ${tunnel.name} run over IPv${common}, which both endpoints have.`,
              patch: { tunnels: { [ids[0]!]: { family: common } } },
            },
          ];
    const wanted = tunnel.family === undefined ? families : [tunnel.family];
    for (const family of wanted)
      for (const end of ends)
        if (!has[end].includes(family)) fixes.push(...addFamily(network, ids, end, family));
    return fixes;
  },
});
