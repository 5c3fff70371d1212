import type { MergePatch } from '#engine/model/merge-patch.ts';
import { stormLocal } from '#engine/rules/storm-local.ts';
import { meshDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const port = (number: number, more: MergePatch = {}) => ({
  number,
  role: 'lan',
  mode: 'trunk',
  allowedVlans: [110],
  ...more,
});
const doubled = (more: MergePatch = {}): MergePatch => ({
  devices: {
    'sw-s0': { ports: { p7: port(7, more), p8: port(8, more) } },
    'sw-hall': {
      kind: 'switch',
      site: 's0',
      name: 'sw-hall',
      ports: { p1: port(1, more), p2: port(2, more) },
    },
  },
  links: {
    'cb-x1': { kind: 'cable', a: { device: 'sw-s0', port: 'p7' }, b: { device: 'sw-hall', port: 'p1' } },
    'cb-x2': { kind: 'cable', a: { device: 'sw-s0', port: 'p8' }, b: { device: 'sw-hall', port: 'p2' } },
  },
});
const tree: MergePatch = { settings: { spanningTree: { mode: 'on' } } };
const pair = pairDesign({ hub: 'ha-pair' });
const second = pair.tunnels['tn-s0-s1-a']!;
/** Each member of the pair has an endpoint and a tunnel of its own. */
const perMember = changed(pair, {
  devices: { 'fw-s0': { mode: 'active-active' } },
  endpoints: {
    'lo-s0': { member: 1 },
    'lo-s0-2': { device: 'fw-s0', member: 2, name: 'lo-s0-2', ipv4: '10.255.0.9/32' },
  },
  tunnels: {
    second: {
      name: 'second',
      a: { ...second.a, endpoint: 'lo-s0-2', vni: 9_001 },
      b: { ...second.b, vni: 9_001 },
      association: 'as-s0-s1',
    },
  },
  associations: {
    'as-s0-s1': {
      a: { selectors: { loopbacks: { local: '10.255.0.0/24' } } },
      b: { selectors: { loopbacks: { remote: '10.255.0.0/24' } } },
    },
  },
  forwarders: {
    'br-s0-a': { circuits: { second: { kind: 'tunnel', rank: 'b5', tunnel: 'second' } } },
    'br-s1-a': { circuits: { second: { kind: 'tunnel', rank: 'b5', tunnel: 'second' } } },
  },
} as MergePatch);

testRule(stormLocal, {
  accepted: {
    'a switch on both members of a pair, one of which stands by': pair,
    'two cables that are one aggregate': changed(pairDesign(), doubled({ aggregation: 'lag1' })),
    'two cables under spanning tree': changed(pairDesign(), doubled(), {
      devices: { 'sw-s0': tree, 'sw-hall': tree },
    }),
    'a mesh of tunnels, which is another rule’s': meshDesign(3),
  },
  rejected: {
    'two cables between two switches': {
      design: changed(pairDesign(), doubled()),
      findings: [
        {
          sentence: 'Two cables at Head office form a loop of segment A',
          words: 'broadcast storm',
          severity: 'blocking',
          elements: ['links/cb-x1', 'links/cb-x2'],
          properties: [
            'devices/sw-hall: settings.spanningTree.mode',
            'devices/sw-s0: settings.spanningTree.mode',
          ],
          mark: {
            kind: 'loop',
            steps: [
              { collection: 'links', id: 'cb-x2', direction: 'b-to-a', vlan: 110 },
              { collection: 'links', id: 'cb-x1', direction: 'a-to-b', vlan: 110 },
            ],
          },
          fixes: ['Turn on spanning tree', 'Remove the cable sw-s0 port 8 – sw-hall port 2'],
        },
      ],
    },
    'a cable from a switch to itself': {
      design: changed(pairDesign(), {
        devices: { 'sw-s0': { ports: { p7: port(7), p8: port(8) } } },
        links: {
          'cb-own': {
            kind: 'cable',
            name: 'patch 4',
            a: { device: 'sw-s0', port: 'p7' },
            b: { device: 'sw-s0', port: 'p8' },
          },
        },
      }),
      findings: [
        {
          sentence: 'A cable at Head office forms a loop of segment A',
          fixes: ['Turn on spanning tree', 'Remove patch 4'],
        },
      ],
    },
    'a pair of which both members bridge, each with its own tunnel': {
      design: perMember,
      findings: [
        {
          sentence: 'Two gateways at Head office both bridge frames of segment A',
          elements: ['tunnels/second', 'tunnels/tn-s0-s1-a', 'links/cb-s0-up1', 'links/cb-s0-up2'],
          fixes: ['Let one member stand by'],
        },
      ],
    },
  },
});
