import type { Comment, Mentionable, Thread } from '#contract/comments.ts';

export const rosa: Mentionable = {
  id: '00000000-0000-4000-8000-000000000001',
  name: 'Rosa Halloran',
  initials: 'RH',
  role: 'architect',
};
export const noor: Mentionable = {
  id: '00000000-0000-4000-8000-000000000002',
  name: 'Noor Okafor',
  initials: 'NO',
  role: 'reviewer',
};

export const comment = (changes: Partial<Comment> = {}): Comment => ({
  id: 'c-1',
  author: { id: noor.id, name: noor.name, initials: noor.initials },
  writtenAt: new Date(Date.now() - 5 * 60_000).toISOString(),
  editedAt: null,
  deletedAt: null,
  body: 'Why this VNI?',
  mentions: [],
  revision: null,
  suggestion: null,
  ...changes,
});

export const thread = (changes: Partial<Thread> = {}): Thread => ({
  id: 't-1',
  pin: { kind: 'design' },
  resolvedBy: null,
  resolvedAt: null,
  comments: [comment()],
  ...changes,
});
