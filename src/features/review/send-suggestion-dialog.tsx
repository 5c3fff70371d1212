import { useQuery } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { Dialog } from '../../components/dialog.tsx';
import { showToast } from '../../components/toast.tsx';
import type { PinTo } from '../../contract/comments.ts';
import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { asApiError } from '../../lib/api-error.ts';
import { designPath } from '../../lib/workspace-path.ts';
import { commentsQuery, useWriteComment } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import type { SuggestionDraft } from '../../workspace/suggesting.tsx';
import { changedElements } from './changed-elements.ts';
import { Composer } from './composer.tsx';
import { patchWords } from './suggestion-words.ts';

interface SendSuggestionDialogProps {
  readonly draft: SuggestionDraft;
  readonly patch: MergePatch;
  readonly onClose: () => void;
}

/** The element that a suggestion is most about: the first that it changes and that is there already. */
const pinOf = (base: Design, patch: MergePatch): PinTo => {
  const first = changedElements(base, patch).find(({ change }) => change !== 'added');
  return first === undefined ? { kind: 'design' } : { kind: 'element', ref: first.ref };
};

/** Sends what was drawn, with a word to whoever decides on it. */
export function SendSuggestionDialog({ draft, patch, onClose }: SendSuggestionDialogProps) {
  const { designId } = useDesignPlace();
  const navigate = useNavigate();
  const { data } = useQuery(commentsQuery(designId));
  const { mutate, isPending, error } = useWriteComment(designId);
  const { base, baseSequence } = draft;
  const send = (body: string): void =>
    mutate(
      { body, pin: pinOf(base, patch), suggestion: { patch, baseSequence } },
      {
        onSuccess: ({ id }) => {
          draft.end();
          showToast({
            tone: 'done',
            text: 'The suggestion is sent. Who edits the design can look at it and apply it.',
            action: {
              label: 'Show it',
              onSelect: () => void navigate(`${designPath(designId)}/review?thread=${id}`),
            },
          });
        },
      },
    );
  return (
    <Dialog
      open
      onOpenChange={onClose}
      title="Send as suggestion"
      description="Who edits the design sees it on the sheet and can apply it with one press."
      widthPx={560}
    >
      <ul
        aria-label="What it changes"
        className="mb-12 flex max-h-200 flex-col gap-2 overflow-y-auto border border-rule-2 bg-raise px-12 py-8 text-base"
      >
        {patchWords(base, patch).map((line, at) => (
          <li key={at} className="break-words">
            {line}
          </li>
        ))}
      </ul>
      <Composer
        label="Why"
        members={data?.members ?? []}
        placeholder="The far end has this VNI. @ calls somebody."
        submitWords="Send"
        busy={isPending}
        failure={error === null ? undefined : asApiError(error).message}
        onCancel={onClose}
        onSubmit={send}
      />
    </Dialog>
  );
}
