import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SeverityMark } from '../../components/severity-mark.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Revision } from '../../contract/revisions.ts';
import { countBySeverity } from '../../engine/rules/run-rules.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useDecide } from '../../workspace/revisions-query.ts';
import { FrozenFacts } from './frozen-facts.tsx';
import { WordsCell, tooLong } from './words-cell.tsx';

/** Approves the revision in review, with a note; says first what still stands in the way. */
export function ApproveDialog({
  revision,
  onClose,
}: {
  readonly revision: Revision;
  readonly onClose: () => void;
}) {
  const { openFindings, waived } = useChecks();
  const { mutate, error, isPending } = useDecide(revision.designId);
  const [note, setNote] = useState('');
  const problem = tooLong('Note', note);
  const blocking = openFindings.filter(({ severity }) => severity === 'blocking');
  const submit = (): void => {
    if (problem !== undefined) return;
    mutate(
      { revisionId: revision.id, decision: 'approve', note: note.trim() },
      {
        onSuccess: ({ label }) => {
          showToast({ tone: 'done', text: `Revision ${label} is approved.` });
          onClose();
        },
      },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title={`Approve revision ${revision.label}`}
      description="It can never be changed afterwards, and installers may build from it. A revision that was approved before is superseded."
      widthPx={560}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={isPending} disabled={blocking.length > 0}>
            Approve
          </Button>
        </>
      }
    >
      <div className="flex flex-col gap-14">
        <FrozenFacts
          revision={revision.label}
          counts={countBySeverity(openFindings)}
          waived={waived.covered.length}
        />
        {blocking.length > 0 && (
          <div className="flex flex-col gap-6 border border-red px-12 py-10 text-base">
            <SeverityMark severity="blocking" />
            <ul className="flex flex-col gap-4">
              {blocking.slice(0, 5).map(({ key, sentence }) => (
                <li key={key} className="break-words">
                  {sentence}.
                </li>
              ))}
              {blocking.length > 5 && <li>And {blocking.length - 5} more.</li>}
            </ul>
            <p className="text-ink-2">
              Send it back to have this mended, or waive it with a reason in Checks.
            </p>
          </div>
        )}
        <CellGrid>
          <WordsCell
            label="Note"
            value={note}
            onChange={setNote}
            placeholder="Checked against the survey of 12 May"
            error={problem}
          />
        </CellGrid>
        {error !== null && <ErrorNotice>{asApiError(error).message}</ErrorNotice>}
      </div>
    </Dialog>
  );
}
