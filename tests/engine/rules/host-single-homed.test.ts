import type { MergePatch } from '#engine/model/merge-patch.ts';
import { hostSingleHomed } from '#engine/rules/host-single-homed.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });
const access = (number: number, more: MergePatch = {}) => ({ number, role: 'lan', mode: 'access', ...more });
/** A second host of the segment, in lan2 of one member; the forwarder takes it untagged. */
const inMember = (member: 1 | 2, more: MergePatch = {}) =>
  changed(
    pair,
    {
      devices: {
        'rec-2': {
          kind: 'host',
          site: 's0',
          name: 'rec-2',
          segment: 'a',
          ports: { p1: { number: 1, role: 'lan' } },
        },
        'fw-s0': { ports: { lan2: { mode: 'access', vlan: 110 } } },
      },
      links: {
        'cb-rec': {
          kind: 'cable',
          a: { device: 'rec-2', port: 'p1' },
          b: { device: 'fw-s0', port: 'lan2', member },
        },
      },
      forwarders: {
        'br-s0-a': { circuits: { recorder: { kind: 'port', rank: 'z', port: 'lan2', vlans: 'untagged' } } },
      },
    } as MergePatch,
    more,
  );
const freePort = (more: MergePatch = {}): MergePatch => ({
  devices: { 'sw-s0': { ports: { p9: access(9, more) } } },
});

testRule(hostSingleHomed, {
  accepted: {
    'hosts behind a switch that reaches both members': pair,
    'a host on a single gateway': pairDesign(),
    'a host with a cable to each member': inMember(1, {
      devices: { 'rec-2': { ports: { p2: { number: 2, role: 'lan' } } } },
      links: {
        'cb-rec2': {
          kind: 'cable',
          a: { device: 'rec-2', port: 'p2' },
          b: { device: 'fw-s0', port: 'lan2', member: 2 },
        },
      },
    }),
    'a host whose second cable leads to the switch': inMember(1, {
      devices: {
        'rec-2': { ports: { p2: { number: 2, role: 'lan' } } },
        'sw-s0': { ports: { p9: access(9, { vlan: 110 }) } },
      },
      links: {
        'cb-rec2': {
          kind: 'cable',
          a: { device: 'rec-2', port: 'p2' },
          b: { device: 'sw-s0', port: 'p9' },
        },
      },
    }),
    'a host in a port that carries no segment': inMember(1, {
      forwarders: { 'br-s0-a': { circuits: { recorder: null } } },
    }),
  },
  rejected: {
    'a host in the active member, where the switch has a free port for it': {
      design: inMember(1, freePort({ vlan: 110 })),
      findings: [
        {
          sentence: 'rec-2 is wired to fw-s0-1 alone, not to fw-s0-2',
          words: 'one member only',
          severity: 'blocking',
          elements: ['links/cb-rec', 'devices/rec-2', 'devices/fw-s0'],
          properties: ['links/cb-rec: b'],
          mark: {
            kind: 'ghost',
            from: { device: 'rec-2', port: 'p1' },
            to: { device: 'sw-s0', port: 'p9' },
            label: 'port 9 of sw-s0',
          },
          fixes: ['Move it to sw-s0'],
        },
      ],
    },
    'one in the standby member, whose port on the switch must be set up': {
      design: inMember(2, freePort({ mode: 'trunk', nativeVlan: 1, allowedVlans: 'all' })),
      findings: [
        {
          sentence: 'rec-2 is wired to fw-s0-2 alone, which stands by',
          words: 'wired to standby',
          fixes: ['Move it to sw-s0'],
        },
      ],
    },
    'one with no free port anywhere': {
      design: inMember(1),
      findings: [{ sentence: 'rec-2 is wired to fw-s0-1 alone, not to fw-s0-2', fixes: [] }],
    },
  },
});
