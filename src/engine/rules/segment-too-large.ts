import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';

// Common practice, no source: beyond some hundreds of hosts broadcasts and outages weigh more than the convenience.
const usualMostHosts = 1000;

export const segmentTooLarge = defineRule({
  id: 'segment-too-large',
  title: 'A stretched segment holds at most a thousand hosts',
  severity: 'advisory',
  looksAt: segmentPathFacts,
  why: 'Every host hears every ARP request of all sites, and every fault reaches all of them. Both grow with each host that joins.',
  seen: 'A steady load of broadcasts in every tunnel, and outages that take down everything at once.',
  sources: [
    { document: 'RFC 6820', clause: 'section 7.1' },
    { document: 'RFC 9161', clause: 'section 1.2' },
  ],
  messages: {
    large: {
      words: 'many hosts',
      sentence: (v: { readonly segment: string; readonly hosts: number }) =>
        `${v.segment} joins ${v.hosts} hosts in one broadcast domain`,
    },
  },
  check: (network) => {
    const stretched = new Set([...tunnelSegments(network).values()].flat());
    return Object.entries(network.design.segments).flatMap(([id, { name, hostsExpected }]) => {
      if (hostsExpected === undefined || hostsExpected <= usualMostHosts || !stretched.has(id)) return [];
      const ref = { collection: 'segments' as const, id };
      return [
        {
          message: 'large',
          values: { segment: name, hosts: hostsExpected },
          elements: [ref],
          properties: [{ ref, path: ['hostsExpected'] }],
          basis: [hostsExpected],
        },
      ];
    });
  },
});
