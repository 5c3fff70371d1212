import { describe, expect, test } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { limits } from '../../../server/services/limits.ts';
import { settleEdits } from '../../../server/services/settle-edits.ts';
import { pairDesign } from '../../support/designs.ts';

const design = pairDesign();
const edit = (patch: unknown, editId = 'e1') => ({ editId, patch: patch as MergePatch });

function settled(before: Design, patches: readonly unknown[], since: readonly unknown[] = []) {
  const result = settleEdits(
    before,
    patches.map((patch, index) => edit(patch, `e${index}`)),
    since as MergePatch[],
  );
  if (!result.ok) throw new Error(JSON.stringify(result.problems));
  expect(parseDesign(result.document)).toEqual({ ok: true, value: result.document });
  const replayed = result.edits.reduce<Design>((at, { patch }) => applyPatch(at, patch), before);
  expect(replayed).toEqual(result.document);
  return result;
}

function problemsOf(before: Design, ...patches: readonly unknown[]) {
  const result = settleEdits(
    before,
    patches.map((patch) => edit(patch)),
    [],
  );
  return result.ok ? [] : result.problems;
}

describe('edits on the newest state', () => {
  test('are taken in order, as they are', () => {
    const patches = [{ sites: { s0: { name: 'Quay' } } }, { sites: { s0: { name: 'Pier' } } }];
    const { document, edits } = settled(design, patches);
    expect(document.sites['s0']?.name).toBe('Pier');
    expect(edits).toEqual(patches.map((patch, index) => ({ editId: `e${index}`, patch, repair: false })));
  });

  test('are refused together when one leaves no valid design', () => {
    expect(
      problemsOf(
        design,
        { sites: { s0: { name: 'Quay' } } },
        { tunnels: { 'tn-s0-s1-a': { a: { vni: -1 } } } },
      ),
    ).toEqual([
      {
        path: 'tunnels.tn-s0-s1-a.a.vni',
        value: '-1',
        expected: 'expected a VNI from 0 to 16777215',
      },
    ]);
  });

  test.each([
    ['a format of its own', { format: null }],
    ['a collection put out', { devices: null }],
    ['a collection made a list', { devices: [] }],
    ['a field that no design has', { colour: 'red' }],
    ['an entry that is a word', { devices: { 'fw-s0': 'firewall' } }],
    ['a part of an entry that does not exist', { devices: { 'fw-none': { name: 'x' } } }],
    ['an id with capitals', { sites: { Quay: { name: 'Quay' } } }],
  ])('are refused with %s', (_case, patch) => {
    expect(problemsOf(design, patch)).not.toEqual([]);
  });

  test.each(['__proto__', 'constructor', 'prototype'])('are refused with a key %s anywhere', (key) => {
    for (const text of [
      `{"${key}":{"polluted":true}}`,
      `{"devices":{"${key}":{"polluted":true}}}`,
      `{"devices":{"fw-s0":{"ports":{"${key}":{"polluted":true}}}}}`,
      `{"layout":{"devices":{"${key}":{"x":1,"y":1}}}}`,
      `{"tunnels":{"tn-s0-s1-a":{"a":{"via":{"${key}":null}}}}}`,
    ]) {
      const problems = problemsOf(design, JSON.parse(text));
      expect(problems).toHaveLength(1);
      expect(problems[0]?.path).toContain(key);
    }
    expect(({} as { polluted?: unknown }).polluted).toBeUndefined();
  });

  test('that take away what others name are followed by one repair', () => {
    const { document, edits } = settled(design, [{ sites: { s1: null } }]);
    expect(edits).toHaveLength(2);
    expect(edits[1]).toMatchObject({ repair: true });
    expect(Object.keys(document.devices).some((id) => id.endsWith('s1'))).toBe(false);
    expect(Object.keys(document.tunnels)).toEqual([]);
  });

  test('that name something that never was are repaired as well', () => {
    const { document, edits } = settled(design, [{ devices: { 'fw-s0': { profile: 'none' } } }]);
    expect(document.devices['fw-s0']?.profile).toBeUndefined();
    expect(edits.map(({ repair }) => repair)).toEqual([false, true]);
  });

  test('that take away a site with thousands of devices are settled at once', () => {
    const devices = Object.fromEntries(
      Array.from({ length: 5000 }, (_, index) => [
        `sw-${index}`,
        { kind: 'switch', site: 's1', name: `sw-${index}`, ports: {} },
      ]),
    );
    const large = settled(design, [{ devices }]).document;
    // Once a removal looked at all references again for each device, which took minutes: the test's own limit would tell.
    expect(Object.keys(settled(large, [{ sites: { s1: null } }]).document.devices)).not.toContain('sw-7');
  });

  test('that would make the design too large are refused with its size', () => {
    const notes = Object.fromEntries(
      Array.from({ length: limits.designEntries }, (_, index) => [`n${index}`, { text: 'x' }]),
    );
    const result = settleEdits(design, [edit({ notes })], []);
    expect(result).toMatchObject({ ok: false, reason: 'too-large' });
  });
});

describe('edits on an older state', () => {
  const removeDevice = { devices: { 'h-s1-a': null }, links: { 'cb-h-s1-a': null } };
  const withoutDevice = settled(design, [removeDevice]).document;

  test('merge by property with what others did to the same entry', () => {
    const theirs = { sites: { s0: { notes: 'Ask for the key' } } };
    const { document } = settled(applyPatch(design, theirs), [{ sites: { s0: { name: 'Quay' } } }], [theirs]);
    expect(document.sites['s0']).toEqual({ name: 'Quay', notes: 'Ask for the key' });
  });

  test('stand against an earlier edit of the same property', () => {
    const theirs = { sites: { s0: { name: 'Pier' } } };
    const { document } = settled(applyPatch(design, theirs), [{ sites: { s0: { name: 'Quay' } } }], [theirs]);
    expect(document.sites['s0']?.name).toBe('Quay');
  });

  test('leave out what lies inside an entry removed meanwhile, and keep the rest', () => {
    const mine = { devices: { 'h-s1-a': { name: 'kiosk' }, 'fw-s0': { name: 'gate' } } };
    const { document, edits } = settled(withoutDevice, [mine], [removeDevice]);
    expect(document.devices['h-s1-a']).toBeUndefined();
    expect(document.devices['fw-s0']?.name).toBe('gate');
    expect(edits).toEqual([
      { editId: 'e0', patch: { devices: { 'fw-s0': { name: 'gate' } } }, repair: false },
    ]);
  });

  test('may bring an entry back whole', () => {
    const mine = { devices: { 'h-s1-a': design.devices['h-s1-a'] } };
    const { document } = settled(withoutDevice, [mine], [removeDevice]);
    expect(document.devices['h-s1-a']).toEqual(design.devices['h-s1-a']);
  });

  test('leave out what lies inside an entry of an entry', () => {
    const theirs = { forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': null } } } };
    const mine = { forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': { isolation: 'far' } } } } };
    const { document } = settled(applyPatch(design, theirs), [mine], [theirs]);
    expect(Object.keys(document.forwarders['br-s0-a']!.circuits)).toEqual(['access']);
  });

  test('leave out a property that what an entry became does not have', () => {
    const circuit = ['forwarders', 'br-s0-a', 'circuits', 'access'] as const;
    const at = (change: unknown): MergePatch =>
      circuit.reduceRight<unknown>((inner, key) => ({ [key]: inner }), change) as MergePatch;
    const theirs = at({ kind: 'tunnel', tunnel: 'tn-s0-s1-a', port: null, vlans: null });
    const mine = at({ vlans: [120] });
    const { document } = settled(applyPatch(design, theirs), [mine], [theirs]);
    expect(document.forwarders['br-s0-a']!.circuits['access']).toMatchObject({ kind: 'tunnel' });
  });

  test('lose the place of what was removed meanwhile to the repair', () => {
    const mine = { layout: { devices: { 'h-s1-a': { x: 10, y: 20 } } } };
    const { document, edits } = settled(withoutDevice, [mine], [removeDevice]);
    expect(document.layout.devices?.['h-s1-a']).toBeUndefined();
    expect(edits.map(({ repair }) => repair)).toEqual([false, true]);
  });

  test('are still refused when nothing removed explains the fault', () => {
    const result = settleEdits(
      withoutDevice,
      [edit({ devices: { 'fw-s0': { name: '' } } })],
      [removeDevice as MergePatch],
    );
    expect(result).toMatchObject({ ok: false, problems: [{ path: 'devices.fw-s0.name' }] });
  });
});
