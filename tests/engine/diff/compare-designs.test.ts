import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { z } from 'zod';
import type { Change } from '#engine/diff/change.ts';
import { compareDesigns } from '#engine/diff/compare-designs.ts';
import { propertyWords } from '#engine/diff/property-words.ts';
import type { Design } from '#engine/model/design.ts';
import { collections, emptyDesign, entrySchemas } from '#engine/model/design.ts';
import { metaSchema } from '#engine/model/intent.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { generatedEdit } from '../../support/generated-edits.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';

const pair = pairDesign();
const said = (patch: MergePatch, before: Design = pair): readonly string[] =>
  compareDesigns(before, applyPatch(before, patch)).changes.map(({ sentence }) => sentence);
const tunnel = Object.keys(pair.tunnels)[0]!;

describe('a difference in words', () => {
  test('names the property, the element, both values and the end', () => {
    const { name, b } = pair.tunnels[tunnel]!;
    expect(said({ tunnels: { [tunnel]: { b: { vni: 10_120 } } } })).toEqual([
      `VNI of tunnel ${name} ${b.vni} → 10120 at Gullhaven`,
    ]);
    expect(said({ tunnels: { [tunnel]: { b: { vni: null } } } })).toEqual([
      `VNI of tunnel ${name} no longer given, it was ${b.vni} at Gullhaven`,
    ]);
    expect(said({ tunnels: { [tunnel]: { family: 6, name: 'Coast' } } })).toEqual([
      'Address family of tunnel Coast IPv4 → IPv6',
      `Tunnel ${name} renamed Coast`,
    ]);
  });

  test('gives values with their units', () => {
    expect(
      said({
        transports: { coast: { latencyUs: 20_500, lossPpm: 1_000, rateBps: 2_500_000_000, trusted: true } },
      }),
    ).toEqual([
      'Latency of transport Coastal access 18 ms → 20.5 ms',
      'Loss of transport Coastal access 0.02 % → 0.1 %',
      'Rate of transport Coastal access set to 2.5 Gbit/s',
      'Trust of transport Coastal access not trusted → trusted',
    ]);
  });

  test('tells of parts by their own names', () => {
    const host = Object.keys(pair.devices).find((id) => pair.devices[id]!.kind === 'host')!;
    const { name, ports } = pair.devices[host]!;
    const [port] = Object.keys(ports);
    const label = ports[port!]!.name ?? `port ${ports[port!]!.number}`;
    expect(
      said({ devices: { [host]: { ports: { [port!]: { mtu: 9000 }, q9: { number: 9, role: 'lan' } } } } }),
    ).toEqual([`MTU of ${label} of ${name} 1500 bytes → 9000 bytes`, `Port 9 of ${name} added`]);
    expect(said({ segments: { a: { sites: { s1: { vlan: 333 } } } } })).toEqual([
      'VLAN of segment A (Segment A) at Gullhaven 110 → 333',
    ]);
  });

  test('says in one sentence that an element came or went, with its place on the sheet', () => {
    const after = applyPatch(pair, {
      devices: { x: { kind: 'switch', name: 'sw-quay', site: 's1', ports: {} } },
      layout: { devices: { x: { x: 10, y: 20 } } },
    });
    const { changes } = compareDesigns(pair, after);
    expect(changes).toEqual([
      {
        kind: 'added',
        ref: { collection: 'devices', id: 'x' },
        sentence: 'Switch sw-quay added',
        group: { key: 'site:s1', name: 'Gullhaven' },
        paths: [
          ['devices', 'x'],
          ['layout', 'devices', 'x'],
        ],
      },
    ]);
    expect(compareDesigns(after, pair).changes.map(({ sentence }) => sentence)).toEqual([
      'Switch sw-quay removed',
    ]);
  });

  test('keeps what moved on the sheet apart from what changed', () => {
    const before = applyPatch(pair, { layout: { sites: { s0: { x: 0, y: 0, width: 9, height: 9 } } } });
    const { changes } = compareDesigns(
      before,
      applyPatch(before, {
        meta: { title: 'Coast' },
        layout: { sites: { s0: { x: 5 } }, sheet: 'A2' },
        sites: { s0: { zone: 'ashore' } },
      }),
    );
    expect(changes.map(({ group, sentence }) => [group.name, sentence])).toEqual([
      ['Head office', 'Zone of site Head office set to ashore'],
      ['Title block', 'Title in the title block Sites on the coast, 2 → Coast'],
      ['Places on the sheet', 'Size of the sheet set to A2'],
      ['Places on the sheet', 'Site Head office moved on the sheet'],
    ]);
    expect(
      compareDesigns(before, applyPatch(before, { layout: { sites: { s0: { locked: true } } } })).changes[0]!
        .sentence,
    ).toBe('Site Head office locked in its place');
  });

  test('stands with its site, its segment or between the sites that it joins', () => {
    const { changes } = compareDesigns(emptyDesign('Nothing'), hubDesign(2));
    const groups = [...new Set(changes.map(({ group }) => group.name))];
    expect(groups).toEqual([
      'Gullhaven',
      'Head office',
      'Orrin Point',
      'Segment A (Segment A)',
      'Between Gullhaven and Head office',
      'Between Head office and Orrin Point',
      'Transports',
      ...(groups.includes('Equipment profiles') ? ['Equipment profiles'] : []),
      'Title block',
    ]);
  });

  test('tells of the order and of long text without showing the same twice', () => {
    const longText = 'x'.repeat(80);
    const before = applyPatch(pair, { sites: { s0: { notes: `${longText} one` } } });
    expect(said({ sites: { s0: { notes: `${longText} two` } } }, before)).toEqual([
      'Notes of site Head office rewritten',
    ]);
    const subnets = ['10.0.0.0/24', '10.0.1.0/24'];
    const listed = applyPatch(pair, { segments: { a: { sites: { s0: { subnets } } } } });
    expect(
      said({ segments: { a: { sites: { s0: { subnets: [...subnets].reverse() } } } } }, listed),
    ).toHaveLength(1);
  });

  test('finds the faults that were planted in the demo, and the way back', () => {
    const [sound, faulty] = [demoDesign('fault-free'), demoDesign('planted-faults')];
    const there = compareDesigns(sound, faulty).changes;
    const back = compareDesigns(faulty, sound).changes;
    expect(there.length).toBeGreaterThan(3);
    expect(there.some(({ sentence }) => /^VNI of tunnel .* → \d+ at /.test(sentence))).toBe(true);
    expect(back).toHaveLength(there.length);
    const opposite = { added: 'removed', removed: 'added', changed: 'changed' } as const;
    const kinds = (changes: readonly Change[]) => changes.map(({ kind }) => kind).sort();
    expect(kinds(back)).toEqual(there.map(({ kind }) => opposite[kind]).sort());
  });
});

describe('of any two designs', () => {
  const twoDesigns = fc
    .tuple(
      generatedDesign,
      fc.array(generatedEdit, { minLength: 0, maxLength: 6 }),
      generatedDesign,
      fc.boolean(),
    )
    .map(([before, edits, other, isFar]): readonly [Design, Design] => [
      before,
      isFar ? other : edits.reduce((design, edit) => edit(design), before),
    ]);
  const leaves = (value: unknown, path: readonly string[] = []): readonly (readonly string[])[] =>
    typeof value !== 'object' || value === null || Array.isArray(value) || Object.keys(value).length === 0
      ? [path]
      : Object.entries(value).flatMap(([key, member]) => leaves(member, [...path, key]));
  const isWithin = (path: readonly string[], outer: readonly string[]): boolean =>
    outer.every((key, i) => path[i] === key);

  test('the patch turns one into the other, every change has a sentence, and what is the same has none', () => {
    fc.assert(
      fc.property(twoDesigns, ([before, after]) => {
        const { patch, changes } = compareDesigns(before, after);
        expect(applyPatch(before, patch)).toEqual(after);
        const told = changes.flatMap(({ paths }) => paths);
        for (const leaf of Object.keys(patch).length === 0 ? [] : leaves(patch))
          expect(
            told.some((path) => isWithin(leaf, path) || isWithin(path, leaf)),
            leaf.join('/'),
          ).toBe(true);
        for (const path of told)
          expect(
            leaves(patch).some((leaf) => isWithin(leaf, path) || isWithin(path, leaf)),
            path.join('/'),
          ).toBe(true);
        expect(compareDesigns(after, structuredClone(after)).changes).toEqual([]);
        for (const { sentence } of changes) {
          const [was = '', is] = sentence.split(' → ');
          // A list may end with what is left of it, and a refusal with what is granted.
          const repeats =
            is !== undefined && was.endsWith(` ${is}`) && !/(,|not|to)$/.test(was.slice(0, -is.length - 1));
          expect(repeats, sentence).toBe(false);
          expect(sentence).not.toMatch(/undefined|\[object| {2}|^.? ?$/);
        }
      }),
      { numRuns: 60 },
    );
  });

  test('sentences name no internal ids', () => {
    const ids = new Set<string>();
    const marked = (design: Design): Design => {
      for (const collection of collections) for (const id of Object.keys(design[collection])) ids.add(id);
      for (const device of Object.values(design.devices))
        for (const id of Object.keys(device.ports)) ids.add(id);
      for (const { circuits, policy } of Object.values(design.forwarders))
        for (const id of [...Object.keys(circuits), ...Object.keys(policy ?? {})]) ids.add(id);
      const mark = (value: unknown, key = ''): unknown => {
        if (typeof value === 'string')
          return !['name', 'mode', 'isolation'].includes(key) && ids.has(value) ? `ID-${value}` : value;
        if (Array.isArray(value)) return value.map((item) => mark(item));
        if (typeof value !== 'object' || value === null) return value;
        return Object.fromEntries(
          Object.entries(value).map(([name, member]) => [
            ids.has(name) && !['a', 'b'].includes(name) ? `ID-${name}` : name,
            mark(member, name),
          ]),
        );
      };
      return mark(design) as Design;
    };
    fc.assert(
      fc.property(twoDesigns, ([before, after]) => {
        for (const { sentence, group } of compareDesigns(marked(before), marked(after)).changes)
          expect(`${group.name}: ${sentence}`).not.toContain('ID-');
      }),
      { numRuns: 60 },
    );
  });
});

describe('the words', () => {
  type Schema = {
    readonly properties?: { readonly [key: string]: Schema };
    readonly anyOf?: readonly Schema[];
    readonly oneOf?: readonly Schema[];
    readonly additionalProperties?: Schema | boolean;
  };
  const parts = ['devices.ports', 'forwarders.circuits', 'forwarders.policy', 'segments.sites'];

  /** The properties of a place of the model, down to where words exist for a whole value. */
  const propertiesIn = (place: string, schema: Schema, prefix = ''): readonly string[] =>
    [schema, ...(schema.anyOf ?? []), ...(schema.oneOf ?? [])].flatMap(({ properties = {} }) =>
      Object.entries(properties).flatMap(([key, inner]): readonly string[] => {
        const property = `${prefix}${key}`;
        if (parts.includes(`${place}.${key}`) && prefix === '') {
          const part = (inner.additionalProperties ?? {}) as Schema;
          expect(Object.keys(propertyWords[`${place}.${key}`]!)).toEqual(
            expect.arrayContaining([...propertiesIn(`${place}.${key}`, part)]),
          );
          return [property];
        }
        if (prefix === '' && (key === 'a' || key === 'b') && place !== 'links')
          return propertiesIn(place, inner);
        if (prefix === '' && (key === 'a' || key === 'b')) return [];
        const table = Object.keys(propertyWords[place]!);
        const goesDeeper = table.some((known) => known.startsWith(`${property}.`));
        return goesDeeper ? [property, ...propertiesIn(place, inner, `${property}.`)] : [property];
      }),
    );

  test.each([...collections, 'meta'] as const)('know every property of %s', (place) => {
    const schema = place === 'meta' ? metaSchema : entrySchemas[place];
    const found = propertiesIn(place, z.toJSONSchema(schema, { unrepresentable: 'any' }) as Schema);
    expect(found.length).toBeGreaterThan(1);
    expect(Object.keys(propertyWords[place]!)).toEqual(expect.arrayContaining([...new Set(found)]));
  });
});
