import type { DesignBuilder, SegmentPlan, SitePlan } from '#engine/model/design-builder.ts';
import { designBuilder } from '#engine/model/design-builder.ts';
import type { Design } from '#engine/model/design.ts';

/** What all demo designs share: the customer's segments, transports and sites. Everything is invented. */

/**
 * Largest inner IP packet over the coastal access (1,500 bytes, AES-GCM-16 with IPv4 outside and inside, one flow of VXLAN,
 * no NAT on the way), and so what hosts of a stretched segment are set to.
 */
export const segmentMtuBytes = 1396;

export type SegmentId = 'a' | 'b' | 'c';

export const segments: { readonly [id in SegmentId]: SegmentPlan } = {
  a: { letter: 'A', name: 'Ticketing', vlan: 110, subnet: '10.110.0.0/22', mtu: segmentMtuBytes },
  b: {
    letter: 'B',
    name: 'Berth control',
    vlan: 120,
    subnet: '10.120.0.0/24',
    mtu: segmentMtuBytes,
    protocols: ['ipv4', 'multicast'],
  },
  c: { letter: 'C', name: 'CCTV', vlan: 130, subnet: '10.130.0.0/23', mtu: segmentMtuBytes },
};

export const coast: Design['transports'][string] = {
  name: 'Coastal access',
  kind: 'internet',
  trusted: false,
  mtu: 1500,
  latencyUs: 18_000,
  jitterUs: 3_000,
  lossPpm: 200,
  families: [4],
};

/** MTU measured end to end with DF set; large enough for a bare tunnel that carries full 1,500-byte packets. */
export const ring: Design['transports'][string] = {
  name: 'Terminal ring',
  kind: 'own-routed',
  trusted: true,
  mtu: 1600,
  latencyUs: 4_000,
  jitterUs: 1_000,
  lossPpm: 0,
  families: [4],
};

const notes = [
  `UDP 4789 and outer DF set at both ends. Inner IP packets up to ${segmentMtuBytes} B.`,
  'Keys are in the team’s vault under the names given. None is written here.',
  'A stretched segment joins failure domains: a storm or a duplicate address at one site reaches all the others.',
];

/** A builder with the customer's title block, notes, and the named segments. */
export function saltmarshDesign(
  meta: Pick<Design['meta'], 'title' | 'identification' | 'revision' | 'createdBy'>,
  segmentIds: readonly SegmentId[],
): DesignBuilder {
  const builder = designBuilder(meta.title).meta({
    ...meta,
    supplementaryTitle: 'Saltmarsh Ferries',
    legalOwner: 'Ternwick Net',
    documentType: 'L2 overlay design',
    status: 'Draft',
    language: 'en',
    example: true,
  });
  for (const id of segmentIds) builder.segment(id, segments[id]);
  notes.forEach((text, index) => builder.add('notes', `note-${index + 1}`, { text, standing: true }));
  return builder;
}

/** Head office: a pair of firewalls on the coastal access. */
export const headOffice = {
  name: 'Head office',
  gateway: 'ha-pair',
  landings: { coast: { ipv4: '192.0.2.10' } },
  loopbacks: { coast: '10.255.0.1/32' },
} as const satisfies Omit<SitePlan, 'segments'>;

/** Hosts whose ports carry what their segment does: a larger packet would not arrive. */
export function fitHostMtus(design: Design): Design {
  const devices = Object.entries(design.devices).map(([id, device]) => {
    if (device.kind !== 'host') return [id, device] as const;
    const ports = Object.entries(device.ports).map(([port, each]) => [
      port,
      { ...each, mtu: segmentMtuBytes },
    ]);
    return [id, { ...device, ports: Object.fromEntries(ports) as typeof device.ports }] as const;
  });
  return { ...design, devices: Object.fromEntries(devices) };
}
