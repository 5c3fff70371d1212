import { useCallback, useMemo, useState, type ReactNode } from 'react';
import type { MenuAction } from '../../components/menu.tsx';
import { showToast } from '../../components/toast.tsx';
import type { PinTo } from '../../contract/comments.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import type { Fix } from '../../engine/rules/finding.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useWriteComment } from '../../workspace/comments-query.ts';
import { useDesignPlace, useMayHere } from '../../workspace/design-place.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { CommentDialog } from './comment-dialog.tsx';

export interface Commenting {
  /** Opens the dialog; undefined for readers who may not comment. */
  readonly ask: ((pin: PinTo) => void) | undefined;
  /** What an element's menu gets. */
  readonly actionsOf: (ref: ElementRef) => readonly MenuAction[];
  /** Sends a finding's cure as a suggestion; undefined for who can apply it themselves, or may not comment. */
  readonly suggestFix: ((findingKey: string, fix: Fix) => void) | undefined;
  /** To be put on the page once. */
  readonly dialog: ReactNode;
}

/** Commenting on the open design and what is in it, for readers who may. */
export function useCommenting(onOpenThread: (threadId: string) => void): Commenting {
  const mayComment = useMayHere('comment.write');
  const { designId } = useDesignPlace();
  const open = useOpenDesign();
  const editable = useOpenState((state) => state.editable);
  const [pin, setPin] = useState<PinTo>();
  const { mutate } = useWriteComment(designId);
  const actionsOf = useCallback(
    (ref: ElementRef): readonly MenuAction[] =>
      mayComment ? [{ label: 'Comment…', onSelect: () => setPin({ kind: 'element', ref }) }] : [],
    [mayComment],
  );
  const suggestFix = useMemo(
    () =>
      mayComment && !editable
        ? (findingKey: string, { sentence, patch }: Fix): void =>
            mutate(
              {
                body: sentence,
                pin: { kind: 'finding', key: findingKey },
                suggestion: { patch, baseSequence: open.store.getState().sequence },
              },
              {
                onSuccess: ({ id }) =>
                  void showToast({
                    tone: 'done',
                    text: 'The fix is suggested. Who edits the design can apply it.',
                    action: { label: 'Show it', onSelect: () => onOpenThread(id) },
                  }),
                onError: (error) =>
                  void showToast({
                    tone: 'failed',
                    text: `The fix was not suggested. ${asApiError(error).message}`,
                  }),
              },
            )
        : undefined,
    [mayComment, editable, mutate, open, onOpenThread],
  );
  return {
    ask: mayComment ? setPin : undefined,
    actionsOf,
    suggestFix,
    dialog:
      pin === undefined ? null : (
        <CommentDialog pin={pin} onClose={() => setPin(undefined)} onOpenThread={onOpenThread} />
      ),
  };
}
