import type { MergePatch } from '#engine/model/merge-patch.ts';
import { switchSingleHomed } from '#engine/rules/switch-single-homed.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });
const trunk = (number: number, more: MergePatch = {}) => ({
  number,
  role: 'lan',
  mode: 'trunk',
  allowedVlans: [110],
  ...more,
});
const wiredTo = (members: readonly (1 | 2)[], ...more: readonly MergePatch[]) =>
  changed(
    pair,
    {
      links: Object.fromEntries(
        ([1, 2] as const).filter((m) => !members.includes(m)).map((m) => [`cb-s0-up${m}`, null]),
      ),
    },
    ...more,
  );
const hall = (links: MergePatch): MergePatch =>
  ({
    devices: {
      'sw-s0': { ports: { p8: trunk(8) } },
      'sw-hall': { kind: 'switch', site: 's0', name: 'sw-hall', ports: { p1: trunk(1), p2: trunk(2) } },
    },
    links: {
      'cb-hall': { kind: 'cable', a: { device: 'sw-hall', port: 'p1' }, b: { device: 'sw-s0', port: 'p8' } },
      ...links,
    },
  }) as MergePatch;

testRule(switchSingleHomed, {
  accepted: {
    'an uplink to each member': pair,
    'a single gateway': pairDesign(),
    'a switch behind one that has both uplinks': wiredTo([1, 2], hall({})),
    'two switches with an uplink each and a cable between them': wiredTo(
      [1],
      hall({
        'cb-hall-2': {
          kind: 'cable',
          a: { device: 'sw-hall', port: 'p2' },
          b: { device: 'fw-s0', port: 'lan1', member: 2 },
        },
      }),
    ),
    'an uplink to a port that carries no segment': wiredTo([1], {
      forwarders: { 'br-s0-a': { circuits: { access: { port: 'lan2' } } } },
    }),
  },
  rejected: {
    'an uplink to the active member alone': {
      design: wiredTo([1]),
      findings: [
        {
          sentence: 'sw-s0 is wired to fw-s0-1 alone, not to fw-s0-2',
          words: 'one member only',
          severity: 'blocking',
          elements: ['links/cb-s0-up1', 'devices/sw-s0', 'devices/fw-s0'],
          mark: {
            kind: 'ghost',
            from: { device: 'sw-s0', port: 'p2' },
            to: { device: 'fw-s0', port: 'lan1', member: 2 },
            label: 'lan1 of fw-s0-2',
          },
          fixes: ['Add an uplink to fw-s0-2'],
        },
      ],
    },
    'an uplink to the standby member alone, with a port that must be set up': {
      design: wiredTo([2], {
        devices: { 'sw-s0': { ports: { p1: { mode: 'access', vlan: 7, allowedVlans: null } } } },
      }),
      findings: [
        {
          sentence: 'sw-s0 is wired to fw-s0-2 alone, which stands by',
          words: 'wired to standby',
          fixes: ['Add an uplink to fw-s0-1'],
        },
      ],
    },
    'one finding for switches that share the uplink, none offered where the other member’s port is taken': {
      design: wiredTo([1], hall({}), {
        devices: {
          spare: { kind: 'host', site: 's0', name: 'spare', ports: { p1: { number: 1, role: 'lan' } } },
        },
        links: {
          'cb-spare': {
            kind: 'cable',
            a: { device: 'spare', port: 'p1' },
            b: { device: 'fw-s0', port: 'lan1', member: 2 },
          },
        },
      }),
      findings: [{ sentence: 'sw-s0 is wired to fw-s0-1 alone, not to fw-s0-2', fixes: [] }],
    },
  },
});
