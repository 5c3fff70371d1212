import { describe, expect, it } from 'vitest';
import { classesIn, classesPassed } from '#engine/flood/frame-classes.ts';
import type { Entry } from '#engine/model/design.ts';

type Rule = NonNullable<Entry<'forwarders'>['policy']>[string];
const passed = (rules: readonly Partial<Rule>[], direction: 'to-tunnel' | 'from-tunnel' = 'to-tunnel') =>
  classesIn(
    classesPassed(
      {
        device: 'fw',
        name: 'x',
        kind: 'cross-connect',
        circuits: {},
        policy: Object.fromEntries(
          rules.map((rule, i) => [
            `r${i}`,
            { rank: `a${i}`, action: 'permit', direction: 'both', frames: 'any', ...rule },
          ]),
        ),
      },
      direction,
    ),
  );

describe('classesPassed', () => {
  it('passes everything through a bridge, but multicast where it is told to drop it', () => {
    const bridge = { device: 'fw', name: 'br', kind: 'bridge', circuits: {} } as const;
    expect(classesIn(classesPassed(bridge, 'to-tunnel'))).toEqual(['arp', 'ipv4', 'ipv6', 'other']);
    expect(classesIn(classesPassed({ ...bridge, multicast: 'drop' }, 'to-tunnel'))).toEqual([
      'arp',
      'ipv4',
      'other',
    ]);
  });

  it.each<[string, readonly Partial<Rule>[], readonly string[]]>([
    ['nothing without a policy', [], []],
    ['everything with one rule for any frame', [{}], ['arp', 'ipv4', 'ipv6', 'other']],
    ['what a rule names', [{ frames: 'arp' }], ['arp']],
    ['broadcasts without the multicast of IPv6', [{ frames: 'broadcast' }], ['arp', 'ipv4', 'other']],
    ['the multicast of IPv6', [{ frames: 'multicast' }], ['ipv6']],
    ['an EtherType by its number', [{ frames: 'ethertype', ethertype: 0x0806 }], ['arp']],
    ['another EtherType', [{ frames: 'ethertype', ethertype: 0x88f7 }], ['other']],
    ['the rest after a denial', [{ action: 'deny', frames: 'ipv4' }, {}], ['arp', 'ipv6', 'other']],
    [
      'other frames of a class of which some are denied',
      [{ action: 'deny', frames: 'ipv4', sources: ['10.1.0.0/16'] }, { frames: 'ipv4' }],
      ['ipv4'],
    ],
    ['no broadcast by a rule for one host', [{ frames: 'ipv4', destinations: ['10.1.0.5/32'] }], []],
    ['broadcasts by a rule for all addresses', [{ frames: 'ipv4', destinations: ['0.0.0.0/0'] }], ['ipv4']],
    ['no broadcast by a rule for TCP', [{ frames: 'ipv4', protocol: 6, ports: [443] }], []],
    ['DHCP by a rule for UDP', [{ frames: 'ipv4', protocol: 17, ports: [67, 68] }], ['ipv4']],
    [
      'neighbour discovery by a rule for its group',
      [{ frames: 'ipv6', destinations: ['ff02::/16'] }],
      ['ipv6'],
    ],
  ])('passes %s', (_title, rules, classes) => {
    expect(passed(rules)).toEqual(classes);
  });

  it('passes one way what a rule permits one way', () => {
    const rules = [{ direction: 'to-tunnel' as const }];
    expect(passed(rules, 'to-tunnel')).toHaveLength(4);
    expect(passed(rules, 'from-tunnel')).toEqual([]);
  });
});
