import type { Design } from '#engine/model/design.ts';
import { coast, fitHostMtus, headOffice, ring, saltmarshDesign } from './saltmarsh.ts';

/** A controller and its standby on one segment, in two towns. Without a fault. */
export function standbyController(): Design {
  const design = saltmarshDesign(
    {
      title: 'Skerry standby controller',
      identification: 'SMF-L2-003',
      revision: 'A',
      createdBy: 'R. Halloran',
    },
    ['b'],
  )
    .transport('coast', coast)
    .site('ho', {
      ...headOffice,
      loopbacks: { coast: '10.255.3.1/32' },
      segments: ['b'],
      hosts: [{ name: 'berth-1', segment: 'b', face: 'controller', address: '10.120.0.10/24' }],
    })
    .site('ske', {
      name: 'Skerry',
      segments: ['b'],
      hosts: [{ name: 'berth-2', segment: 'b', face: 'controller', address: '10.120.0.11/24' }],
      landings: { coast: { ipv4: '203.0.113.45' } },
      loopbacks: { coast: '10.255.3.13/32' },
    })
    .join('ho', 'ske', { transport: 'coast', segments: ['b'], vni: () => 10_125 })
    .build();
  return fitHostMtus(design);
}

/** Cameras of two terminals on their way to the recorder, one of the tunnels outside IPsec on the internet. */
export function camerasOverCoast(): Design {
  const design = saltmarshDesign(
    {
      title: 'CCTV over Coastal access',
      identification: 'SMF-L2-005',
      revision: 'A',
      createdBy: 'R. Halloran',
    },
    ['c'],
  )
    .transport('coast', coast)
    .site('ho', {
      ...headOffice,
      loopbacks: { coast: '10.255.5.1/32' },
      segments: ['c'],
      hosts: [{ name: 'vms-2', segment: 'c', face: 'recorder', address: '10.130.0.11/23' }],
    })
    .site('gul', {
      name: 'Gullhaven',
      segments: ['c'],
      hosts: [{ name: 'cam-gul', segment: 'c', face: 'camera', address: '10.130.1.31/23' }],
      landings: { coast: { ipv4: '198.51.100.21' } },
      loopbacks: { coast: '10.255.5.11/32' },
    })
    .site('orr', {
      name: 'Orrin Point',
      segments: ['c'],
      hosts: [{ name: 'cam-orr', segment: 'c', face: 'camera', address: '10.130.1.32/23' }],
      landings: { coast: { ipv4: '198.51.100.37' } },
      loopbacks: { coast: '10.255.5.12/32' },
    })
    .join('ho', 'gul', { transport: 'coast', segments: ['c'], vni: () => 10_135 })
    .join('ho', 'orr', { transport: 'coast', segments: ['c'], vni: () => 10_136, protectedBy: false })
    .build();
  return fitHostMtus(design);
}

/** Two terminals joined over the company's own ring, where nothing needs protection. Without a fault. */
export function ringTerminals(): Design {
  const design = saltmarshDesign(
    {
      title: 'Ring terminals, ticketing',
      identification: 'SMF-L2-006',
      revision: 'A',
      createdBy: 'R. Halloran',
    },
    ['a'],
  )
    .transport('ring', ring)
    .site('orr', {
      name: 'Orrin Point',
      segments: ['a'],
      hosts: [{ name: 'gate-orr', segment: 'a', face: 'kiosk', address: '10.110.2.20/22' }],
      landings: { ring: { ipv4: '10.64.8.2' } },
      loopbacks: { ring: '10.255.6.12/32' },
    })
    .site('ske', {
      name: 'Skerry',
      segments: ['a'],
      hosts: [{ name: 'gate-ske', segment: 'a', face: 'kiosk', address: '10.110.3.20/22' }],
      landings: { ring: { ipv4: '10.64.8.6' } },
      loopbacks: { ring: '10.255.6.13/32' },
    })
    .join('orr', 'ske', { transport: 'ring', segments: ['a'], vni: () => 10_115, protectedBy: false })
    .build();
  return fitHostMtus(design);
}
