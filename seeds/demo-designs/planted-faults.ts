import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { rankAtEnd } from '#engine/model/rank.ts';

/** A fault put into the fault-free design on purpose, and the check that has to find it. */
export interface PlantedFault {
  readonly rule: string;
  /** Where it was put and what was done there. */
  readonly what: string;
  readonly patch: (design: Design) => MergePatch;
}

const vlanBerthControl = 120;

export const plantedFaults: readonly PlantedFault[] = [
  {
    rule: 'tunnel-vni-mismatch',
    what: 'Gullhaven’s end of the berth-control tunnel has two digits of its VNI swapped',
    patch: () => ({ tunnels: { 'tn-ho-gul-b': { b: { vni: 10_210 } } } }),
  },
  {
    rule: 'storm-any-to-any-mesh',
    what: 'a third ticketing tunnel, over the ring, joins Orrin Point and Skerry, which meet at the head office already',
    patch: (design) => {
      const tunnel = 'tn-orr-ske-a-ring';
      const circuit = (forwarder: string) => ({
        circuits: {
          [tunnel]: { kind: 'tunnel', rank: rankAtEnd(design.forwarders[forwarder]!.circuits), tunnel },
        },
      });
      const bare = design.tunnels['tn-orr-ske-c-ring']!;
      return {
        tunnels: {
          [tunnel]: {
            ...bare,
            name: tunnel,
            a: { ...bare.a, vni: 10_113 },
            b: { ...bare.b, vni: 10_113 },
          },
        },
        forwarders: { 'br-orr-a': circuit('br-orr-a'), 'br-ske-a': circuit('br-ske-a') },
      } as unknown as MergePatch;
    },
  },
  {
    rule: 'host-single-homed',
    what: 'the recorder vms-1 hangs on one member of the head office’s pair instead of on the switch',
    patch: (design) => ({
      devices: { 'fw-ho': { ports: { lan2: { mode: 'access', vlan: null } } } },
      links: { 'cb-vms-1': { b: { device: 'fw-ho', port: 'lan2', member: 1 } } },
      forwarders: {
        'br-ho-c': {
          circuits: {
            recorder: {
              kind: 'port',
              rank: rankAtEnd(design.forwarders['br-ho-c']!.circuits),
              port: 'lan2',
              vlans: 'untagged',
            },
          },
        },
      },
    }),
  },
  {
    rule: 'frame-exceeds-path',
    what: 'berth control was promised full-size packets of 1,500 bytes',
    patch: () => ({ segments: { b: { mtu: 1500 } } }),
  },
  {
    rule: 'association-liveness-one-sided',
    what: 'Skerry does not check that the head office is alive',
    patch: () => ({ associations: { 'as-ho-ske': { b: { liveness: 'off' } } } }),
  },
  {
    rule: 'weak-algorithm',
    what: 'the association with Skerry is keyed over a 1,024-bit group',
    patch: () => ({
      associations: {
        'as-ho-ske': {
          a: { ikeProposals: { first: { group: 2 } } },
          b: { ikeProposals: { first: { group: 2 } } },
        },
      },
    }),
  },
  {
    rule: 'endpoint-address-duplicate',
    what: 'a spare loopback at Gullhaven has Orrin Point’s address',
    patch: () => ({
      endpoints: { 'lo-gul-spare': { device: 'fw-gul', name: 'lo-gul-spare', ipv4: '10.255.0.12/32' } },
      layout: { endpoints: { 'lo-gul-spare': { side: 'right' } } },
    }),
  },
  {
    rule: 'pair-without-state-sync',
    what: 'the members of the head office’s pair do not share the state of their associations',
    patch: () => ({ devices: { 'fw-ho': { stateSync: false } } }),
  },
  {
    rule: 'vlan-missing-on-path',
    what: 'the uplink of Orrin Point’s switch does not let berth control’s VLAN through',
    patch: (design) => {
      const { allowedVlans } = design.devices['sw-orr']!.ports['p1']!;
      if (!Array.isArray(allowedVlans)) throw new Error('the uplink of sw-orr lists no VLANs');
      return {
        devices: {
          'sw-orr': {
            ports: { p1: { allowedVlans: allowedVlans.filter((vlan) => vlan !== vlanBerthControl) } },
          },
        },
      };
    },
  },
  {
    rule: 'cross-connect-without-policy',
    what: 'berth control at Gullhaven goes through a cross-connect that has no policy, and so drops everything',
    patch: () => ({ forwarders: { 'br-gul-b': { kind: 'cross-connect' } } }),
  },
  {
    rule: 'tunnel-udp-port-mismatch',
    what: 'Skerry’s end of the CCTV tunnel over the ring sends to another UDP port than Orrin Point listens on',
    patch: () => ({ tunnels: { 'tn-orr-ske-c-ring': { b: { udpPort: 8472 } } } }),
  },
  {
    rule: 'access-port-without-storm-limit',
    what: 'the ticketing kiosk at Gullhaven has a port without a limit on broadcasts',
    patch: () => ({ devices: { 'sw-gul': { ports: { p2: { stormLimitPps: null } } } } }),
  },
];

/** The design with all faults in it. */
export function plantFaults(design: Design): Design {
  return plantedFaults.reduce((planted, fault) => applyPatch(planted, fault.patch(planted)), design);
}
