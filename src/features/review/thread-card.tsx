import { useEffect, useRef, useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Mentionable, Thread } from '../../contract/comments.ts';
import { asApiError } from '../../lib/api-error.ts';
import { classNames } from '../../lib/class-names.ts';
import { relativeTime } from '../../lib/format-time.ts';
import { useNow } from '../../lib/use-now.ts';
import { useResolveThread, useWriteComment } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { CommentItem } from './comment-item.tsx';
import { Composer } from './composer.tsx';
import type { PinWords } from './pin-words.ts';
import type { ReviewTools } from './review-tools.ts';

interface ThreadCardProps {
  readonly thread: Thread;
  readonly pin: PinWords;
  /** Where on the sheet, such as 'B5'. */
  readonly zone: string | undefined;
  readonly members: readonly Mentionable[];
  readonly mayComment: boolean;
  /** An address led to this thread. */
  readonly asked: boolean;
  readonly tools: ReviewTools;
}

/** A thread with all that can be done in it. */
export function ThreadCard({ thread, pin, zone, members, mayComment, asked, tools }: ThreadCardProps) {
  const now = useNow();
  const { designId } = useDesignPlace();
  const [replying, setReplying] = useState(false);
  const resolving = useResolveThread(designId);
  const writing = useWriteComment(designId);
  const card = useRef<HTMLElement>(null);
  useEffect(() => {
    if (!asked) return;
    card.current?.scrollIntoView({ block: 'nearest' });
    card.current?.focus({ preventScroll: true });
  }, [asked]);
  const { resolvedAt, resolvedBy } = thread;
  const isResolved = resolvedAt !== null;
  const about = `${pin.kind} ${pin.name}`;
  const resolve = (resolved: boolean): void =>
    resolving.mutate(
      { threadId: thread.id, resolved },
      {
        onError: (error) =>
          void showToast({
            tone: 'failed',
            text: `The thread was not ${resolved ? 'resolved' : 'reopened'}. ${asApiError(error).message}`,
          }),
      },
    );
  return (
    <article
      ref={card}
      tabIndex={-1}
      aria-label={`Thread on ${about}`}
      className={classNames(
        'border bg-field outline-offset-2',
        asked ? 'border-blue shadow-[inset_4px_0_0_var(--blue)]' : 'border-rule-strong',
      )}
    >
      <header className="flex min-h-30 flex-wrap items-center gap-x-10 gap-y-4 border-b border-rule-strong bg-raise px-12 py-4 text-base">
        <h3 className="min-w-0 flex-1 break-words">
          <span className="text-ink-2">{pin.kind}</span> <span className="font-semibold">{pin.name}</span>
          {pin.property !== undefined && <span className="text-ink-2">, {pin.property}</span>}
          {pin.gone && (
            <span className="text-ink-2">
              {pin.kind === 'Finding' ? ' (no longer found)' : ' (no longer in the design)'}
            </span>
          )}
        </h3>
        {zone !== undefined && <span className="text-ink-2">at {zone}</span>}
        {tools.onShow !== undefined && pin.kind !== 'Design' && !pin.gone && (
          <Button small onClick={() => tools.onShow?.(thread.pin, thread.id)}>
            Show
          </Button>
        )}
      </header>
      <ul>
        {thread.comments.map((comment) => (
          <CommentItem
            key={comment.id}
            comment={comment}
            members={members}
            mayComment={mayComment}
            onPreview={tools.onPreview}
          />
        ))}
      </ul>
      {(mayComment || isResolved) && (
        <footer className="border-t border-rule-2 px-12 py-8">
          {replying ? (
            <Composer
              label="Reply"
              members={members}
              submitWords="Reply"
              busy={writing.isPending}
              failure={writing.error === null ? undefined : asApiError(writing.error).message}
              onCancel={() => setReplying(false)}
              onSubmit={(body) =>
                writing.mutate({ body, replyTo: thread.id }, { onSuccess: () => setReplying(false) })
              }
            />
          ) : (
            <div className="flex flex-wrap items-center gap-8 text-base">
              {isResolved && (
                <span className="mr-auto flex items-center gap-6 text-ink-2">
                  <Icon name="check" size={14} />
                  Resolved{resolvedBy === null ? '' : ` by ${resolvedBy.name}`},{' '}
                  {relativeTime(new Date(resolvedAt), now)}
                </span>
              )}
              {mayComment && !isResolved && (
                <>
                  <Button small onClick={() => setReplying(true)}>
                    Reply
                  </Button>
                  <Button small busy={resolving.isPending} onClick={() => resolve(true)}>
                    Resolve
                  </Button>
                </>
              )}
              {mayComment && isResolved && (
                <Button small busy={resolving.isPending} onClick={() => resolve(false)}>
                  Reopen
                </Button>
              )}
            </div>
          )}
        </footer>
      )}
    </article>
  );
}
