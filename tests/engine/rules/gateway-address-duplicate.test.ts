import type { MergePatch } from '#engine/model/merge-patch.ts';
import { gatewayAddressDuplicate } from '#engine/rules/gateway-address-duplicate.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const gateway = (forwarder: string, ...addresses: readonly string[]): MergePatch => ({
  forwarders: { [forwarder]: { gateway: { addresses: [...addresses] } } },
});
const first = gateway('br-s0-a', '10.110.0.1/16', '2001:db8:110::1/64');

testRule(gatewayAddressDuplicate, {
  accepted: {
    'a segment without gateways': pairDesign(),
    'one gateway': changed(pairDesign(), first),
    'gateways with an address each': changed(pairDesign(), first, gateway('br-s1-a', '10.110.0.2/16')),
    'one address on two segments': changed(
      pairDesign({ segments: ['a', 'b'] }),
      first,
      gateway('br-s1-b', '10.110.0.1/16'),
    ),
  },
  rejected: {
    'two gateways with one address, however it is written': {
      design: changed(pairDesign(), first, gateway('br-s1-a', '10.110.0.2/16', '2001:db8:110:0::1/64')),
      findings: [
        {
          sentence: 'Head office and Gullhaven share gateway address 2001:db8:110:0:0:0:0:1',
          words: 'gateway address twice',
          severity: 'blocking',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          properties: ['forwarders/br-s0-a: gateway.addresses', 'forwarders/br-s1-a: gateway.addresses'],
          fixes: ['Leave it to Head office', 'Leave it to Gullhaven'],
        },
      ],
    },
    'a host that has the gateway’s address': {
      design: changed(pairDesign(), first, { devices: { 'h-s1-a': { addresses: ['10.110.0.1/16'] } } }),
      findings: [
        {
          sentence: 'h-s1-a has the gateway’s address 10.110.0.1',
          elements: ['forwarders/br-s0-a', 'devices/h-s1-a', 'segments/a'],
          fixes: [],
        },
      ],
    },
  },
});
