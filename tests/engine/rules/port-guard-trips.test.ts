import type { MergePatch } from '#engine/model/merge-patch.ts';
import { portGuardTrips } from '#engine/rules/port-guard-trips.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const on = { spanningTree: { mode: 'on' } } as const;
const treeAt = (...switches: readonly string[]): MergePatch => ({
  devices: Object.fromEntries(switches.map((id) => [id, { settings: on }])),
});
const at = (device: string, port: string, bpdus: string): MergePatch => ({
  devices: { [device]: { ports: { [port]: { bpdus } } } },
});
const overlayPasses: MergePatch = {
  profiles: { pass: { name: 'Passes', reservedGroups: { '00': 'pass' } } },
  devices: { 'fw-s0': { profile: 'pass' }, 'fw-s1': { profile: 'pass' } },
  forwarders: {
    'br-s0-a': { circuits: { access: { vlans: 'all' } } },
    'br-s1-a': { circuits: { access: { vlans: 'all' } } },
  },
  tunnels: { 'tn-s0-s1-a': { a: { innerTags: 'keep' }, b: { innerTags: 'keep' } } },
};
const joined = changed(pairDesign(), treeAt('sw-s0', 'sw-s1'), overlayPasses);
const secondSwitch: MergePatch = {
  devices: {
    'sw-s0': { settings: on, ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } },
    'sw-x': {
      kind: 'switch',
      site: 's0',
      name: 'sw-x',
      settings: on,
      ports: { p1: { number: 1, name: 'up', role: 'lan', mode: 'trunk' } },
    },
  },
  links: {
    'cb-x': { kind: 'cable', a: { device: 'sw-s0', port: 'p9' }, b: { device: 'sw-x', port: 'p1' } },
  },
};

testRule(portGuardTrips, {
  accepted: {
    'a guard where no BPDU comes': changed(
      pairDesign(),
      treeAt('sw-s0', 'sw-s1'),
      at('sw-s0', 'p1', 'guard'),
    ),
    'a guard at the port of a host': changed(joined, at('sw-s0', 'p2', 'guard')),
    'a guard behind a port that filters BPDUs': changed(
      joined,
      at('sw-s0', 'p1', 'filter'),
      at('sw-s1', 'p1', 'guard'),
    ),
    'root guard away from the root': changed(pairDesign(), secondSwitch, at('sw-s0', 'p9', 'root-guard')),
  },
  rejected: {
    'a guard that faces an overlay which passes BPDUs': {
      design: changed(joined, at('sw-s0', 'p1', 'guard')),
      findings: [
        {
          sentence: 'BPDU guard shuts port 1 of sw-s0: BPDUs of sw-s1 at Gullhaven come in there',
          words: 'guard shuts port',
          severity: 'blocking',
          elements: ['devices/sw-s0/p1', 'devices/sw-s1', 'tunnels/tn-s0-s1-a'],
          properties: ['devices/sw-s0/p1: bpdus'],
          fixes: ['Filter BPDUs there', 'Take the guard off'],
        },
      ],
    },
    'a guard towards another switch of the site': {
      design: changed(pairDesign(), secondSwitch, at('sw-s0', 'p9', 'guard')),
      findings: [
        {
          sentence: 'BPDU guard shuts port 9 of sw-s0: BPDUs of sw-x at Head office come in there',
          elements: ['devices/sw-s0/p9', 'devices/sw-x'],
          fixes: ['Take the guard off'],
        },
      ],
    },
    'root guard where the root is': {
      design: changed(joined, at('sw-s1', 'p1', 'root-guard')),
      findings: [
        {
          sentence: 'Root guard blocks port 1 of sw-s1: sw-s0 at Head office has a better root there',
          words: 'root guard blocks',
          severity: 'degrading',
          fixes: ['Filter BPDUs there', 'Take the guard off'],
        },
      ],
    },
  },
});
