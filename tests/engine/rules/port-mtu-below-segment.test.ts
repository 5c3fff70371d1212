import type { MergePatch } from '#engine/model/merge-patch.ts';
import { portMtuBelowSegment } from '#engine/rules/port-mtu-below-segment.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const portMtu = (device: string, port: string, mtu: number): MergePatch => ({
  devices: { [device]: { ports: { [port]: { mtu } } } },
});

testRule(portMtuBelowSegment, {
  accepted: {
    'ports that are large enough': pairDesign(),
    'a port that fits to the byte': changed(pairDesign(), portMtu('sw-s0', 'p1', 1396)),
    'a host’s own small port': changed(pairDesign(), portMtu('h-s0-a', 'p1', 1280)),
    'a small port that the segment doesn’t cross': changed(
      pairDesign({ segments: ['a', 'b'] }),
      portMtu('sw-s0', 'p3', 1300),
      { segments: { b: { mtu: 1300 } } },
    ),
    'a small WAN port, which counts with its tunnels': changed(pairDesign(), portMtu('fw-s0', 'wan1', 1380)),
  },
  rejected: {
    'a small uplink': {
      design: changed(pairDesign(), portMtu('sw-s0', 'p1', 1300)),
      findings: [
        {
          sentence: 'Port 1 of sw-s0 takes 1300 bytes, segment A needs 1396',
          words: 'port MTU small',
          severity: 'degrading',
          elements: ['devices/sw-s0/p1', 'segments/a'],
          properties: ['devices/sw-s0/p1: mtu'],
          fixes: ['Raise it to 1396'],
        },
      ],
    },
    'small ports at both ends of a cable, as one fault': {
      design: changed(pairDesign(), portMtu('sw-s0', 'p1', 1300), portMtu('fw-s0', 'lan1', 1300)),
      findings: [
        {
          sentence: 'Two ports of segment A take less than 1396 bytes',
          elements: ['devices/fw-s0/lan1', 'devices/sw-s0/p1', 'segments/a'],
          fixes: ['Raise two ports to 1396'],
        },
      ],
    },
  },
});
