import { commentPieces } from './comment-pieces.ts';

interface CommentBodyProps {
  readonly body: string;
  readonly mentions: readonly { readonly id: string; readonly name: string }[];
}

/** A comment's words with their line breaks. */
export function CommentBody({ body, mentions }: CommentBodyProps) {
  return (
    <p className="text-base break-words whitespace-pre-line">
      {commentPieces(body, mentions).map((piece, at) => {
        switch (piece.kind) {
          case 'text':
            return piece.text;
          case 'mention':
            return (
              <span key={at} className="bg-blue-wash px-2 font-semibold text-blue">
                @{piece.name}
              </span>
            );
          case 'link':
            return (
              <a
                key={at}
                href={piece.href}
                target="_blank"
                rel="noopener noreferrer"
                className="text-blue underline"
              >
                {piece.href}
              </a>
            );
        }
      })}
    </p>
  );
}
