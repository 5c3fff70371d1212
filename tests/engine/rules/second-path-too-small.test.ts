import type { MergePatch } from '#engine/model/merge-patch.ts';
import { secondPathTooSmall } from '#engine/rules/second-path-too-small.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

/** A second transport, to which the association may turn. */
const backup = (mtu: number | undefined): MergePatch => ({
  transports: {
    radio: { name: 'Radio link', kind: 'internet', trusted: false, ...(mtu === undefined ? {} : { mtu }) },
  },
  devices: Object.fromEntries(
    ['s0', 's1'].map((site) => [`fw-${site}`, { ports: { wan9: { number: 9, role: 'wan' } } }]),
  ),
  links: Object.fromEntries(
    ['s0', 's1'].map((site, i) => [
      `ld-${site}-radio`,
      {
        kind: 'landing',
        device: `fw-${site}`,
        port: 'wan9',
        transport: 'radio',
        ipv4: `203.0.113.${10 + i}`,
      },
    ]),
  ),
  associations: {
    'as-s0-s1': {
      a: { via: { next: { rank: 'z', landing: 'ld-s0-radio' } } },
      b: { via: { next: { rank: 'z', landing: 'ld-s1-radio' } } },
    },
  },
});
const mtu = (value: number): MergePatch => ({ segments: { a: { mtu: value } } });

testRule(secondPathTooSmall, {
  accepted: {
    'one path': pairDesign(),
    'a second path as wide as the first': changed(pairDesign(), backup(1500)),
    'a second path of which no MTU is known': changed(pairDesign(), backup(undefined)),
    'packets that fit both': changed(pairDesign(), backup(1400), mtu(1296)),
    'packets that don’t fit the first either, which is another rule’s': changed(
      pairDesign(),
      backup(1400),
      mtu(1500),
    ),
    'a narrower path that no association may turn to': changed(pairDesign(), backup(1400), {
      associations: { 'as-s0-s1': { a: { via: { next: null } } } },
    }),
  },
  rejected: {
    'a second path that is 100 bytes narrower': {
      design: changed(pairDesign(), backup(1400)),
      findings: [
        {
          sentence: 'tn-s0-s1-a takes 1296 bytes over Radio link, not 1396',
          words: 'second path small',
          severity: 'degrading',
          elements: ['tunnels/tn-s0-s1-a', 'segments/a', 'transports/radio'],
          properties: ['segments/a: mtu'],
          fixes: ['Lower Segment A to 1296'],
        },
      ],
    },
  },
});
