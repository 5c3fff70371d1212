import { describe, expect, it } from 'vitest';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { indexNetwork } from '../../../src/engine/network/index-network.ts';
import { demandRows } from '../../../src/features/segments/demand-rows.ts';
import { landingWords, placeRows, segmentRows } from '../../../src/features/segments/segment-rows.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { hubDesign } from '../../support/designs.ts';

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');

describe('segments in a table', () => {
  it('a segment says what it needs and what its narrowest tunnel lets through', () => {
    const rows = segmentRows(indexNetwork(demo));
    expect(rows.map(({ letter, sites, tunnels, joined }) => [letter, sites, tunnels, joined])).toEqual([
      ['A', 4, 3, 'all'],
      ['B', 3, 2, 'all'],
      ['C', 3, 2, 'all'],
    ]);
    // 1500 - 104: ESP in tunnel mode with AES-GCM and VXLAN over IPv4, the padding included (RFC 4303 section 2, RFC 7348 section 5).
    expect(rows[0]).toMatchObject({ fittingBytes: 1396, hosts: 4, demands: 1 });
  });

  it('a place whose VLAN is missing on the way is a part of its own', () => {
    const design = hubDesign(2);
    const [tunnel] = Object.keys(design.tunnels);
    const cut = applyPatch(design, { tunnels: { [tunnel!]: { a: { vni: 77_777 } } } });
    const rows = placeRows(indexNetwork(cut));
    expect(rows.map((row) => [row.siteName, landingWords(row.landing)])).toEqual([
      ['Head office', 'part 1 of 2'],
      ['Gullhaven', 'part 2 of 2'],
      ['Orrin Point', 'part 1 of 2'],
    ]);
    expect(segmentRows(indexNetwork(cut))[0]!.joined).toBe('parted');
  });

  it('a site where no VLAN is stated says so, and one segment can be looked at alone', () => {
    const [segment] = Object.keys(demo.segments);
    const changed = applyPatch(demo, {
      sites: { quay: { name: 'Quay' } },
      segments: { [segment!]: { sites: { quay: {} } } },
    });
    const rows = placeRows(indexNetwork(changed), segment);
    expect(rows.at(-1)).toMatchObject({ siteName: 'Quay', hosts: 0, landing: { kind: 'no-vlan' } });
    expect(new Set(rows.map((row) => row.segment))).toEqual(new Set([segment]));
    const stated = applyPatch(changed, { segments: { [segment!]: { sites: { quay: { vlan: 999 } } } } });
    expect(placeRows(indexNetwork(stated), segment).at(-1)!.landing).toEqual({ kind: 'unattached' });
  });

  it('demands stand in order of letter and without a name say from where to where', () => {
    const bare = applyPatch(demo, { demands: { 'dm-ticketing': { name: null } } });
    expect(demandRows(bare).map(({ letter, name }) => [letter, name])).toEqual([
      ['A', 'all of Gullhaven to ticket-1'],
      ['B', 'Berth positions'],
      ['C', 'Camera pictures'],
    ]);
  });
});
