import type { MergePatch } from '../model/merge-patch.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { bridgesOfTunnel } from './bridged-ends.ts';
import { segmentPathFacts, segmentsByForwarder } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { firstPolicy } from './first-policy.ts';
import { siteNameOf, tunnelPlaces } from './places.ts';

export const bridgeWhereFilterRequired = defineRule({
  id: 'bridge-where-filter-required',
  title: 'Segments that must be filtered between their sites pass a cross-connect with a policy',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: 'A bridge hands on every frame unseen, so that whatever the firewall’s rules say of this segment is never asked.',
  seen: 'Hosts of one site reach everything at the other; the firewall’s log shows nothing of it.',
  sources: [{ document: 'RFC 3378', clause: 'section 6' }, 'common practice, no source'],
  messages: {
    bridged: {
      words: 'not filtered',
      sentence: (v: {
        readonly segment: string;
        readonly placeA: string;
        readonly placeB: string;
        readonly tunnel: string;
      }) => `${v.segment} must be filtered, but ${v.tunnel} bridges it`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...tunnelSegments(network)].flatMap(([tunnel, segments]) =>
      segments.flatMap((segment) => {
        if (design.segments[segment]!.mustBeFiltered !== true) return [];
        const bridges = bridgesOfTunnel(network, tunnel, segment);
        if (bridges.length === 0) return [];
        const places = tunnelPlaces(design, design.tunnels[tunnel]!);
        return [
          {
            message: 'bridged',
            values: {
              segment: design.segments[segment]!.name,
              placeA: places.a,
              placeB: places.b,
              tunnel: design.tunnels[tunnel]!.name,
            },
            elements: [
              { collection: 'tunnels' as const, id: tunnel },
              { collection: 'segments' as const, id: segment },
              ...bridges.map((id) => ({ collection: 'forwarders' as const, id })),
            ],
            identity: [segment, tunnel],
            properties: [
              { ref: { collection: 'segments' as const, id: segment }, path: ['mustBeFiltered'] },
              ...bridges.map((id) => ({
                ref: { collection: 'forwarders' as const, id },
                path: ['kind'],
              })),
            ],
            basis: bridges,
          },
        ];
      }),
    );
  },
  fixes: (fault, network) => {
    const { design } = network;
    return fault.elements
      .filter(({ collection }) => collection === 'forwarders')
      .flatMap(({ id }) => {
        const forwarder = design.forwarders[id]!;
        const kinds = Object.values(forwarder.circuits).map(({ kind }) => kind);
        // A bridge that does more than hand frames from one port to one tunnel can't become a cross-connect.
        if (kinds.length !== 2 || kinds[0] === kinds[1] || forwarder.gateway !== undefined) return [];
        const hasPolicy = Object.values(forwarder.policy ?? {}).some(({ action }) => action === 'permit');
        const change: MergePatch = {
          kind: 'cross-connect',
          spanningTree: null,
          ...(hasPolicy ? {} : { policy: firstPolicy(design, segmentsByForwarder(network).get(id) ?? []) }),
        };
        const place = siteNameOf(design, forwarder.device);
        return [
          {
            id: `filter-${id}`,
            label: `Filter at ${place}`,
            sentence: `Turns ${forwarder.name} at ${place} into a cross-connect with ${hasPolicy ? 'the policy it has' : 'a first policy, to be narrowed down'}.`,
            patch: { forwarders: { [id]: change } },
          },
        ];
      });
  },
});
