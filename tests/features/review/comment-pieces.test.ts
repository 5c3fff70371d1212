import { expect, test } from 'vitest';
import { mentionToken } from '#contract/comments.ts';
import { commentPieces } from '../../../src/features/review/comment-pieces.ts';

const id = '00000000-0000-4000-8000-000000000001';
const links = (body: string) =>
  commentPieces(body, []).flatMap((piece) => (piece.kind === 'link' ? [piece.href] : []));

test('people stand in a comment as they are called now', () => {
  expect(commentPieces(`${mentionToken(id)}: look`, [{ id, name: 'Rosa Halloran' }])).toEqual([
    { kind: 'mention', name: 'Rosa Halloran' },
    { kind: 'text', text: ': look' },
  ]);
  expect(commentPieces(mentionToken(id), [])).toEqual([{ kind: 'mention', name: 'somebody who left' }]);
});

test.each([
  ['See https://wiki.saltmarsh.example/l2.', ['https://wiki.saltmarsh.example/l2']],
  ['(http://a.example/b(c) and https://d.example)', ['http://a.example/b(c)', 'https://d.example']],
  ['https://a.example/?q=1&r=2, then', ['https://a.example/?q=1&r=2']],
])('addresses of the web can be followed, without the stops of the sentence: %s', (body, hrefs) => {
  expect(links(body)).toEqual(hrefs);
});

test.each([
  'javascript:alert(1)',
  'ftp://a.example',
  'data:text/html,x',
  'www.a.example',
  '<a href="x">y</a>',
])('nothing else is a link: %s', (body) => {
  expect(commentPieces(body, [])).toEqual([{ kind: 'text', text: body }]);
});
