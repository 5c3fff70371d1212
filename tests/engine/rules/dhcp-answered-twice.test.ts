import type { MergePatch } from '#engine/model/merge-patch.ts';
import { dhcpAnsweredTwice } from '#engine/rules/dhcp-answered-twice.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const dhcp = (role: 'none' | 'server' | 'relay', ...sites: readonly string[]): MergePatch => ({
  forwarders: Object.fromEntries(sites.map((site) => [`br-${site}-a`, { gateway: { dhcp: role } }])),
});
const filtered: MergePatch = {
  forwarders: {
    'br-s1-a': {
      kind: 'cross-connect',
      policy: {
        own: { rank: 'a', action: 'deny', direction: 'both', frames: 'ipv4', protocol: 17, ports: [67, 68] },
        rest: { rank: 'b', action: 'permit', direction: 'both', frames: 'any' },
      },
    },
  },
};

testRule(dhcpAnsweredTwice, {
  accepted: {
    'one server for all sites': changed(pairDesign(), dhcp('server', 's0'), dhcp('none', 's1')),
    'a server and a relay': changed(pairDesign(), dhcp('server', 's0'), dhcp('relay', 's1')),
    'a server at each site with a filter between': changed(
      pairDesign(),
      dhcp('server', 's0', 's1'),
      filtered,
    ),
  },
  rejected: {
    'a server at each of two sites': {
      design: changed(pairDesign(), dhcp('server', 's0', 's1')),
      findings: [
        {
          sentence: 'Head office and Gullhaven both serve DHCP on segment A',
          words: 'two DHCP servers',
          severity: 'degrading',
          elements: ['forwarders/br-s0-a', 'forwarders/br-s1-a', 'segments/a'],
          properties: ['forwarders/br-s0-a: gateway.dhcp', 'forwarders/br-s1-a: gateway.dhcp'],
          fixes: ['Only Head office answers', 'Only Gullhaven answers'],
        },
      ],
    },
    'relays at three sites, as a risk': {
      design: changed(hubDesign(2), dhcp('relay', 's0', 's1', 's2')),
      findings: [
        {
          sentence: 'Head office, Gullhaven and Orrin Point all relay DHCP on segment A',
          severity: 'advisory',
          fixes: ['Only Head office answers', 'Only Gullhaven answers', 'Only Orrin Point answers'],
        },
      ],
    },
  },
});
