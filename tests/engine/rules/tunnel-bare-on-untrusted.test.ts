import { tunnelBareOnUntrusted } from '#engine/rules/tunnel-bare-on-untrusted.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';
const bare = pairDesign({ join: { protectedBy: false } });
const finding = {
  sentence: 'tn-s0-s1-a runs outside IPsec over Coastal access',
  words: 'not protected',
  severity: 'blocking',
  elements: [`tunnels/${id}`, 'transports/coast'],
  properties: [`tunnels/${id}: association`],
} as const;

testRule(tunnelBareOnUntrusted, {
  accepted: {
    'a tunnel inside IPsec': pairDesign(),
    'a bare tunnel over a transport stated to be trusted': changed(bare, {
      transports: { coast: { trusted: true } },
    }),
    'a bare tunnel over one’s own transport': changed(bare, {
      transports: { coast: { kind: 'own-routed', trusted: null } },
    }),
  },
  rejected: {
    'a bare tunnel over the internet, and offers an association': {
      design: bare,
      findings: [{ ...finding, fixes: ['Protect it with IPsec'] }],
    },
    'a bare tunnel over somebody else’s network of unstated trust': {
      design: changed(bare, { transports: { coast: { kind: 'private-routed', trusted: null } } }),
      findings: [{ ...finding, fixes: ['Protect it with IPsec'] }],
    },
    'a bare tunnel beside an association, and offers that first': {
      design: changed(pairDesign(), { tunnels: { [id]: { association: null } } }),
      findings: [{ ...finding, fixes: ['Put it inside as-s0-s1', 'Protect it with IPsec'] }],
    },
    'a bare tunnel to an end behind NAT, which then has to start': {
      design: changed(bare, {
        links: { 'ld-s1-coast': { nat: {} } },
        segments: { a: { mtu: 1380 } },
      }),
      findings: [{ ...finding, fixes: ['Protect it with IPsec'] }],
    },
    'a bare tunnel, but offers nothing where packets would no longer fit': {
      design: changed(bare, { segments: { a: { mtu: 1450 } } }),
      findings: [{ ...finding, fixes: [] }],
    },
  },
});
