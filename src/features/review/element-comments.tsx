import { useQuery } from '@tanstack/react-query';
import { Button } from '../../components/button.tsx';
import { mentionToken } from '../../contract/comments.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { commentsQuery } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { placeOfPin } from './filter-threads.ts';

interface ElementCommentsProps {
  readonly of: ElementRef;
  /** Undefined for readers who may not comment. */
  readonly onComment: (() => void) | undefined;
  readonly onOpenThread: (threadId: string) => void;
}

/** At the foot of an element's inspector: the open threads about it, and the way to begin one. */
export function ElementComments({ of: ref, onComment, onOpenThread }: ElementCommentsProps) {
  const { designId } = useDesignPlace();
  const { data } = useQuery(commentsQuery(designId));
  const open = (data?.threads ?? []).filter(
    ({ pin, resolvedAt }) => resolvedAt === null && placeOfPin(pin) === elementKey(ref),
  );
  if (open.length === 0 && onComment === undefined) return null;
  return (
    <section aria-label="Comments" className="flex flex-col gap-6 border-t border-rule-2 pt-10">
      <div className="flex items-center gap-8">
        <h3 className="text-section font-semibold">Comments</h3>
        {onComment !== undefined && (
          <Button small className="ml-auto" onClick={onComment}>
            Comment…
          </Button>
        )}
      </div>
      {open.map(({ id, comments: [first, ...replies] }) => (
        <button
          key={id}
          type="button"
          onClick={() => onOpenThread(id)}
          className="border border-rule-strong bg-field px-9 py-5 text-left text-base hover:bg-hover"
        >
          <span className="block text-label text-ink-3">
            {first?.author?.name ?? 'Somebody who left'}
            {replies.length > 0 && `, ${replies.length === 1 ? '1 reply' : `${replies.length} replies`}`}
          </span>
          <span className="line-clamp-2 break-words">{plainWords(first)}</span>
        </button>
      ))}
    </section>
  );
}

type FirstComment =
  | { readonly body: string; readonly mentions: readonly { readonly id: string; readonly name: string }[] }
  | undefined;

const plainWords = (comment: FirstComment): string =>
  comment === undefined || comment.body === ''
    ? 'Deleted by its author.'
    : comment.mentions.reduce(
        (text, { id, name }) => text.replaceAll(mentionToken(id), `@${name}`),
        comment.body,
      );
