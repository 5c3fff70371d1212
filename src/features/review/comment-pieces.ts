import { mentionPattern } from '../../contract/comments.ts';

export type CommentPiece =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'link'; readonly href: string }
  | { readonly kind: 'mention'; readonly name: string };

const linkPattern = /\bhttps?:\/\/[^\s<>"“”]+/gu;

/** Stops and brackets after an address belong to the sentence, a bracket that was opened in it to the address. */
const withoutTail = (href: string): string => {
  let end = href;
  for (;;) {
    const last = end.at(-1) ?? '';
    const isLoose = last === ')' && !end.includes('(');
    if (!/[.,;:!?'’\]}]/u.test(last) && !isLoose) return end;
    end = end.slice(0, -1);
  }
};

const linked = (text: string): readonly CommentPiece[] => {
  const pieces: CommentPiece[] = [];
  let at = 0;
  for (const match of text.matchAll(linkPattern)) {
    const href = withoutTail(match[0]);
    if (!URL.canParse(href)) continue;
    if (match.index > at) pieces.push({ kind: 'text', text: text.slice(at, match.index) });
    pieces.push({ kind: 'link', href });
    at = match.index + href.length;
  }
  if (at < text.length) pieces.push({ kind: 'text', text: text.slice(at) });
  return pieces;
};

/** A comment's words as text, addresses of the web, and people as they are called now. Nothing else is markup. */
export const commentPieces = (
  body: string,
  mentions: readonly { readonly id: string; readonly name: string }[],
): readonly CommentPiece[] => {
  const pieces: CommentPiece[] = [];
  let at = 0;
  for (const match of body.matchAll(mentionPattern)) {
    pieces.push(...linked(body.slice(at, match.index)));
    const name = mentions.find(({ id }) => id === match[1])?.name ?? 'somebody who left';
    pieces.push({ kind: 'mention', name });
    at = match.index + match[0].length;
  }
  return [...pieces, ...linked(body.slice(at))];
};
