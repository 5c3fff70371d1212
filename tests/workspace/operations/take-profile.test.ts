import { expect, test } from 'vitest';
import { copyIdOf } from '../../../src/contract/profiles.ts';
import type { Design } from '../../../src/engine/model/design.ts';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { parseDesign } from '../../../src/engine/model/parse-design.ts';
import type { Operation } from '../../../src/workspace/operations/operation.ts';
import {
  giveProfile,
  isCopyOlder,
  takeNewerProfile,
} from '../../../src/workspace/operations/take-profile.ts';
import { pairDesign } from '../../support/designs.ts';

const id = 'b6a1f1de-9f0e-4a52-8d7e-0c8f6f2f9b11';
const copyId = copyIdOf(id);
const original = {
  id,
  profile: {
    name: 'Small branch gateway',
    encrypted: { oneFlowBps: 1_000, manyFlowsBps: 2_000 },
    macTable: 5,
  },
};
const after = (design: Design, operation: Operation): Design => {
  if (!operation.ok) throw new Error(operation.why);
  const next = applyPatch(design, operation.patch);
  expect(parseDesign(next)).toMatchObject({ ok: true });
  return next;
};

test('a device that is given a profile of the workspace brings a copy of it into the design', () => {
  const design = after(pairDesign(), giveProfile(pairDesign(), 'fw-s0', original));
  expect(design.devices['fw-s0']!.profile).toBe(copyId);
  expect(design.profiles).toEqual({ [copyId]: original.profile });
  expect(isCopyOlder(design, original)).toBe(false);
});

test('a second device shares the copy, which stays as it is', () => {
  const first = after(pairDesign(), giveProfile(pairDesign(), 'fw-s0', original));
  const newer = { id, profile: { name: 'Small branch gateway', macTable: 9 } };
  const second = after(first, giveProfile(first, 'fw-s1', newer));
  expect(second.devices['fw-s1']!.profile).toBe(copyId);
  expect(second.profiles[copyId]).toEqual(original.profile);
  expect(isCopyOlder(second, newer)).toBe(true);
});

test('taking the newer version leaves nothing of the older one', () => {
  const first = after(pairDesign(), giveProfile(pairDesign(), 'fw-s0', original));
  const newer = { id, profile: { name: 'Branch gateway', encrypted: { oneFlowBps: 3_000 } } };
  const next = after(first, takeNewerProfile(first, newer));
  expect(next.profiles[copyId]).toEqual(newer.profile);
  expect(isCopyOlder(next, newer)).toBe(false);
});

test('a design without a copy has nothing that could be older', () => {
  expect(isCopyOlder(pairDesign(), original)).toBe(false);
});
