import fc from 'fast-check';
import ipaddr from 'ipaddr.js';
import { describe, expect, it } from 'vitest';
import { indexNetwork } from '#engine/network/index-network.ts';
import { segmentSubnetOf } from '#engine/rules/endpoint-addresses.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed } from '../../support/rule-tester.ts';

const octet = fc.nat(3).map((n) => [0, 1, 128, 255][n]!);
const address = fc.tuple(octet, octet, octet, octet).map((octets) => octets.join('.'));

describe('segmentSubnetOf', () => {
  it('names the narrowest subnet that holds an address, as a look at each subnet would', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(address, fc.nat(32)), { minLength: 1, maxLength: 8 }),
        address,
        (prefixes, single) => {
          const subnets = prefixes.map(([base, length]) => `${base}/${length}`);
          const network = indexNetwork(
            changed(pairDesign(), { segments: { a: { sites: { s0: { subnets }, s1: { subnets: [] } } } } }),
          );
          const longest = subnets
            .filter((subnet) => ipaddr.parse(single).match(ipaddr.parseCIDR(subnet)))
            .map((subnet) => ipaddr.parseCIDR(subnet)[1])
            .reduce((most, length) => Math.max(most, length), -1);
          const found = segmentSubnetOf(network, single);
          expect(found === undefined ? -1 : ipaddr.parseCIDR(found.subnet)[1]).toBe(longest);
        },
      ),
      { numRuns: 60 },
    );
  });

  it('does not take IPv6 for IPv4', () => {
    const network = indexNetwork(
      changed(pairDesign(), {
        segments: { a: { sites: { s0: { subnets: ['::/0'] }, s1: { subnets: [] } } } },
      }),
    );
    expect(segmentSubnetOf(network, '10.0.0.1/32')).toBeUndefined();
    expect(segmentSubnetOf(network, '2001:db8::1/128')).toEqual({ subnet: '::/0', segment: 'a' });
  });
});
