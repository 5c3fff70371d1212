import { portHoldsTwoCables } from '#engine/rules/port-holds-two-cables.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const cable = (a: string, aPort: string, b: string, bPort: string) => ({
  kind: 'cable' as const,
  a: { device: a, port: aPort },
  b: { device: b, port: bPort },
});

testRule(portHoldsTwoCables, {
  accepted: {
    'a cable for each port': pairDesign({ hostsPerSite: 3 }),
    'the ports of one number on both members of a pair': hubDesign(1, { hub: 'ha-pair' }),
    'two transports over one line': changed(pairDesign(), {
      transports: { other: { name: 'Other', kind: 'internet', mtu: 1500 } },
      links: {
        'ld-s0-other': {
          kind: 'landing',
          device: 'fw-s0',
          port: 'wan1',
          transport: 'other',
          ipv4: '203.0.113.9',
        },
      },
    }),
  },
  rejected: {
    'two hosts in one switch port, and offers a port like it': {
      design: changed(pairDesign({ hostsPerSite: 2 }), {
        links: { 'cb-h-s0-a1': { b: { port: 'p2' } } },
      }),
      findings: [
        {
          sentence: 'Port 2 of sw-s0 holds two cables',
          words: 'port taken twice',
          severity: 'blocking',
          elements: ['devices/sw-s0/p2', 'links/cb-h-s0-a', 'links/cb-h-s0-a1'],
          fixes: ['Move one to port 3'],
        },
      ],
    },
    'two cables where only a port without settings is free': {
      design: changed(pairDesign({ hostsPerSite: 2 }), {
        links: { 'cb-h-s0-a1': { b: { port: 'p2' } } },
        devices: { 'sw-s0': { ports: { p3: null, p9: { number: 9, role: 'lan', stormLimitPps: 500 } } } },
      }),
      findings: [{ sentence: 'Port 2 of sw-s0 holds two cables', fixes: ['Move one to port 9'] }],
    },
    'a cable in a WAN port beside its transport': {
      design: changed(pairDesign(), {
        links: { 'cb-extra': cable('fw-s0', 'wan1', 'fw-s1', 'lan2') },
      }),
      findings: [
        {
          sentence: 'Port wan1 of fw-s0 holds one cable beside its transport',
          elements: ['devices/fw-s0/wan1', 'links/cb-extra', 'links/ld-s0-coast'],
          fixes: [],
        },
      ],
    },
    'two cables in the port of one member': {
      design: changed(hubDesign(1, { hub: 'ha-pair' }), { links: { 'cb-s0-up2': { b: { member: 1 } } } }),
      findings: [
        {
          sentence: 'Port lan1 of fw-s0-1 holds two cables',
          elements: ['devices/fw-s0/lan1/1', 'links/cb-s0-up1', 'links/cb-s0-up2'],
          fixes: ['Move one to lan2'],
        },
      ],
    },
  },
});
