import { accessPortWithoutStormLimit } from '#engine/rules/access-port-without-storm-limit.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const noLimit = (device: string, port: string) => ({
  devices: { [device]: { ports: { [port]: { stormLimitPps: null } } } },
});

testRule(accessPortWithoutStormLimit, {
  accepted: {
    'a limit at every access port': hubDesign(2),
    'a shut port without a limit': changed(pairDesign(), noLimit('sw-s0', 'p2'), {
      devices: { 'sw-s0': { ports: { p2: { shut: true } } } },
    }),
    'a segment that stays at its site': changed(pairDesign(), noLimit('sw-s0', 'p2'), {
      tunnels: { 'tn-s0-s1-a': null },
      forwarders: {
        'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
        'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
      },
    }),
  },
  rejected: {
    'one port without a limit': {
      design: changed(pairDesign(), noLimit('sw-s0', 'p2')),
      findings: [
        {
          sentence: 'One access port of Segment A has no storm limit',
          words: 'no storm limit',
          severity: 'advisory',
          elements: ['segments/a', 'devices/sw-s0/p2'],
          properties: ['devices/sw-s0/p2: stormLimitPps'],
          fixes: ['Add a limit'],
        },
      ],
    },
    'ports at three sites as one fault of the segment': {
      design: changed(
        hubDesign(2, { segments: ['a', 'b'] }),
        noLimit('sw-s0', 'p2'),
        noLimit('sw-s1', 'p2'),
        noLimit('sw-s2', 'p2'),
        noLimit('sw-s2', 'p3'),
      ),
      findings: [
        { sentence: 'Three access ports of Segment A have no storm limit', fixes: ['Add to all three'] },
        { sentence: 'One access port of Segment B has no storm limit', fixes: ['Add a limit'] },
      ],
    },
  },
});
