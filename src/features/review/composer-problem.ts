import { mostCommentCharacters } from '../../contract/comments.ts';
import { pastedSecret } from '../../engine/model/pasted-secret.ts';

/** Why words can't be sent, as a sentence with the way out; undefined when they can. */
export const composerProblem = (body: string): string | undefined => {
  const length = body.trim().length;
  if (length === 0) return 'There are no words yet: write what the reader should know or do.';
  if (length > mostCommentCharacters)
    return `The comment has ${length.toLocaleString('en-GB')} characters: at most ${mostCommentCharacters.toLocaleString('en-GB')} can be sent; make two of it.`;
  const secret = pastedSecret(body);
  if (secret !== undefined)
    return `“${secret.slice(0, 3)}…” looks like a key or a password. Comments keep none: write the name under which your vault keeps it, and change the key if it was ever sent.`;
  return undefined;
};
