import type { DesignFacts } from '../network/network.ts';
import { parsePrefix } from '../network/parse-prefix.ts';
import { defineRule } from './define-rule.ts';

interface Subnet {
  readonly segment: string;
  readonly subnet: string;
  readonly bits: string;
  readonly length: number;
}

const bitsOf = (bytes: readonly number[]): string =>
  bytes.map((byte) => byte.toString(2).padStart(8, '0')).join('');

/** Each segment's subnets once, as the bits that their addresses begin with; the family leads. */
const subnetsOf = (design: DesignFacts): readonly Subnet[] =>
  Object.keys(design.segments)
    .sort()
    .flatMap((segment) => {
      const own = Object.values(design.segments[segment]!.sites).flatMap(({ subnets }) => subnets ?? []);
      return [...new Set(own)].sort().map((subnet): Subnet => {
        const [address, length] = parsePrefix(subnet);
        const family = address.kind() === 'ipv4' ? '4' : '6';
        return {
          segment,
          subnet,
          bits: `${family}${bitsOf(address.toByteArray()).slice(0, length)}`,
          length,
        };
      });
    });

/** Pairs of subnets of different segments of which one holds the other, each pair of segments once. */
const overlaps = (design: DesignFacts): readonly (readonly [wide: Subnet, narrow: Subnet])[] => {
  const all = subnetsOf(design);
  const byBits = new Map<string, Subnet[]>();
  for (const each of all) byBits.set(each.bits, [...(byBits.get(each.bits) ?? []), each]);
  const found = new Map<string, readonly [Subnet, Subnet]>();
  for (const narrow of all)
    for (let length = 1; length <= narrow.bits.length; length += 1)
      for (const wide of byBits.get(narrow.bits.slice(0, length)) ?? []) {
        if (wide.segment === narrow.segment) continue;
        const pair = [wide.segment, narrow.segment].sort().join(' ');
        if (!found.has(pair)) found.set(pair, [wide, narrow]);
      }
  return [...found.values()];
};

export const subnetInTwoSegments = defineRule({
  id: 'subnet-in-two-segments',
  title: 'Segments have subnets that do not overlap',
  severity: 'degrading',
  looksAt: ['addressing'],
  why: 'A router can send to one of them only. Hosts of the two can never reach each other, and joining them by mistake brings every address twice. Harmless only where nothing routes to both.',
  seen: 'Traffic for one segment turns up in the other, or is dropped, depending on which route is better that day.',
  sources: [{ document: 'RFC 5227', clause: 'section 2.4' }, 'common practice, no source'],
  messages: {
    overlap: {
      words: 'subnets overlap',
      sentence: (v: {
        readonly letterA: string;
        readonly subnetA: string;
        readonly letterB: string;
        readonly subnetB: string;
      }) =>
        v.subnetA === v.subnetB
          ? `Segments ${v.letterA} and ${v.letterB} both have ${v.subnetA}`
          : `${v.subnetA} of segment ${v.letterA} overlaps ${v.subnetB} of ${v.letterB}`,
    },
  },
  check: ({ design }) =>
    overlaps(design).map((pair) => {
      const [a, b] = [...pair].sort((x, y) => (x.segment < y.segment ? -1 : 1)) as [Subnet, Subnet];
      const refs = [a, b].map(({ segment }) => ({ collection: 'segments' as const, id: segment }));
      return {
        message: 'overlap',
        values: {
          letterA: design.segments[a.segment]!.letter,
          subnetA: a.subnet,
          letterB: design.segments[b.segment]!.letter,
          subnetB: b.subnet,
        },
        elements: refs,
        properties: [a, b].flatMap(({ segment, subnet }, i) =>
          Object.entries(design.segments[segment]!.sites)
            .filter(([, { subnets }]) => subnets?.includes(subnet) === true)
            .map(([site]) => site)
            .sort()
            .map((site) => ({ ref: refs[i]!, path: ['sites', site, 'subnets'] })),
        ),
        basis: [a.subnet, b.subnet],
      };
    }),
});
