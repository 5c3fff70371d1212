import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid, FieldCell } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SeverityMark } from '../../components/severity-mark.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Finding } from '../../engine/rules/finding.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dayInWords } from '../../lib/format-time.ts';
import { useNow } from '../../lib/use-now.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { useWaive } from '../../workspace/waivers-query.ts';
import { dayAhead, expiryBounds, expiryProblem, reasonProblem } from './waive-problems.ts';

const terms = [30, 90, 180] as const;
const usualDays = 90;

/** Accepts one finding for a time, with the reason that the next reader will see. */
export function WaiveDialog({
  finding,
  onClose,
}: {
  readonly finding: Finding;
  readonly onClose: () => void;
}) {
  const now = useNow();
  const { designId } = useDesignPlace();
  const open = useOpenDesign();
  const [reason, setReason] = useState('');
  const [expiresOn, setExpiresOn] = useState(() => dayAhead(now, usualDays));
  const [tried, setTried] = useState(false);
  const [unsaved, setUnsaved] = useState(false);
  const { mutate, error, isPending } = useWaive(designId);
  const problems = { reason: reasonProblem(reason), expiresOn: expiryProblem(expiresOn, now) };
  const { first, last } = expiryBounds(now);
  const submit = async (): Promise<void> => {
    setTried(true);
    if (problems.reason !== undefined || problems.expiresOn !== undefined) return;
    // The server holds the finding against the design as it has it.
    await open.flush();
    const isSaved = open.store.getState().save.kind === 'saved';
    setUnsaved(!isSaved);
    if (!isSaved) return;
    const { key: findingKey, fingerprint } = finding;
    mutate(
      { findingKey, fingerprint, reason: reason.trim(), expiresOn },
      {
        onSuccess: () => {
          showToast({ tone: 'done', text: `Waived until ${dayInWords(expiresOn)}: ${finding.sentence}.` });
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
      title="Waive a finding"
      description="It stays on the sheet and in the list, muted, and no longer counts. The waiver ends with its day, or when the values change that it was given for."
      widthPx={560}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={isPending}>
            Waive
          </Button>
        </>
      }
    >
      <div className="mb-14 flex flex-col gap-4 border border-rule-2 bg-raise px-12 py-10 text-base">
        <SeverityMark severity={finding.severity} />
        <p className="font-medium break-words">{finding.sentence}.</p>
        <p className="text-ink-2">What is seen on site: {finding.seen}</p>
      </div>
      <CellGrid>
        <FieldCell label="Reason" error={tried ? problems.reason : undefined}>
          {({ id, describedBy }) => (
            <textarea
              id={id}
              rows={3}
              value={reason}
              maxLength={1200}
              aria-invalid={(tried && problems.reason !== undefined) || undefined}
              aria-describedby={describedBy}
              placeholder="Agreed with the customer: the link carries no large frames"
              onChange={(event) => setReason(event.target.value)}
              className="min-w-0 flex-1 resize-y border-0 bg-transparent p-0 text-base text-ink outline-none"
            />
          )}
        </FieldCell>
        <InputCell
          label="Holds until, that day included"
          type="date"
          value={expiresOn}
          min={first}
          max={last}
          error={tried ? problems.expiresOn : undefined}
          after={
            <span className="text-base whitespace-nowrap text-ink-2">
              {expiresOn === '' ? '' : dayInWords(expiresOn)}
            </span>
          }
          onChange={(event) => setExpiresOn(event.target.value)}
        />
      </CellGrid>
      <div role="group" aria-label="Usual terms" className="mt-10 flex flex-wrap gap-8">
        {terms.map((days) => (
          <Button
            key={days}
            small
            pressed={expiresOn === dayAhead(now, days)}
            onClick={() => setExpiresOn(dayAhead(now, days))}
          >
            {days} days
          </Button>
        ))}
        <Button small pressed={expiresOn === last} onClick={() => setExpiresOn(last)}>
          A year
        </Button>
      </div>
      {unsaved && (
        <ErrorNotice className="mt-14">
          The design’s last edits are not saved yet, so the server can’t see this finding. Wait until the bar
          says Saved, then waive it.
        </ErrorNotice>
      )}
      {error !== null && <ErrorNotice className="mt-14">{asApiError(error).message}</ErrorNotice>}
    </Dialog>
  );
}
