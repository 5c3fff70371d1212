import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { isEmptyPatch } from '../../engine/model/merge-patch.ts';
import { useSuggestedPatch, useSuggesting, type SuggestionDraft } from '../../workspace/suggesting.tsx';
import { SendSuggestionDialog } from './send-suggestion-dialog.tsx';
import { patchWords } from './suggestion-words.ts';

/** Over every page of the design while a suggestion is drawn: what is going on, and the ways out of it. */
export function SuggestingBar() {
  const { draft } = useSuggesting();
  return draft === undefined ? null : <DraftBar draft={draft} />;
}

function DraftBar({ draft }: { readonly draft: SuggestionDraft }) {
  const patch = useSuggestedPatch(draft);
  const changes = patchWords(draft.base, patch).length;
  const [sending, setSending] = useState(false);
  const [discarding, setDiscarding] = useState(false);
  const isEmpty = isEmptyPatch(patch);
  return (
    <section
      aria-label="Suggestion"
      className="flex min-h-36 shrink-0 flex-wrap items-center gap-x-16 gap-y-6 border-b-1.5 border-dashed border-blue bg-blue-wash px-14 py-4 text-base"
    >
      <p className="min-w-0 flex-1">
        <span className="font-semibold">Suggesting.</span>{' '}
        {isEmpty
          ? 'Change whatever should be otherwise: the design itself stays as it is until somebody applies what you send.'
          : `${changes === 1 ? '1 change' : `${changes} changes`}, kept in this browser until you send them.`}
      </p>
      <div className="flex flex-wrap gap-8">
        <Button small onClick={() => (isEmpty ? draft.end() : setDiscarding(true))}>
          {isEmpty ? 'Stop suggesting' : 'Discard…'}
        </Button>
        <Button small kind="primary" disabled={isEmpty} onClick={() => setSending(true)}>
          Send as suggestion…
        </Button>
      </div>
      {sending && <SendSuggestionDialog draft={draft} patch={patch} onClose={() => setSending(false)} />}
      <Dialog
        open={discarding}
        onOpenChange={setDiscarding}
        title="Discard what you drew"
        description={`${changes === 1 ? '1 change goes' : `${changes} changes go`} for good; the design itself stays as it is.`}
        footer={
          <>
            <Button onClick={() => setDiscarding(false)}>Go on drawing</Button>
            <Button kind="danger" onClick={draft.end}>
              Discard
            </Button>
          </>
        }
      >
        <ul className="flex flex-col gap-2 text-base">
          {patchWords(draft.base, patch).map((line, at) => (
            <li key={at}>{line}</li>
          ))}
        </ul>
      </Dialog>
    </section>
  );
}
