import { copyIdOf } from '#contract/profiles.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { Profile } from '#engine/model/underlay.ts';

/** What the demo's team measured of three classes of gateway. Invented, as the team is. */
export const demoProfiles = {
  branch: {
    name: 'Small branch gateway',
    basis:
      'R. Halloran, bench, 11 March 2026: two of them back to back through a router at 12 ms, software 7.2, AES-GCM-16 with 256 bits, 1,396-byte packets, ten minutes each.',
    vniScope: 'endpoint',
    plain: { oneFlowBps: 620_000_000, manyFlowsBps: 930_000_000, packetsPerSecond: 110_000 },
    encrypted: { oneFlowBps: 180_000_000, manyFlowsBps: 420_000_000, packetsPerSecond: 45_000 },
    encryption: 'cpu',
    oversizeDf: 'icmp',
    multicastTtl: 'kept',
    macTable: 8_000,
    hmacSha256Bits: 128,
  },
  pair: {
    name: 'Pair of small gateways',
    basis:
      'R. Halloran, bench, 12 March 2026: as the branch gateway, the active member measured; a switch-over in between cost 3.1 s of traffic.',
    vniScope: 'endpoint',
    plain: { oneFlowBps: 1_400_000_000, manyFlowsBps: 3_800_000_000, packetsPerSecond: 420_000 },
    encrypted: { oneFlowBps: 650_000_000, manyFlowsBps: 1_900_000_000, packetsPerSecond: 210_000 },
    encryption: 'offloaded',
    cpuWhen: 'Fragments of the outer packet, and while a packet capture runs on the port.',
    oversizeDf: 'icmp',
    multicastTtl: 'kept',
    reservedGroups: { '00': 'drop', '0e': 'drop' },
    macTable: 32_000,
    hmacSha256Bits: 128,
  },
  virtual: {
    name: 'Virtual gateway, 1 vCPU',
    basis:
      'J. Lindqvist, hypervisor of the workshop, 2 February 2026: one vCPU, 2 GB, nothing else on the host. Not measured on a busy host.',
    vniScope: 'peer',
    plain: { oneFlowBps: 900_000_000, manyFlowsBps: 1_000_000_000, packetsPerSecond: 95_000 },
    encrypted: { oneFlowBps: 210_000_000, manyFlowsBps: 230_000_000, packetsPerSecond: 24_000 },
    encryption: 'cpu',
    oversizeDf: 'silent',
    multicastTtl: 'lowered',
    macTable: 2_000,
  },
} as const satisfies { readonly [name: string]: Profile };

/** The design with copies of these profiles of the workspace, by id: firewalls are branch gateways, HA pairs the pair. */
export function withMeasuredGateways(
  document: Design,
  originals: { readonly branch: string; readonly pair: string },
): Design {
  const [branch, pair] = [copyIdOf(originals.branch), copyIdOf(originals.pair)];
  const copyOfKind: { readonly [kind: string]: string } = { firewall: branch, 'ha-pair': pair };
  const gateways = Object.entries(document.devices).flatMap(([id, { kind }]) => {
    const copy = copyOfKind[kind];
    return copy === undefined ? [] : [[id, { profile: copy }] as const];
  });
  const held = new Set(gateways.map(([, { profile }]) => profile));
  return applyPatch(document, {
    profiles: {
      ...(held.has(branch) ? { [branch]: demoProfiles.branch } : {}),
      ...(held.has(pair) ? { [pair]: demoProfiles.pair } : {}),
    },
    devices: Object.fromEntries(gateways),
  });
}
