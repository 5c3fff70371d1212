import type { MergePatch } from '#engine/model/merge-patch.ts';
import { gatewayMtusDiffer } from '#engine/rules/gateway-mtus-differ.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const routed: MergePatch = { segments: { a: { protocols: ['ipv4', 'ospf'] } } };
const mtus = (s0: number, s1: number, more: MergePatch = {}): MergePatch => ({
  forwarders: {
    'br-s0-a': { gateway: { mtu: s0, ...(more as object) } },
    'br-s1-a': { gateway: { mtu: s1, ...(more as object) } },
  },
});

testRule(gatewayMtusDiffer, {
  accepted: {
    'equal MTUs': changed(pairDesign(), routed, mtus(1396, 1396)),
    'different MTUs where routers neither meet nor advertise': changed(pairDesign(), mtus(1300, 1396)),
    'one that is too large, which is another rule’s': changed(pairDesign(), routed, mtus(1396, 1500)),
    'one that is not known': changed(pairDesign(), routed, {
      forwarders: {
        'br-s0-a': { gateway: { mtu: 1396 } },
        'br-s1-a': { gateway: { addresses: ['10.110.0.2/16'] } },
      },
    }),
  },
  rejected: {
    'OSPF neighbours with different MTUs': {
      design: changed(pairDesign(), routed, mtus(1300, 1396)),
      findings: [
        {
          sentence: 'Gateways of segment A differ in MTU: 1300 and 1396',
          words: 'MTUs differ',
          severity: 'blocking',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          properties: ['forwarders/br-s0-a: gateway.mtu', 'forwarders/br-s1-a: gateway.mtu'],
          fixes: ['Set all to 1300'],
        },
      ],
    },
    'routers that advertise different MTUs, as a milder fault': {
      design: changed(pairDesign(), mtus(1300, 1396, { routerAdvertisements: true })),
      findings: [
        {
          sentence: 'Routers of segment A advertise MTUs 1300 and 1396',
          severity: 'degrading',
          fixes: ['Set all to 1300'],
        },
      ],
    },
  },
});
