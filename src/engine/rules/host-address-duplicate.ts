import type { Device } from '../network/network.ts';
import { perObject } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { plainAddress } from './endpoint-addresses.ts';
import { counted, listed, sentenceCase } from './wording.ts';

/** A host's addresses, each in one spelling. */
const addressesOf = perObject(
  (device: Device): ReadonlySet<string> =>
    new Set(device.kind === 'host' ? (device.addresses ?? []).map(plainAddress) : []),
);

export const hostAddressDuplicate = defineRule({
  id: 'host-address-duplicate',
  title: 'No two hosts of a segment have one address',
  severity: 'blocking',
  looksAt: ['hosts', 'addressing'],
  why: 'As long as the sites were apart both could have it. Once the segment is stretched, both answer for the address and each neighbour believes whoever answered last.',
  seen: 'Both hosts report that their address is in use; connections to either break off at random. Make an inventory and renumber before stretching.',
  sources: [{ document: 'RFC 5227', clause: 'section 2.4' }],
  messages: {
    twice: {
      words: 'address used twice',
      sentence: (v: { readonly hosts: string; readonly address: string; readonly segment: string }) =>
        `${v.hosts} have ${v.address} in segment ${v.segment}`,
    },
  },
  check: ({ design, hostsBySegment }) =>
    [...hostsBySegment].flatMap(([segment, hosts]) => {
      const owners = new Map<string, string[]>();
      for (const id of hosts) {
        for (const address of addressesOf(design.devices[id]!)) {
          const known = owners.get(address);
          if (known === undefined) owners.set(address, [id]);
          else known.push(id);
        }
      }
      return [...owners].flatMap(([address, ids]) => {
        if (ids.length < 2) return [];
        const refs = ids.map((id) => ({ collection: 'devices' as const, id }));
        return [
          {
            message: 'twice',
            values: {
              hosts:
                ids.length > 2
                  ? sentenceCase(counted(ids.length, 'host', 'hosts'))
                  : listed(ids.map((id) => design.devices[id]!.name)),
              address,
              segment: design.segments[segment]!.letter,
            },
            elements: refs,
            identity: [segment, address],
            properties: refs.map((ref) => ({ ref, path: ['addresses'] })),
            basis: ids,
          },
        ];
      });
    }),
});
