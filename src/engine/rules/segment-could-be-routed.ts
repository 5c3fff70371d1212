import type { Entry } from '../model/design.ts';
import type { Protocol } from '../model/intent.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { perObject } from '../network/network.ts';
import { parsePrefix } from '../network/parse-prefix.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';

/** What routers carry between subnets as well. DHCP crosses them by relay. */
const routable: readonly Protocol[] = ['ipv4', 'ipv6', 'dhcp'];

type Prefix = ReturnType<typeof parsePrefix>;

const overlaps = ([a, aBits]: Prefix, [b, bBits]: Prefix): boolean =>
  a.kind() === b.kind() && a.match([b, Math.min(aBits, bBits)]);

/** Whether every site has subnets and shares none with another. */
const hasOwnSubnets = (sites: readonly (readonly string[])[]): boolean => {
  // Many sites are compared each with each: nothing is parsed twice.
  const parsed = sites.map((own) => own.map(parsePrefix));
  return (
    parsed.length > 1 &&
    parsed.every(
      (own, i) =>
        own.length > 0 &&
        parsed
          .slice(i + 1)
          .every((others) => !own.some((one) => others.some((other) => overlaps(one, other)))),
    )
  );
};

const isRoutable = perObject(
  ({ protocols, sites }: Entry<'segments'>): boolean =>
    protocols !== undefined &&
    protocols.length > 0 &&
    protocols.every((each) => routable.includes(each)) &&
    hasOwnSubnets(Object.values(sites).map(({ subnets }) => subnets ?? [])),
);

export const segmentCouldBeRouted = defineRule({
  id: 'segment-could-be-routed',
  title: 'What could be routed is not stretched',
  severity: 'advisory',
  looksAt: segmentPathFacts,
  why: 'Each site has its own subnets and the segment needs nothing but IP, which routers carry just as well. Stretched, it joins the failure domains of all its sites for nothing in return.',
  seen: 'Nothing, until a storm or a false address at one site takes down the others.',
  sources: [{ document: 'RFC 3378', clause: 'section 3' }],
  messages: {
    routable: {
      words: 'could be routed',
      sentence: (v: { readonly segment: string }) =>
        `${v.segment} has other subnets at each site and could be routed`,
    },
  },
  check: (network) => {
    const stretched = new Set([...tunnelSegments(network).values()].flat());
    return Object.entries(network.design.segments).flatMap(([id, segment]) => {
      if (!stretched.has(id) || !isRoutable(segment)) return [];
      const { name, sites } = segment;
      const ref = { collection: 'segments' as const, id };
      return [
        {
          message: 'routable',
          values: { segment: name },
          elements: [ref],
          properties: [
            { ref, path: ['protocols'] },
            ...Object.keys(sites)
              .sort()
              .map((site) => ({ ref, path: ['sites', site, 'subnets'] })),
          ],
        },
      ];
    });
  },
});
