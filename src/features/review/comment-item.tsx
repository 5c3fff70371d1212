import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { PersonTag } from '../../components/person-tag.tsx';
import { showToast } from '../../components/toast.tsx';
import { commentEditableForMinutes, type Comment, type Mentionable } from '../../contract/comments.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dateAndTime, relativeTime } from '../../lib/format-time.ts';
import { useSession } from '../../lib/session.ts';
import { useNow } from '../../lib/use-now.ts';
import { useChangeComment, useDeleteComment } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { CommentBody } from './comment-body.tsx';
import { Composer } from './composer.tsx';
import type { ReviewTools } from './review-tools.ts';
import { SuggestionBlock } from './suggestion-block.tsx';

interface CommentItemProps {
  readonly comment: Comment;
  readonly members: readonly Mentionable[];
  readonly mayComment: boolean;
  readonly onPreview: ReviewTools['onPreview'];
}

/** One comment: who, when, the words, what it suggests; one's own can be changed and deleted here. */
export function CommentItem({ comment, members, mayComment, onPreview }: CommentItemProps) {
  const now = useNow();
  const personId = useSession()?.person?.id;
  const { designId } = useDesignPlace();
  const [editing, setEditing] = useState(false);
  const [deleting, setDeleting] = useState(false);
  const changing = useChangeComment(designId);
  const removing = useDeleteComment(designId);
  const { author, body, mentions, revision, suggestion, editedAt, deletedAt } = comment;
  const writtenAt = new Date(comment.writtenAt);
  const isOwn = author !== null && author.id === personId && deletedAt === null && mayComment;
  const canChange = isOwn && now.getTime() - writtenAt.getTime() <= commentEditableForMinutes * 60_000;
  const canDelete = isOwn && (suggestion === null || suggestion.appliedAt === null);
  const name = author?.name ?? 'Somebody who left';
  const remove = (): void =>
    removing.mutate(comment.id, {
      onSuccess: () => setDeleting(false),
      onError: (error) => {
        setDeleting(false);
        showToast({ tone: 'failed', text: `The comment was not deleted. ${asApiError(error).message}` });
      },
    });
  return (
    <li className="flex gap-10 border-t border-rule-2 px-12 py-8 first:border-t-0">
      <PersonTag
        initials={author?.initials ?? '–'}
        name={name}
        presence={author === null ? 'away' : 'here'}
      />
      <div className="min-w-0 flex-1">
        <div className="flex flex-wrap items-baseline gap-x-8 text-note text-ink-2">
          <span className="text-base font-semibold text-ink">{name}</span>
          <time dateTime={comment.writtenAt} title={dateAndTime(writtenAt)}>
            {relativeTime(writtenAt, now)}
          </time>
          {editedAt !== null && <span title={dateAndTime(new Date(editedAt))}>edited</span>}
          {revision !== null && <span>on revision {revision.label}</span>}
        </div>
        {editing ? (
          <div className="mt-6">
            <Composer
              label="Your comment"
              members={members}
              others={mentions}
              initialBody={body}
              submitWords="Save"
              busy={changing.isPending}
              failure={changing.error === null ? undefined : asApiError(changing.error).message}
              onCancel={() => setEditing(false)}
              onSubmit={(next) =>
                changing.mutate({ commentId: comment.id, body: next }, { onSuccess: () => setEditing(false) })
              }
            />
          </div>
        ) : deletedAt !== null ? (
          <p className="text-base text-ink-3 italic">Deleted by its author.</p>
        ) : (
          <CommentBody body={body} mentions={mentions} />
        )}
        {suggestion !== null && (
          <SuggestionBlock commentId={comment.id} suggestion={suggestion} onPreview={onPreview} />
        )}
      </div>
      {(canChange || canDelete) && !editing && (
        <Menu
          align="end"
          trigger={
            <Button
              kind="quiet"
              iconOnly
              small
              aria-label="What can be done with your comment"
              icon={<Icon name="more" />}
            />
          }
          groups={[
            {
              actions: [
                ...(canChange ? [{ label: 'Edit', onSelect: () => setEditing(true) }] : []),
                ...(canDelete ? [{ label: 'Delete…', danger: true, onSelect: () => setDeleting(true) }] : []),
              ],
            },
          ]}
        />
      )}
      <Dialog
        open={deleting}
        onOpenChange={setDeleting}
        title="Delete your comment"
        description="Its words are gone for good. Where others replied, its place stays and says that it was deleted."
        footer={
          <>
            <Button onClick={() => setDeleting(false)}>Keep it</Button>
            <Button kind="danger" busy={removing.isPending} onClick={remove}>
              Delete
            </Button>
          </>
        }
      >
        <div className="border border-rule-2 bg-raise px-12 py-8">
          <CommentBody body={body} mentions={mentions} />
        </div>
      </Dialog>
    </li>
  );
}
