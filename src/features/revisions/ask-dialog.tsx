import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import { countBySeverity } from '../../engine/rules/run-rules.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { useAskForReview } from '../../workspace/revisions-query.ts';
import { FrozenFacts } from './frozen-facts.tsx';
import { WordsCell, tooLong } from './words-cell.tsx';

/** Puts the draft to review: shows what will be frozen, and takes a word to the reviewers. */
export function AskDialog({ onClose }: { readonly onClose: () => void }) {
  const { designId } = useDesignPlace();
  const open = useOpenDesign();
  const { openFindings, waived, document } = useChecks();
  const { mutate, error, isPending } = useAskForReview(designId);
  const [message, setMessage] = useState('');
  const [unsaved, setUnsaved] = useState(false);
  const problem = tooLong('Message', message);
  const counts = countBySeverity(openFindings);
  const submit = async (): Promise<void> => {
    if (problem !== undefined) return;
    // Only what is saved can be frozen.
    await open.flush();
    const { save, sequence } = open.store.getState();
    setUnsaved(save.kind !== 'saved');
    if (save.kind !== 'saved') return;
    mutate(
      { message: message.trim(), sequence },
      {
        onSuccess: ({ label }) => {
          showToast({
            tone: 'done',
            text: `Revision ${label} is in review. Its reviewers are told by e-mail.`,
          });
          onClose();
        },
      },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={() => void submit()}
      title="Ask for review"
      description="The drawing is frozen as a revision, with what the checks say of it and the waivers in force. Until it is decided or taken back, nobody edits it."
      widthPx={560}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={isPending}>
            Ask for review
          </Button>
        </>
      }
    >
      <div className="flex flex-col gap-14">
        <FrozenFacts revision={document.meta.revision} counts={counts} waived={waived.covered.length} />
        {counts.blocking > 0 && (
          <p className="text-base text-ink-2">
            {counts.blocking === 1
              ? 'The blocking finding has'
              : `The ${counts.blocking} blocking findings have`}{' '}
            to be mended or waived before anybody can approve it.
          </p>
        )}
        <CellGrid>
          <WordsCell
            label="Message to the reviewers"
            value={message}
            onChange={setMessage}
            placeholder="Please look at the berth-control segment: its multicast is new"
            error={problem}
          />
        </CellGrid>
        {unsaved && (
          <ErrorNotice>
            The design’s last edits are not saved yet, and only what is saved can be frozen. Wait until the
            bar says Saved, then ask again.
          </ErrorNotice>
        )}
        {error !== null && <ErrorNotice>{asApiError(error).message}</ErrorNotice>}
      </div>
    </Dialog>
  );
}
