import { describe, expect, test } from 'vitest';
import { mentionToken } from '#contract/comments.ts';
import {
  membersFor,
  mentionAt,
  mentionLabel,
  toBody,
  toText,
  withMention,
} from '../../../src/features/review/composer-text.ts';

const id = (digit: number): string => `00000000-0000-4000-8000-00000000000${digit}`;
const rosa = { id: id(1), name: 'Rosa Halloran', role: 'architect' } as const;
const ros = { id: id(2), name: 'Rosa Hall', role: 'presales' } as const;
const noor = { id: id(3), name: 'Noor Okafor', role: 'reviewer' } as const;
const members = [rosa, ros, noor];

describe('what is typed behind an @', () => {
  test.each([
    ['@', 1, { from: 0, words: '' }],
    ['See @ro', 7, { from: 4, words: 'ro' }],
    ['(@Rosa Ha', 9, { from: 1, words: 'Rosa Ha' }],
    ['See @ro here', 7, { from: 4, words: 'ro' }],
  ])('%s is a mention', (text, caret, query) => {
    expect(mentionAt(text, caret)).toEqual(query);
  });

  test.each(['a.halloran@ternwick', 'no mention', '@one two three four five', '@ro\nnext'])(
    '%s is none',
    (text) => {
      expect(mentionAt(text, text.length)).toBeUndefined();
    },
  );

  test('finds people by the beginning of any part of their name', () => {
    expect(membersFor('hall', members)).toEqual([rosa, ros]);
    expect(membersFor('ROSA hallo', members)).toEqual([rosa]);
    expect(membersFor('', members)).toEqual(members);
    expect(membersFor('alloran', members)).toEqual([]);
  });

  test('gives way to the whole name, with room behind it', () => {
    expect(withMention('See @ro', 7, { from: 4, words: 'ro' }, rosa.name)).toEqual({
      text: 'See @Rosa Halloran ',
      caret: 19,
    });
    expect(withMention('See @ro, please', 7, { from: 4, words: 'ro' }, rosa.name)).toEqual({
      text: 'See @Rosa Halloran, please',
      caret: 18,
    });
  });
});

describe('a text with mentions', () => {
  test('is sent with tokens, and the longer of two names is meant where it stands', () => {
    expect(toBody('@Rosa Halloran and @Rosa Hall: see @Noor Okafor.', members)).toBe(
      `${mentionToken(rosa.id)} and ${mentionToken(ros.id)}: see ${mentionToken(noor.id)}.`,
    );
    expect(toBody('@Rosa Hallorans and @nobody', [rosa])).toBe('@Rosa Hallorans and @nobody');
  });

  test('comes back as it was typed', () => {
    const text = '@Rosa Halloran: why?\n@Noor Okafor';
    expect(toText(toBody(text, members), members)).toBe(text);
  });

  test('tells two people of one name apart by their roles', () => {
    const other = { ...rosa, id: id(4), role: 'owner' } as const;
    const both = [rosa, other];
    expect(both.map((each) => mentionLabel(each, both))).toEqual([
      'Rosa Halloran (architect)',
      'Rosa Halloran (owner)',
    ]);
    expect(toBody('@Rosa Halloran (owner) look', both)).toBe(`${mentionToken(other.id)} look`);
  });
});
