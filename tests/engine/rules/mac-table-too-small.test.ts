import type { MergePatch } from '#engine/model/merge-patch.ts';
import { macTableTooSmall } from '#engine/rules/mac-table-too-small.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const two = pairDesign({ segments: ['a', 'b'] });
const table = (macTable: number, ...devices: readonly string[]): MergePatch => ({
  profiles: { small: { name: 'small', macTable } },
  devices: Object.fromEntries(devices.map((id) => [id, { profile: 'small' }])),
});
const hosts = (a: number, b: number): MergePatch => ({
  segments: { a: { hostsExpected: a }, b: { hostsExpected: b } },
});

testRule(macTableTooSmall, {
  accepted: {
    'devices of which no table is known': changed(two, hosts(9000, 9000)),
    'a table that is filled to four fifths': changed(two, hosts(400, 400), table(1000, 'fw-s0')),
    'a small table at a host': changed(two, hosts(400, 400), table(10, 'h-s0-a')),
    'a cross-connect, which learns nothing': changed(two, hosts(900, 1), table(500, 'fw-s0'), {
      forwarders: { 'br-s0-a': { kind: 'cross-connect' } },
    }),
  },
  rejected: {
    'a gateway that serves two segments': {
      design: changed(two, hosts(400, 401), table(1000, 'fw-s0')),
      findings: [
        {
          sentence: 'fw-s0 learns 801 addresses, its table holds 1000',
          words: 'address table small',
          severity: 'degrading',
          elements: ['devices/fw-s0', 'segments/a', 'segments/b'],
          fixes: [],
        },
      ],
    },
    'a switch with fewer places than the hosts that are drawn': {
      design: changed(pairDesign({ hostsPerSite: 3 }), table(4, 'sw-s1')),
      findings: [{ sentence: 'sw-s1 learns 6 addresses, its table holds 4', fixes: [] }],
    },
  },
});
