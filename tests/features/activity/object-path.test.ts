import { expect, test } from 'vitest';
import type { ActivityObjectKind } from '#contract/activity.ts';
import { objectPath } from '../../../src/features/activity/object-path.ts';

const design = { id: 'd-1', title: 'Terminals stretch' };
const pathOf = (kind: ActivityObjectKind, isThere = true, of: typeof design | null = design) =>
  objectPath('w-1', { object: { kind, id: 'o-1', name: 'It', isThere }, design: of });

test.each([
  ['engagement', '/workspaces/w-1/engagements'],
  ['design', '/designs/d-1'],
  ['revision', '/designs/d-1/revisions/o-1'],
  ['comment', '/designs/d-1/review'],
  ['waiver', '/designs/d-1/checks'],
  ['share', '/designs/d-1'],
  ['person', '/workspaces/w-1/people'],
  ['profile', '/workspaces/w-1/profiles'],
] as const)('what was done to a %s leads to where it is', (kind, path) => {
  expect(pathOf(kind)).toBe(path);
});

test('what is gone, or has no page, leads nowhere', () => {
  expect(pathOf('design', false)).toBeUndefined();
  expect(pathOf('revision', true, null)).toBeUndefined();
  expect(pathOf('workspace')).toBeUndefined();
});
