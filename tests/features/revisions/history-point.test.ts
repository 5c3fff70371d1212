import { describe, expect, test } from 'vitest';
import type { Revision } from '../../../src/contract/revisions.ts';
import { builtProblem } from '../../../src/features/revisions/built-problem.ts';
import { pointWords, readPoint, writePoint } from '../../../src/features/revisions/history-point.ts';
import { timelineEntries } from '../../../src/features/revisions/timeline-entries.ts';
import { missingOrTooLong, tooLong } from '../../../src/features/revisions/words-cell.tsx';

const revision = (label: string, sequence: number): Revision => ({
  id: `r-${label}`,
  designId: 'd-1',
  number: 1,
  label,
  state: 'approved',
  sequence,
  contentHash: 'f'.repeat(64),
  engineVersion: '0.1.0',
  counts: { blocking: 0, degrading: 0, advisory: 0 },
  waived: 0,
  message: '',
  askedBy: { id: 'p-1', name: 'Rosa Halloran' },
  askedAt: '2026-12-01T10:00:00.000Z',
  decidedBy: { id: 'p-2', name: 'Noor Okafor' },
  decidedAt: '2026-12-01T12:00:00.000Z',
  note: '',
  builtBy: null,
  builtOn: null,
  supersededBy: null,
  supersededAt: null,
  supersededNote: '',
});

describe('a moment in the address', () => {
  const revisions = [revision('C', 4)];
  test.each(['now', 'revision-C', 'patch-0', 'patch-7'])('%s reads back as it is written', (text) => {
    const read = readPoint('from', text, revisions, 7);
    expect(read.ok && writePoint(read.point)).toBe(text);
    expect(read.ok && pointWords(read.point)).not.toBe('');
  });
  test.each([
    ['revision-D', 'is no revision of this design'],
    ['patch-8', 'is yet to come, the last is patch-7'],
    ['yesterday', 'is no moment of this design'],
  ])('%s is named with what is wrong and the way out', (text, why) => {
    expect(readPoint('from', text, revisions, 7)).toEqual({
      ok: false,
      problem: `‘from’ in the address is ${text}, which ${why}. Choose another below.`,
    });
  });
});

test('the timeline goes back from what was frozen last, after the edits that are in it, to the beginning', () => {
  const sitting = (firstSequence: number, lastSequence: number) => ({
    by: 'Rosa Halloran',
    from: '2026-12-01T09:00:00.000Z',
    until: '2026-12-01T09:20:00.000Z',
    firstSequence,
    lastSequence,
  });
  const entries = timelineEntries([revision('D', 9), revision('C', 4)], {
    sittings: [sitting(6, 8), sitting(1, 4)],
    createdBy: null,
    createdAt: '2026-11-30T09:00:00.000Z',
  });
  expect(
    entries.map((entry) =>
      entry.kind === 'revision'
        ? entry.revision.label
        : entry.kind === 'sitting'
          ? entry.sitting.lastSequence
          : entry.kind,
    ),
  ).toEqual(['D', 8, 'C', 4, 'begun']);
});

describe('what a dialog says of its fields', () => {
  test('a day of building lies between the approval and today', () => {
    const now = new Date(2026, 11, 5, 12);
    expect(builtProblem('2026-12-03', '2026-12-01T12:00:00Z', now)).toBeUndefined();
    expect(builtProblem('', null, now)).toContain('is empty');
    expect(builtProblem('2026-11-20', '2026-12-01T12:00:00Z', now)).toContain('before the approval');
    expect(builtProblem('2026-12-06', '2026-12-01T12:00:00Z', now)).toContain('yet to come');
  });
  test('a reason is given and fits', () => {
    expect(missingOrTooLong('Reason', ' ', 'Say what has to be mended.')).toBe(
      'Reason is empty. Say what has to be mended.',
    );
    expect(tooLong('Note', 'x'.repeat(2001))).toContain('2001 characters');
    expect(missingOrTooLong('Reason', 'Fine', '')).toBeUndefined();
  });
});
