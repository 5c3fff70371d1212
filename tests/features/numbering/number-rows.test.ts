import { describe, expect, it } from 'vitest';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { indexNetwork } from '../../../src/engine/network/index-network.ts';
import { networkOverlaps, numberClashes } from '../../../src/engine/numbering/number-clashes.ts';
import type { NumberingContext } from '../../../src/engine/numbering/numbering-context.ts';
import type { Design } from '../../../src/engine/model/design.ts';
import { loopbackRows, vlanRows, vniRows } from '../../../src/features/numbering/number-rows.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');
const heldIn = (design: Design, context: NumberingContext = {}) => ({
  design,
  network: indexNetwork(design),
  context,
  clashes: numberClashes(design, context),
  overlaps: networkOverlaps(design, context),
});

describe('numbers in tables', () => {
  it('a tunnel shows the number at both ends and what it carries, and nobody else holds it', () => {
    const rows = vniRows(heldIn(demo));
    expect(rows).toHaveLength(Object.keys(demo.tunnels).length);
    for (const row of rows) {
      expect(row.a.vni).toBe(row.b.vni);
      expect(row).toMatchObject({ alsoHeldBy: '', standing: undefined });
    }
    expect(new Set(rows.flatMap(({ letters }) => letters))).toEqual(new Set(['A', 'B', 'C']));
  });

  it('pools tell in from out, and what is kept back before both', () => {
    const [first, second] = vniRows(heldIn(demo));
    const context: NumberingContext = {
      pools: { vnis: [{ from: first!.a.vni!, to: first!.a.vni! }], loopbacks: ['10.255.0.0/24'] },
      reserved: { vnis: [{ from: second!.a.vni!, to: second!.a.vni! }] },
    };
    const rows = vniRows(heldIn(demo, context));
    expect(rows[0]!.standing).toBe('in a pool');
    expect(rows[1]!.standing).toBe('reserved');
    expect(rows[2]!.standing).toBe('outside the pools');
    expect(new Set(loopbackRows(heldIn(demo, context)).map(({ standing }) => standing))).toEqual(
      new Set(['in a pool', 'outside the pools']),
    );
  });

  it('a number of another design is named with that design', () => {
    const vni = vniRows(heldIn(demo))[0]!.a.vni!;
    const [row] = vniRows(heldIn(demo, { otherDesigns: [{ name: 'Winter berths', vnis: [vni] }] }));
    expect(row!.alsoHeldBy).toBe(`VNI ${vni}: design Winter berths`);
  });

  it('two segments in one VLAN at a site each name the other, there and nowhere else', () => {
    const [a, b] = Object.keys(demo.segments);
    const [site] = Object.keys(demo.segments[b!]!.sites);
    const vlan = demo.segments[a!]!.sites[site!]!.vlan!;
    const clash = applyPatch(demo, { segments: { [b!]: { sites: { [site!]: { vlan } } } } });
    const named = vlanRows(heldIn(clash)).filter(({ alsoHeldBy }) => alsoHeldBy !== '');
    expect(named.map((row) => [row.letter, row.site])).toEqual([
      ['A', site],
      ['B', site],
    ]);
    expect(named[0]!.alsoHeldBy).toContain(`VLAN ${vlan} at ${demo.sites[site!]!.name}: `);
  });

  it('an endpoint inside a network in use is shown beside its address', () => {
    const rows = loopbackRows(heldIn(demo, { networksInUse: [{ network: '10.255.0.0/24', of: 'offices' }] }));
    expect(rows.filter(({ alsoHeldBy }) => alsoHeldBy !== '').map(({ ipv4 }) => ipv4)).toEqual(
      rows.filter(({ ipv4 }) => ipv4!.startsWith('10.255.0.')).map(({ ipv4 }) => ipv4),
    );
    expect(rows.find(({ alsoHeldBy }) => alsoHeldBy !== '')!.alsoHeldBy).toContain(
      'a network in use (offices)',
    );
  });
});
