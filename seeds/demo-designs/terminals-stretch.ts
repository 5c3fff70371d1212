import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { SegmentId } from './saltmarsh.ts';
import { coast, fitHostMtus, headOffice, ring, saltmarshDesign } from './saltmarsh.ts';

// One VNI for each tunnel, so that a number names one tunnel wherever it is seen.
const vniOfTunnel: { readonly [tunnel: string]: number } = {
  'ho-gul-a': 10_110,
  'ho-orr-a': 10_111,
  'ho-ske-a': 10_112,
  'ho-gul-b': 10_120,
  'ho-orr-b': 10_121,
  'ho-ske-c': 10_130,
  'orr-ske-c': 10_131,
};

/** What is ordered of the coastal access at a terminal. */
const terminalAccess = { rateUpBps: 10_000_000, rateDownBps: 40_000_000 };

const branchGateway: Design['profiles'][string] = {
  name: 'Branch gateway',
  basis: 'Measured in the workshop, RFC 2544 with 1,396 B packets.',
  plain: { oneFlowBps: 940_000_000, manyFlowsBps: 1_800_000_000, packetsPerSecond: 600_000 },
  encrypted: { oneFlowBps: 180_000_000, manyFlowsBps: 350_000_000, packetsPerSecond: 90_000 },
  encryption: 'cpu',
};

/**
 * Three segments stretched from the head office to three terminals: hub and spoke inside IPsec over the coastal access,
 * and one bare tunnel over the company's own ring. Without a fault; not yet laid out.
 */
export function terminalsStretch(title: string, identification: string): Design {
  const vni = (pair: string) => (segment: string) => vniOfTunnel[`${pair}-${segment}`]!;
  const overCoast = (pair: string, segments: readonly SegmentId[]) => ({
    transport: 'coast',
    segments,
    vni: vni(pair),
  });
  const design = saltmarshDesign({ title, identification, revision: 'C', createdBy: 'R. Halloran' }, [
    'a',
    'b',
    'c',
  ])
    .transport('coast', coast)
    .transport('ring', ring)
    .site('ho', {
      ...headOffice,
      landings: {
        coast: { ...headOffice.landings.coast, rateUpBps: 100_000_000, rateDownBps: 100_000_000 },
      },
      segments: ['a', 'b', 'c'],
      hosts: [
        { name: 'ticket-1', segment: 'a', face: 'server', address: '10.110.0.10/22' },
        { name: 'berth-1', segment: 'b', face: 'controller', address: '10.120.0.10/24' },
        { name: 'vms-1', segment: 'c', face: 'recorder', address: '10.130.0.10/23' },
      ],
    })
    .site('gul', {
      name: 'Gullhaven',
      segments: ['a', 'b'],
      hosts: [
        { name: 'gate-gul', segment: 'a', face: 'kiosk', address: '10.110.1.20/22' },
        { name: 'berth-gul', segment: 'b', face: 'controller', address: '10.120.0.31/24' },
      ],
      landings: { coast: { ipv4: '198.51.100.21', ...terminalAccess } },
      loopbacks: { coast: '10.255.0.11/32' },
    })
    .site('orr', {
      name: 'Orrin Point',
      segments: ['a', 'b', 'c'],
      hosts: [
        { name: 'gate-orr', segment: 'a', face: 'kiosk', address: '10.110.2.20/22' },
        { name: 'berth-orr', segment: 'b', face: 'controller', address: '10.120.0.32/24' },
        { name: 'cam-orr', segment: 'c', face: 'camera', address: '10.130.1.32/23' },
      ],
      landings: { coast: { ipv4: '198.51.100.37', ...terminalAccess }, ring: { ipv4: '10.64.8.2' } },
      loopbacks: { coast: '10.255.0.12/32', ring: '10.255.1.12/32' },
    })
    .site('ske', {
      name: 'Skerry',
      segments: ['a', 'c'],
      hosts: [
        { name: 'gate-ske', segment: 'a', face: 'kiosk', address: '10.110.3.20/22' },
        { name: 'cam-ske', segment: 'c', face: 'camera', address: '10.130.1.33/23' },
      ],
      landings: { coast: { ipv4: '203.0.113.45', ...terminalAccess }, ring: { ipv4: '10.64.8.6' } },
      loopbacks: { coast: '10.255.0.13/32', ring: '10.255.1.13/32' },
    })
    .join('ho', 'gul', overCoast('ho-gul', ['a', 'b']))
    .join('ho', 'orr', overCoast('ho-orr', ['a', 'b']))
    .join('ho', 'ske', overCoast('ho-ske', ['a', 'c']))
    .join('orr', 'ske', { transport: 'ring', segments: ['c'], vni: vni('orr-ske'), protectedBy: false })
    .add('profiles', 'branch', branchGateway)
    .add('demands', 'dm-ticketing', {
      name: 'Ticket sales',
      segment: 'a',
      from: { site: 'gul' },
      to: { host: 'ticket-1' },
      forwardBps: 400_000,
      reverseBps: 1_200_000,
      mix: [
        { packetBytes: 80, weight: 4 },
        { packetBytes: 576, weight: 1 },
        { packetBytes: 1396, weight: 3 },
      ],
      flows: 12,
      latencyAllowedUs: 80_000,
    })
    .add('demands', 'dm-berth', {
      name: 'Berth positions',
      segment: 'b',
      from: { host: 'berth-1' },
      to: { site: 'orr' },
      forwardBps: 200_000,
      reverseBps: 200_000,
      mix: [{ packetBytes: 220, weight: 1 }],
      flows: 2,
      latencyAllowedUs: 50_000,
    })
    .add('demands', 'dm-cctv', {
      name: 'Camera pictures',
      segment: 'c',
      from: { host: 'cam-ske' },
      to: { host: 'vms-1' },
      forwardBps: 6_000_000,
      reverseBps: 100_000,
      mix: [
        { packetBytes: 120, weight: 1 },
        { packetBytes: 1396, weight: 9 },
      ],
      flows: 1,
    })
    .build();
  return fitHostMtus(
    applyPatch(design, {
      devices: Object.fromEntries(
        ['fw-ho', 'fw-gul', 'fw-orr', 'fw-ske'].map((id) => [id, { profile: 'branch' }]),
      ),
    }),
  );
}
