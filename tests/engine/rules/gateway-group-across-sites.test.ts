import type { MergePatch } from '#engine/model/merge-patch.ts';
import { gatewayGroupAcrossSites } from '#engine/rules/gateway-group-across-sites.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const member = (forwarder: string, group: number, address?: string): MergePatch => ({
  forwarders: {
    [forwarder]: { gateway: { redundancy: { group, ...(address === undefined ? {} : { address }) } } },
  },
});

testRule(gatewayGroupAcrossSites, {
  accepted: {
    'a group at one site': changed(pairDesign(), member('br-s0-a', 10)),
    'a group of its own at each site': changed(pairDesign(), member('br-s0-a', 10), member('br-s1-a', 20)),
    'one number for two addresses, which are two groups': changed(
      pairDesign(),
      member('br-s0-a', 10, '10.110.0.1'),
      member('br-s1-a', 10, '10.110.1.1'),
    ),
  },
  rejected: {
    'a group with a member at each site': {
      design: changed(pairDesign(), member('br-s0-a', 10, '10.110.0.1'), member('br-s1-a', 10)),
      findings: [
        {
          sentence: 'Gateway group 10 of segment A spans Head office and Gullhaven',
          words: 'group across sites',
          severity: 'degrading',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          fixes: [],
        },
      ],
    },
  },
});
