import { describe, expect, it } from 'vitest';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import type { Design } from '../../../src/engine/model/design.ts';
import { runRules } from '../../../src/engine/rules/run-rules.ts';
import type { OutlineRow } from '../../../src/features/outline/outline-row.ts';
import { outlineTree } from '../../../src/features/outline/outline-tree.ts';
import { neighbourOf, treeStep } from '../../../src/features/outline/tree-keys.ts';
import {
  keyOfElement,
  keysAbove,
  narrow,
  opensAtFirst,
  rowWords,
  selectedKeys,
  typedAhead,
  visibleRows,
} from '../../../src/features/outline/visible-rows.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { largeDesign } from '../../support/large-design.ts';

const pair = pairDesign({ segments: ['a', 'b'], hub: 'ha-pair' });
const withPatch = (patch: MergePatch, design: Design = pair): Design => applyPatch(design, patch);
const all = (rows: readonly OutlineRow[]): readonly OutlineRow[] =>
  rows.flatMap((row) => [row, ...all(row.children)]);
const treeOf = (design: Design): readonly OutlineRow[] => outlineTree(design, runRules(design));
const rowsOf = (design: Design): readonly OutlineRow[] => all(treeOf(design));
const under = (rows: readonly OutlineRow[], ...names: readonly string[]): OutlineRow => {
  const [name, ...rest] = names;
  const row = rows.find((candidate) => candidate.name === name);
  if (row === undefined) throw new Error(`no row ${name} among ${rows.map((each) => each.name).join(', ')}`);
  return rest.length === 0 ? row : under(row.children, ...rest);
};

describe('the outline of a design', () => {
  it('nests sites, devices, members, ports and cables', () => {
    const roots = treeOf(pair);
    expect(roots.map(({ name }) => name)).toEqual([
      'Sites',
      'Transports',
      'IPsec associations',
      'Segments',
      'Notes',
    ]);
    const hub = under(roots, 'Sites', 'Head office', 'fw-s0');
    expect(hub.kind).toBe('HA pair');
    const members = hub.children.filter(({ kind }) => kind === 'Member');
    expect(members.map(({ facts }) => facts)).toEqual([['active'], ['standby']]);
    const cabled = members[0]!.children.find(({ children }) => children[0]?.kind === 'Cable')!;
    expect(rowWords(cabled)).toMatch(/^Port .*, trunk .*, to sw-s0/);
    expect(members[0]!.children.some(({ facts }) => facts.includes('on Coastal access'))).toBe(true);
  });

  it('names every element of the design, each at one place of its own', () => {
    const design = withPatch({
      notes: { n1: { text: 'Keys are in the vault.', target: { collection: 'devices', id: 'fw-s1' } } },
      demands: { d1: { name: 'Tickets', segment: 'a', from: { site: 's0' }, to: { site: 's1' } } },
    });
    const own = rowsOf(design).filter(({ isOwn, member, ref }) => isOwn && member === undefined && ref);
    const keys = own
      .filter(({ ref }) => ref!.port === undefined)
      .map(({ ref }) => `${ref!.collection}/${ref!.id}`);
    expect(new Set(keys).size).toBe(keys.length);
    const wanted = (
      [
        'sites',
        'devices',
        'transports',
        'links',
        'endpoints',
        'associations',
        'tunnels',
        'forwarders',
        'segments',
        'demands',
        'notes',
      ] as const
    ).flatMap((collection) => Object.keys(design[collection]).map((id) => `${collection}/${id}`));
    expect([...keys].sort()).toEqual(wanted.sort());
  });

  it('gives every row a key of its own', () => {
    const keys = rowsOf(pair).map(({ key }) => key);
    expect(new Set(keys).size).toBe(keys.length);
  });

  it('says both VNIs of a tunnel where they differ', () => {
    const [id, tunnel] = Object.entries(pair.tunnels)[0]!;
    const design = withPatch({ tunnels: { [id]: { b: { vni: 4711 } } } });
    const row = rowsOf(design).find(({ ref, isOwn }) => isOwn && ref?.id === id)!;
    expect(row.facts).toContain(`VNI ${tunnel.a.vni} at fw-s0, 4711 at fw-s1`);
    expect(rowsOf(pair).find(({ ref, isOwn }) => isOwn && ref?.id === id)!.facts).toContain(
      `VNI ${tunnel.a.vni} at both ends`,
    );
  });

  it('lists a tunnel outside every association among the bare ones', () => {
    const [id, { name }] = Object.entries(pair.tunnels)[0]!;
    const roots = treeOf(withPatch({ tunnels: { [id]: { association: null } } }));
    expect(under(roots, 'Bare tunnels', name).facts).toContain('bare');
  });

  it('says of a segment where it lands, with its hosts there', () => {
    const at = under(treeOf(pair), 'Segments', 'Segment A', 'Gullhaven');
    expect(at.facts).toEqual(['VLAN 110', '10.110.0.0/16']);
    expect(at.children.map(({ name }) => name)).toEqual(['h-s1-a']);
    expect(at.detach?.path).toEqual(['segments', 'a', 'sites', 's1']);
  });

  it('names what a forwarder joins, to be taken out of it without removing it', () => {
    const [id, forwarder] = Object.entries(pair.forwarders)[0]!;
    const row = rowsOf(pair).find(
      ({ ref, isOwn }) => isOwn && ref?.collection === 'forwarders' && ref.id === id,
    )!;
    expect(row.children).toHaveLength(Object.keys(forwarder.circuits).length);
    for (const circuit of row.children) {
      expect(circuit.detach?.path.slice(0, 3)).toEqual(['forwarders', id, 'circuits']);
      expect(circuit.detach?.words).toContain(`out of ${forwarder.name}`);
    }
  });
});

describe('the findings of a row', () => {
  const [id] = Object.keys(pair.tunnels) as [string];
  const broken = withPatch({ tunnels: { [id]: { b: { vni: 4711 } } } });

  it('are those of the element, and once each those of what stands beneath it', () => {
    const findings = runRules(broken);
    const blocking = findings.filter(
      ({ severity, elements }) =>
        severity === 'blocking' && elements.some((ref) => ref.collection === 'tunnels' && ref.id === id),
    ).length;
    expect(blocking).toBeGreaterThan(0);
    const rows = all(outlineTree(broken, findings));
    const named = rows.filter(({ ref }) => ref?.collection === 'tunnels' && ref.id === id);
    // Its own row, one at each of its endpoints, one in the forwarder at each end.
    expect(named).toHaveLength(5);
    for (const row of named) expect(row.counts.blocking).toBe(blocking);
    const association = rows.find(
      ({ ref, isOwn }) =>
        isOwn && ref?.collection === 'associations' && ref.id === broken.tunnels[id]!.association,
    )!;
    expect(association.counts.blocking).toBe(blocking);
    expect(rowWords(association)).toContain(`${blocking} blocking`);
  });

  it('are none where nothing is wrong', () => {
    for (const row of all(outlineTree(pair, [])))
      expect(row.counts).toEqual({ blocking: 0, degrading: 0, advisory: 0 });
  });
});

describe('the rows that are seen', () => {
  const roots = treeOf(pair);
  const rows = visibleRows(roots, opensAtFirst(roots));

  it('are at first the groups and what is in few sites', () => {
    const names = rows.map(({ row, level }) => `${level} ${row.name}`);
    expect(names.slice(0, 3)).toEqual(['1 Sites', '2 Gullhaven', '3 fw-s1']);
    expect(names).toContain('2 Coastal access');
    expect(rows.some(({ row }) => row.ref?.port !== undefined)).toBe(false);
  });

  it('leave sites shut where there are more than twelve', () => {
    const many = treeOf(hubDesign(12));
    const seen = visibleRows(many, opensAtFirst(many));
    expect(seen.filter(({ level }) => level === 3)).toHaveLength(0);
    expect(seen.filter(({ row }) => row.ref?.collection === 'sites')).toHaveLength(13);
  });

  it('know their place among their siblings', () => {
    const gullhaven = rows[1]!;
    expect([gullhaven.place, gullhaven.siblings, gullhaven.isOpen]).toEqual([1, 2, true]);
  });

  it('lead to an element, first to where it stands itself', () => {
    const host = keyOfElement(roots, { collection: 'devices', id: 'h-s1-a' })!;
    expect(host).toBe('sites>sites/s1>devices/h-s1-a');
    expect(keysAbove(host)).toEqual(['sites', 'sites>sites/s1']);
    expect(keyOfElement(roots, { collection: 'devices', id: 'nobody' })).toBeUndefined();
  });

  it('take a pair’s port without its member for that of both', () => {
    expect(selectedKeys([{ collection: 'devices', id: 'fw', port: 'lan2' }])).toEqual(
      new Set(['devices/fw/lan2', 'devices/fw/lan2@1', 'devices/fw/lan2@2']),
    );
  });
});

describe('the filter', () => {
  const roots = treeOf(pair);

  it('leaves the rows that hold every word, and those that lead there', () => {
    const { roots: left, opened, found } = narrow(roots, 'switch S1');
    expect(found).toBe(1);
    expect(
      all(left)
        .map(({ name }) => name)
        .slice(0, 3),
    ).toEqual(['Sites', 'Gullhaven', 'sw-s1']);
    expect(opened).toEqual(new Set(['sites', 'sites>sites/s1']));
  });

  it('finds addresses, VNIs and VLANs', () => {
    for (const text of ['10.255.0.2', `VNI ${Object.values(pair.tunnels)[0]!.a.vni}`, 'VLAN 110'])
      expect(narrow(roots, text).found, text).toBeGreaterThan(0);
    expect(narrow(roots, 'nowhere')).toMatchObject({ roots: [], found: 0, isCut: false });
  });

  it('shows no more rows than can be read, and says so', () => {
    const { roots: left, found, isCut, most } = narrow(outlineTree(largeDesign(), []), 'port');
    expect(isCut).toBe(true);
    expect(found).toBeGreaterThan(most);
    expect(
      all(left).filter(({ kind, children }) => kind === 'Port' && children.length === 0).length,
    ).toBeLessThanOrEqual(most);
  });
});

describe('the keys of the tree', () => {
  const roots = treeOf(pair);
  const rows = visibleRows(roots, opensAtFirst(roots));
  const press = (at: number, key: string, more: object = {}, typed = key) =>
    treeStep(
      rows,
      at,
      { key, shiftKey: false, ctrlKey: false, metaKey: false, altKey: false, ...more },
      typed,
    );
  const place = (name: string): number => rows.findIndex(({ row }) => row.name === name);

  it('go up and down and stop at both ends', () => {
    expect(press(0, 'ArrowDown')).toEqual({ does: 'go', to: rows[1] });
    expect(press(0, 'ArrowUp')).toEqual({ does: 'go', to: rows[0] });
    expect(press(3, 'End')).toEqual({ does: 'go', to: rows.at(-1) });
    expect(press(3, 'Home')).toEqual({ does: 'go', to: rows[0] });
  });

  it('open to the right and go in, shut to the left and go out', () => {
    const shut = place('fw-s1');
    expect(press(shut, 'ArrowRight')).toEqual({ does: 'open', rows: [rows[shut]] });
    expect(press(1, 'ArrowRight')).toEqual({ does: 'go', to: rows[2] });
    expect(press(1, 'ArrowLeft')).toEqual({ does: 'shut', rows: [rows[1]] });
    expect(press(shut, 'ArrowLeft')).toEqual({ does: 'go', to: rows[1] });
  });

  it('open all siblings with a star', () => {
    const step = press(place('fw-s1'), '*');
    expect(step?.does === 'open' && step.rows.map(({ row }) => row.name)).toEqual([
      'fw-s1',
      'h-s1-a',
      'h-s1-b',
      'sw-s1',
    ]);
  });

  it('find the next name that begins with what is typed, and round', () => {
    const [first, second] = [place('sw-s1'), place('sw-s0')];
    expect(press(0, 's', {}, 's')).toEqual({ does: 'go', to: rows[first] });
    expect(typedAhead(rows, first, 's')?.row.name).toBe('sw-s0');
    expect(typedAhead(rows, second, 'sw-s1')).toBe(rows[first]);
    expect(typedAhead(rows, 0, 'zzz')).toBeUndefined();
  });

  it('leave the desk its own keys', () => {
    expect(press(0, 'z', { ctrlKey: true })).toBeUndefined();
    expect(press(0, '/')).toBeUndefined();
    expect(press(0, 'Escape')).toBeUndefined();
  });

  it('go on from the neighbour of a row that goes', () => {
    expect(neighbourOf(rows, place('h-s1-a'))?.row.name).toBe('h-s1-b');
    expect(neighbourOf(rows, place('sw-s1'))?.row.name).toBe('h-s1-b');
  });
});

describe('a design of a thousand devices', () => {
  it('shows at first no more rows than scroll smoothly', () => {
    const roots = outlineTree(largeDesign(), []);
    expect(all(roots).length).toBeGreaterThan(10_000);
    expect(visibleRows(roots, opensAtFirst(roots)).length).toBeLessThan(1_000);
  });
});
