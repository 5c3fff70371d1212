import type { MergePatch } from '#engine/model/merge-patch.ts';
import { limitOverloaded } from '#engine/rules/limit-overloaded.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const demand = (forwardBps: number, packetBytes = 1396): MergePatch => ({
  demands: {
    copy: {
      name: 'Nightly copy',
      segment: 'a',
      from: { host: 'h-s1-a' },
      to: { host: 'h-s0-a' },
      forwardBps,
      reverseBps: 1000,
      mix: [{ packetBytes, weight: 1 }],
      flows: 1,
    },
  },
});
const uplink = (rateUpBps: number): MergePatch => ({ links: { 'ld-s1-coast': { rateUpBps } } });
const profile = (encrypted: MergePatch): MergePatch => ({
  profiles: { small: { name: 'small', encrypted } },
  devices: { 'fw-s1': { profile: 'small' } },
});

testRule(limitOverloaded, {
  accepted: {
    'a design without demands': changed(pairDesign(), uplink(1000)),
    'a demand with room to spare': changed(pairDesign(), demand(50_000_000), uplink(100_000_000)),
    'a line of which no rate is known': changed(pairDesign(), demand(800_000_000)),
    // 1,396 bytes inside are 1,500 outside: RFC 7348 section 5 and RFC 4303 section 2.
    'a line that is filled to the last bit': changed(pairDesign(), demand(139_600_000), uplink(150_000_000)),
  },
  rejected: {
    'a line that is large enough only before VXLAN and IPsec': {
      design: changed(pairDesign(), demand(139_600_000), uplink(149_999_000)),
      findings: [
        {
          sentence: 'Coastal access at Gullhaven must carry 150 Mbit/s, takes 149.999 Mbit/s',
          words: 'not enough room',
          severity: 'degrading',
          elements: ['links/ld-s1-coast', 'demands/copy'],
          fixes: [],
        },
      ],
    },
    // 10,000 packets of 800 bits one way, and at most two the other way.
    'a gateway that encrypts fewer packets than small ones make': {
      design: changed(pairDesign(), demand(8_000_000, 100), profile({ packetsPerSecond: 9000 })),
      findings: [
        {
          sentence: 'fw-s1 must encrypt 10002 packets/s, takes 9000 packets/s',
          elements: ['devices/fw-s1', 'demands/copy'],
          fixes: [],
        },
      ],
    },
    'a gateway that does less for one flow': {
      design: changed(pairDesign(), demand(30_000_000), profile({ oneFlowBps: 20_000_000 })),
      findings: [
        {
          sentence: 'fw-s1 must encrypt 30 Mbit/s in one flow, takes 20 Mbit/s',
          elements: ['devices/fw-s1', 'demands/copy'],
          fixes: [],
        },
      ],
    },
  },
});
