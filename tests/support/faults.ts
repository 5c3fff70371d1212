import type { MergePatch } from '#engine/model/merge-patch.ts';

const association = (patch: MergePatch): MergePatch => ({ associations: { 'as-s0-s1': patch } });
const tunnel = (patch: MergePatch): MergePatch => ({ tunnels: { 'tn-s0-s1-a': patch } });

/** Edits of a pair of sites with segments a and b in every collection that a check looks at, most of them faults. */
export const faults: readonly MergePatch[] = [
  tunnel({ b: { vni: 777 } }),
  tunnel({ a: { vni: null } }),
  tunnel({ a: { udpPort: 8472 } }),
  tunnel({ association: null }),
  tunnel({ family: 6 }),
  tunnel({ a: { innerTags: 'keep' } }),
  association({ a: { start: 'answers' } }),
  association({ b: { liveness: 'off' } }),
  association({ b: { ikeVersion: 1 } }),
  association({ a: { authentication: { method: 'certificate', vaultEntry: null } } }),
  association({ b: { espProposals: { first: { encryption: 'aes-cbc', integrity: 'hmac-sha1-96' } } } }),
  association({ a: { ikeProposals: { first: { group: 2 } } } }),
  association({ a: { selectors: { loopbacks: { local: '10.99.0.0/24' } } } }),
  { endpoints: { 'lo-s1': { ipv4: '10.255.0.1/32' } } },
  { endpoints: { 'lo-s1': { ipv4: '10.110.3.3/32' } } },
  { endpoints: { 'lo-s1': { ipv4: null, ipv6: '2001:db8::1/128' } } },
  { links: { 'ld-s0-coast': { nat: {} } } },
  { links: { 'ld-s1-coast': { dynamic: true } } },
  { links: { 'ld-s1-coast': { ipv4: null, ipv6: '2001:db8:9::1' } } },
  { transports: { coast: { mtu: null } } },
  { transports: { coast: { mtu: 1400 } } },
  { transports: { coast: { filters: ['esp', 'udp-4500', 'udp-4789'] } } },
  { transports: { coast: { trusted: true } } },
  { devices: { 'fw-s1': { ports: { wan1: { shut: true } } } } },
  { devices: { 'fw-s1': { name: 'fw-s0' } } },
  { devices: { 'sw-s1': { ports: { p2: { stormLimitPps: null } } } } },
  { segments: { a: { mustBeFiltered: true } } },
  { segments: { a: { mtu: 1500 } } },
  { segments: { b: { letter: 'A' } } },
  { forwarders: { 'br-s0-a': { kind: 'cross-connect' } } },
  { forwarders: { 'br-s0-a': { circuits: { access: null } } } },
  { sites: { s1: { name: 'Head office' } } },
];
