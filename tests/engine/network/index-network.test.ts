import { describe, expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { placesOf } from '#engine/flood/places.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { portVlanKey, segmentsAt, siteVlanKey } from '#engine/network/network.ts';
import { portGroupAt } from '#engine/network/port-groups.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';

describe('indexNetwork', () => {
  it('indexes nothing anew for a title, and still tells it', () => {
    const design = hubDesign(2);
    const before = indexNetwork(design);
    const renamed = applyPatch(design, { meta: { title: 'Coast, second issue' } });
    const after = indexNetwork(renamed);
    expect(after.design.meta.title).toBe('Coast, second issue');
    expect(before.design.meta.title).toBe(design.meta.title);
    expect(after.circuitsByForwarder).toBe(before.circuitsByForwarder);
    expect(indexNetwork(renamed)).toBe(after);
  });

  it('finds what hangs on a device, a port, an endpoint and an association', () => {
    const network = indexNetwork(hubDesign(2, { segments: ['a', 'b'] }));
    expect(network.devicesBySite.get('s1')).toEqual(['fw-s1', 'h-s1-a', 'h-s1-b', 'sw-s1']);
    expect(network.hostsBySegment.get('b')).toEqual(['h-s0-b', 'h-s1-b', 'h-s2-b']);
    expect(network.landingsByTransport.get('coast')).toEqual(['ld-s0-coast', 'ld-s1-coast', 'ld-s2-coast']);
    expect(network.tunnelsByEndpoint.get('lo-s1')).toEqual([
      { tunnel: 'tn-s0-s1-a', end: 'b' },
      { tunnel: 'tn-s0-s1-b', end: 'b' },
    ]);
    expect(network.tunnelsByAssociation.get('as-s0-s2')).toEqual(['tn-s0-s2-a', 'tn-s0-s2-b']);
    expect(network.forwardersByDevice.get('fw-s0')).toEqual(['br-s0-a', 'br-s0-b']);
    expect(network.circuitsByTunnel.get('tn-s0-s1-a')?.map(({ forwarder }) => forwarder)).toEqual([
      'br-s0-a',
      'br-s1-a',
    ]);
    expect(network.circuitsByPortVlan.get(portVlanKey('fw-s1', 'lan1', 120))).toMatchObject([
      { forwarder: 'br-s1-b', id: 'access' },
    ]);
    expect(network.segmentsBySiteVlan.get(siteVlanKey('s2', 110))).toEqual(['a']);
    expect(segmentsAt(network, 's2', 999)).toEqual([]);
    expect(network.cablesByDevice.get('sw-s0')).toHaveLength(3);
  });

  it('gives the same network for the same facts, wherever things stand on the sheet', () => {
    const design = pairDesign();
    const network = indexNetwork(design);
    expect(indexNetwork(design)).toBe(network);
    const moved = applyPatch(design, { layout: { devices: { 'fw-s0': { x: 40, y: 80 } } } });
    expect(moved).not.toBe(design);
    expect(indexNetwork(moved)).toBe(network);
    const renamed = applyPatch(design, { tunnels: { 'tn-s0-s1-a': { name: 'west' } } });
    expect(indexNetwork(renamed)).not.toBe(network);
    expect(indexNetwork(renamed).design.tunnels['tn-s0-s1-a']?.name).toBe('west');
  });

  it('reads the same from a design whose entries come in another order', () => {
    const design = hubDesign(3, { segments: ['a', 'b'] });
    const turned = Object.fromEntries(
      Object.entries(design).map(([key, value]) => [
        key,
        typeof value === 'object' ? Object.fromEntries(Object.entries(value).reverse()) : value,
      ]),
    ) as typeof design;
    const [one, other] = [indexNetwork(design), indexNetwork(turned)];
    expect(JSON.stringify([...other.circuitsByPort])).toBe(JSON.stringify([...one.circuitsByPort]));
    expect(other.bundles.map(({ cables }) => cables)).toEqual(one.bundles.map(({ cables }) => cables));
  });
});

describe('the network of a later version', () => {
  const cableOf = (hub: string, port: string) => ({
    kind: 'cable',
    a: { device: 'sw-s1', port: 'p9' },
    b: { device: hub, port },
  });
  const before = () => {
    const design = applyPatch(hubDesign(6, { segments: ['a'] }), {
      devices: {
        'sw-s1': { ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } },
        'sw-s2': { ports: { p9: { number: 9, role: 'lan', mode: 'trunk' } } },
      },
    });
    return { design, network: indexNetwork(design) };
  };

  it('has the same tunnels, ports and bundles under the same numbers where a cable is added', () => {
    const { design, network } = before();
    const places = placesOf(network);
    // Its id comes before all others.
    const later = indexNetwork(applyPatch(design, { links: { 'ca-new': cableOf('sw-s2', 'p9') } }));
    expect(later.firstTunnelElement).toBe(network.firstTunnelElement);
    expect(later.bundles).toHaveLength(network.bundles.length + 1);
    for (const bundle of network.bundles) expect(later.bundles[bundle.index]).toBe(bundle);
    for (const [device, groups] of network.portGroupsByDevice)
      if (device !== 'sw-s1' && device !== 'sw-s2') expect(later.portGroupsByDevice.get(device)).toBe(groups);
    expect(placesOf(later).byDevice.get('fw-s3')).toBe(places.byDevice.get('fw-s3'));
  });

  it('gives the number of a cable that is gone to the last one and leaves all others theirs', () => {
    const { design, network } = before();
    const gone = network.bundles[0]!;
    const last = network.bundles.at(-1)!;
    const later = indexNetwork(applyPatch(design, { links: { [gone.cables[0]!]: null } }));
    expect(later.firstTunnelElement).toBe(network.firstTunnelElement);
    expect(later.bundles[0]).toMatchObject({ index: 0, cables: last.cables });
    for (const bundle of network.bundles.slice(1, -1)) expect(later.bundles[bundle.index]).toEqual(bundle);
    expect(later.bundles).toHaveLength(network.bundles.length - 1);
    expect(later.bundleByCable.has(gone.cables[0]!)).toBe(false);
  });

  it('numbers everything anew once the room for cables is used up', () => {
    const { design, network } = before();
    const many = Object.fromEntries(
      Array.from({ length: 300 }, (_one, i) => [`cb-new-${i}`, cableOf('sw-s2', 'p9')]),
    );
    const later = indexNetwork(applyPatch(design, { links: many }));
    expect(later.bundles).toHaveLength(network.bundles.length + 300);
    expect(later.firstTunnelElement).toBeGreaterThanOrEqual(later.bundles.length);
  });
});

describe('ports and cables as logical ones', () => {
  const doubled = (aggregation: string | null) =>
    indexNetwork(
      applyPatch(pairDesign(), {
        devices: {
          'sw-s0': {
            ports: {
              p1: { aggregation },
              p9: { number: 9, role: 'lan', mode: 'trunk', ...(aggregation === null ? {} : { aggregation }) },
            },
          },
          'fw-s0': { ports: { lan1: { aggregation }, lan2: { aggregation } } },
        },
        links: {
          'cb-s0-up2': {
            kind: 'cable',
            a: { device: 'fw-s0', port: 'lan2' },
            b: { device: 'sw-s0', port: 'p9' },
          },
        },
      }),
    );

  it('counts cables of one aggregation once and leaves others apart', () => {
    const network = doubled('lag1');
    const bundle = network.bundleByCable.get('cb-s0-up2')!;
    expect(bundle).toBe(network.bundleByCable.get('cb-s0-up1'));
    expect(bundle.cables).toEqual(['cb-s0-up1', 'cb-s0-up2']);
    expect(portGroupAt(network, 'sw-s0', 'p9', undefined)?.ports).toEqual(['p1', 'p9']);
    const apart = doubled(null);
    expect(apart.bundleByCable.get('cb-s0-up2')).not.toBe(apart.bundleByCable.get('cb-s0-up1'));
  });

  it('gives each member of a pair its own ports and leaves member links out', () => {
    const network = indexNetwork(pairDesign({ hub: 'ha-pair' }));
    expect(network.bundleByCable.has('cb-s0-sync1')).toBe(false);
    expect(network.bundleByCable.get('cb-s0-up2')?.b).toMatchObject({
      device: 'fw-s0',
      member: 2,
      port: 'lan1',
    });
  });

  it('knows a cable in a shut port for dead', () => {
    const network = indexNetwork(
      applyPatch(pairDesign(), { devices: { 'sw-s0': { ports: { p1: { shut: true } } } } }),
    );
    expect(network.bundleByCable.get('cb-s0-up1')).toMatchObject({ cables: ['cb-s0-up1'], alive: [] });
  });
});
