import { defineRule } from './define-rule.ts';
import { families, familyField, segmentSubnetOf } from './endpoint-addresses.ts';
import { siteNameOf } from './places.ts';

export const landingInsideSegment = defineRule({
  id: 'landing-inside-segment',
  title: 'Tunnels run outside the segments that they carry',
  severity: 'blocking',
  looksAt: ['landings', 'addressing', 'gateways', 'sites'],
  why: 'A gateway looks for an address of a segment’s subnet on that segment, and so sends the tunnel’s own packets into the tunnel. The way to the other end must never lead through the overlay.',
  seen: 'The tunnel comes up, learns the way through itself, goes down and starts again, every few seconds.',
  sources: ['common practice, no source'],
  messages: {
    inside: {
      words: 'inside a segment',
      sentence: (v: {
        readonly address: string;
        readonly place: string;
        readonly subnet: string;
        readonly segment: string;
      }) => `Outside address ${v.address} at ${v.place} lies in segment ${v.segment}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...network.landingsByTransport.values()].flat().flatMap((id) => {
      const link = design.links[id]!;
      if (link.kind !== 'landing') return [];
      return families.flatMap((family) => {
        const field = familyField(family);
        const address = link[field];
        const found = address === undefined ? undefined : segmentSubnetOf(network, address);
        if (address === undefined || found === undefined) return [];
        const ref = { collection: 'links', id } as const;
        return [
          {
            message: 'inside',
            values: {
              address,
              place: siteNameOf(design, link.device),
              subnet: found.subnet,
              segment: design.segments[found.segment]!.letter,
            },
            elements: [ref, { collection: 'segments' as const, id: found.segment }],
            identity: [id, field],
            properties: [{ ref, path: [field] }],
            basis: [address, found.subnet],
          },
        ];
      });
    });
  },
});
