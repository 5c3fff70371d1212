import { describe, expect, test } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { patchDrift } from '#engine/model/patch-drift.ts';
import { pairDesign } from '../../support/designs.ts';

const design = pairDesign();
const [tunnel] = Object.keys(design.tunnels) as [string];
const driftAfter = (patch: MergePatch, meanwhile: MergePatch) =>
  patchDrift(applyPatch(design, meanwhile), patch, inversePatch(design, patch));

describe('a patch that waits', () => {
  const vni: MergePatch = { tunnels: { [tunnel]: { b: { vni: 777 } } } };
  const was = design.tunnels[tunnel]!.b.vni;

  test('fits while nothing of what it changes has changed', () => {
    expect(driftAfter(vni, {})).toEqual([]);
    expect(driftAfter(vni, { tunnels: { [tunnel]: { a: { vni: 5 }, name: 'renamed' } } })).toEqual([]);
    expect(driftAfter(vni, { sites: { s0: null } })).toEqual([]);
  });

  test('names the place where the value is another one by now, with all three values', () => {
    expect(driftAfter(vni, { tunnels: { [tunnel]: { b: { vni: 5 } } } })).toEqual([
      { path: ['tunnels', tunnel, 'b', 'vni'], was, now: 5, wanted: 777 },
    ]);
  });

  test('names the whole entry where that is gone', () => {
    const [drift, ...others] = driftAfter(vni, { tunnels: { [tunnel]: null } });
    expect(others).toEqual([]);
    expect(drift).toMatchObject({ path: ['tunnels', tunnel], now: undefined });
  });

  test('says so when somebody did the same meanwhile', () => {
    expect(driftAfter(vni, vni)).toMatchObject([{ now: 777, wanted: 777 }]);
  });

  test('that adds an entry fits as long as none of that name came', () => {
    const note = { notes: { n9: { text: 'Look here', rank: 'a' } } };
    expect(driftAfter(note, {})).toEqual([]);
    expect(driftAfter(note, { notes: { n9: { text: 'Other words', rank: 'a' } } })).toMatchObject([
      { path: ['notes', 'n9'], was: undefined },
    ]);
  });

  test('that removes an entry fits as long as that is what it was', () => {
    const removal = { tunnels: { [tunnel]: null } };
    expect(driftAfter(removal, {})).toEqual([]);
    expect(driftAfter(removal, { tunnels: { [tunnel]: { name: 'renamed' } } })).toMatchObject([
      { path: ['tunnels', tunnel], wanted: undefined },
    ]);
  });
});
