import { useMemo, useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { Icon } from '../../components/icon.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Suggestion } from '../../contract/comments.ts';
import { patchDrift } from '../../engine/model/patch-drift.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { adoptEdit } from '../../workspace/adopt-edit.ts';
import { useApplySuggestion } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { useSuggesting } from '../../workspace/suggesting.tsx';
import type { ReviewTools } from './review-tools.ts';
import { driftWords, suggestionWords } from './suggestion-words.ts';

interface SuggestionBlockProps {
  readonly commentId: string;
  readonly suggestion: Suggestion;
  readonly onPreview: ReviewTools['onPreview'];
}

const linesShown = 6;

/** A change that a comment proposes: what it does, whether it still fits, and for who may edit the way to take it over. */
export function SuggestionBlock({ commentId, suggestion, onPreview }: SuggestionBlockProps) {
  const open = useOpenDesign();
  const { designId } = useDesignPlace();
  const { draft } = useSuggesting();
  const document = useOpenState((state) => state.document);
  const editable = useOpenState((state) => state.editable) && draft === undefined;
  const [previewed, setPreviewed] = useState(false);
  const [asking, setAsking] = useState(false);
  const [unsaved, setUnsaved] = useState(false);
  const { mutate, isPending, error } = useApplySuggestion(designId);
  const drift = useMemo(
    () => (suggestion.appliedAt === null ? patchDrift(document, suggestion.patch, suggestion.before) : []),
    [document, suggestion],
  );
  const lines = useMemo(() => suggestionWords(document, suggestion, drift), [document, suggestion, drift]);
  const moved = useMemo(
    () => (drift.length === 0 ? [] : driftWords(document, suggestion, drift)),
    [document, suggestion, drift],
  );

  const preview = (on: boolean): void => {
    setPreviewed(on);
    onPreview?.(on ? suggestion.patch : undefined);
  };
  const apply = async (confirmed: boolean): Promise<void> => {
    setAsking(false);
    preview(false);
    await open.flush();
    const isSaved = open.store.getState().save.kind === 'saved';
    setUnsaved(!isSaved);
    if (!isSaved) return;
    const before = open.store.getState().document;
    mutate(
      { commentId, editId: crypto.randomUUID(), confirmed },
      {
        onSuccess: async () => {
          await open.catchUp();
          adoptEdit(open, before, 'Apply a suggestion', suggestion.patch);
          showToast({
            tone: 'done',
            text: 'The suggestion is part of the design now.',
            action: { label: 'Undo', onSelect: () => open.undo() },
          });
        },
        // What the server knows better is fetched, so that this block says it too.
        onError: () => void open.catchUp(),
      },
    );
  };

  const shown = lines.length > linesShown + 1 ? lines.slice(0, linesShown) : lines;
  return (
    <section
      aria-label="Suggested change"
      className="mt-8 border border-rule-2 border-l-4 border-l-blue bg-raise px-10 py-8 text-base"
    >
      <h4 className="text-label text-ink-3">Suggested change</h4>
      <ul className="mt-2 flex flex-col gap-2">
        {shown.map((line, at) => (
          <li key={at} className="break-words">
            {line}
          </li>
        ))}
        {shown.length < lines.length && (
          <li className="text-ink-2">and {lines.length - shown.length} more</li>
        )}
      </ul>
      {suggestion.appliedAt !== null ? (
        <p className="mt-6 flex items-center gap-6 text-ok">
          <Icon name="check" size={14} />
          Applied{suggestion.appliedBy === null ? '' : ` by ${suggestion.appliedBy.name}`},{' '}
          {dateAndTime(new Date(suggestion.appliedAt))}
        </p>
      ) : (
        <>
          {drift.length > 0 && (
            <div className="mt-6 border-l-4 border-degr bg-degr-wash px-8 py-4">
              <p className="font-medium">The design has changed since:</p>
              <ul>
                {moved.slice(0, linesShown).map((line) => (
                  <li key={line} className="break-words">
                    {line}
                  </li>
                ))}
              </ul>
            </div>
          )}
          {(onPreview !== undefined || editable) && (
            <div className="mt-8 flex flex-wrap gap-8">
              {onPreview !== undefined && (
                <Button small pressed={previewed} onClick={() => preview(!previewed)}>
                  {previewed ? 'Back to the design' : 'Show on the sheet'}
                </Button>
              )}
              {editable && (
                <Button
                  small
                  kind="accent"
                  busy={isPending}
                  onClick={() => (drift.length > 0 ? setAsking(true) : void apply(false))}
                >
                  {drift.length > 0 ? 'Apply all the same…' : 'Apply'}
                </Button>
              )}
            </div>
          )}
        </>
      )}
      {unsaved && (
        <ErrorNotice className="mt-8">
          Your last edits are not saved yet. Wait until the bar says Saved, then apply the suggestion.
        </ErrorNotice>
      )}
      {error !== null && <ErrorNotice className="mt-8">{asApiError(error).message}</ErrorNotice>}
      <Dialog
        open={asking}
        onOpenChange={setAsking}
        title="Apply a suggestion that no longer fits"
        description="The design has changed since it was made. What it changes is overwritten; what is gone stays gone."
        footer={
          <>
            <Button onClick={() => setAsking(false)}>Leave it</Button>
            <Button kind="primary" onClick={() => void apply(true)}>
              Apply all the same
            </Button>
          </>
        }
      >
        <ul className="flex flex-col gap-4 text-base">
          {moved.map((line) => (
            <li key={line} className="break-words">
              {line}
            </li>
          ))}
        </ul>
      </Dialog>
    </section>
  );
}
