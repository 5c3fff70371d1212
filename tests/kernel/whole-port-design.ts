import type { Design } from '#engine/model/design.ts';
import { designBuilder } from '#engine/model/design-builder.ts';

export interface WholePortOptions {
  readonly family?: 4 | 6;
  readonly transportMtuBytes?: number;
  readonly outerDf?: 'set' | 'clear' | 'inherit';
}

const names = ['gul', 'orr'] as const;

/**
 * Two sites whose hosts are plugged straight into a firewall's port, all of whose frames go through one tunnel as they are:
 * Gullhaven and Orrin Point, hosts that send tagged with VLAN 110.
 */
export const wholePortDesign = ({
  family = 4,
  transportMtuBytes = 1500,
  outerDf = 'set',
}: WholePortOptions = {}): Design => {
  const builder = designBuilder('One port, carried whole')
    .transport('coast', {
      name: 'Coastal access',
      kind: 'internet',
      mtu: transportMtuBytes,
      families: [family],
    })
    .segment('a', { letter: 'A', name: 'Controllers', vlan: 110, subnet: '10.110.0.0/16' });
  names.forEach((id, i) => {
    builder
      .site(id, {
        name: ['Gullhaven', 'Orrin Point'][i]!,
        segments: ['a'],
        landings: {
          coast: family === 4 ? { ipv4: `198.51.100.${10 + i}` } : { ipv6: `2001:db8:${10 + i}::1` },
        },
        loopbacks: { coast: family === 4 ? `10.255.0.${i + 1}/32` : `2001:db8:ff::${i + 1}/128` },
        withoutSwitch: true,
      })
      .add('devices', `h-${id}`, {
        kind: 'host',
        site: id,
        name: `h-${id}`,
        segment: 'a',
        ports: { p1: { number: 1, role: 'lan', mode: 'trunk' } },
      })
      .add('links', `cb-h-${id}`, {
        kind: 'cable',
        a: { device: `h-${id}`, port: 'p1' },
        b: { device: `fw-${id}`, port: 'lan2' },
      })
      .add('forwarders', `br-${id}-a`, {
        device: `fw-${id}`,
        kind: 'bridge',
        name: 'br-all',
        circuits: { access: { kind: 'port', rank: 'a0', port: 'lan2', vlans: 'all', tag: 'kept' } },
      });
  });
  return builder
    .join('gul', 'orr', {
      transport: 'coast',
      segments: ['a'],
      vni: () => 10_110,
      protectedBy: false,
      tunnel: { outerDf, innerTags: 'keep' },
    })
    .build();
};
