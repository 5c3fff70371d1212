import type { MergePatch } from '#engine/model/merge-patch.ts';
import { routerAdvertisementsTwice } from '#engine/rules/router-advertisements-twice.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const advertise = (routerAdvertisements: boolean, ...sites: readonly string[]): MergePatch => ({
  forwarders: Object.fromEntries(
    sites.map((site) => [`br-${site}-a`, { gateway: { routerAdvertisements } }]),
  ),
});

testRule(routerAdvertisementsTwice, {
  accepted: {
    'one router that advertises': changed(pairDesign(), advertise(true, 's0'), advertise(false, 's1')),
    'a router of which nothing is known': changed(pairDesign(), advertise(true, 's0'), {
      forwarders: { 'br-s1-a': { gateway: { mtu: 1396 } } },
    }),
  },
  rejected: {
    'routers of two sites': {
      design: changed(pairDesign(), advertise(true, 's0', 's1')),
      findings: [
        {
          sentence: 'Head office and Gullhaven advertise routers on segment A',
          words: 'routers advertise twice',
          severity: 'degrading',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          fixes: ['Only Head office advertises', 'Only Gullhaven advertises'],
        },
      ],
    },
  },
});
