import type { MergePatch } from '#engine/model/merge-patch.ts';
import { dhcpServerAtOneSite } from '#engine/rules/dhcp-server-at-one-site.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const needed: MergePatch = { segments: { a: { protocols: ['ipv4', 'dhcp'] } } };
const dhcp = (site: string, role: 'server' | 'relay'): MergePatch => ({
  forwarders: { [`br-${site}-a`]: { gateway: { dhcp: role } } },
});

testRule(dhcpServerAtOneSite, {
  accepted: {
    'a segment that needs no DHCP': changed(pairDesign(), dhcp('s0', 'server')),
    'a segment of which nobody says who serves it': changed(pairDesign(), needed),
    'a relay beside the server': changed(pairDesign(), needed, dhcp('s0', 'server'), dhcp('s1', 'relay')),
    'a relay alone': changed(pairDesign(), needed, dhcp('s0', 'relay')),
  },
  rejected: {
    'hosts of two sites that depend on one server': {
      design: changed(pairDesign(), needed, dhcp('s0', 'server')),
      findings: [
        {
          sentence: 'DHCP of segment A is served at Head office alone',
          words: 'one DHCP server',
          severity: 'degrading',
          elements: ['forwarders/br-s0-a', 'segments/a'],
          fixes: [],
        },
      ],
    },
  },
});
