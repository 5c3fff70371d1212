import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import { asApiError } from '../../lib/api-error.ts';
import { WordsCell, missingOrTooLong } from './words-cell.tsx';

interface ReasonDialogProps {
  readonly title: string;
  readonly description: string;
  /** On the button that does it. */
  readonly action: string;
  readonly placeholder: string;
  /** Why a reason is wanted, said when there is none. */
  readonly why: string;
  /** Said when it is done. */
  readonly done: string;
  readonly run: (reason: string) => Promise<unknown>;
  readonly onClose: () => void;
}

/** A step that takes a reason, for those who read it later. */
export function ReasonDialog({
  title,
  description,
  action,
  placeholder,
  why,
  done,
  run,
  onClose,
}: ReasonDialogProps) {
  const [reason, setReason] = useState('');
  const [tried, setTried] = useState(false);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string>();
  const problem = missingOrTooLong('Reason', reason, why);
  const submit = async (): Promise<void> => {
    setTried(true);
    if (problem !== undefined) return;
    setBusy(true);
    try {
      await run(reason.trim());
      showToast({ tone: 'done', text: done });
      onClose();
    } catch (error) {
      setFailure(asApiError(error).message);
      setBusy(false);
    }
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={() => void submit()}
      title={title}
      description={description}
      widthPx={560}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={busy}>
            {action}
          </Button>
        </>
      }
    >
      <CellGrid>
        <WordsCell
          label="Reason"
          value={reason}
          onChange={setReason}
          placeholder={placeholder}
          error={tried ? problem : undefined}
        />
      </CellGrid>
      {failure !== undefined && <ErrorNotice className="mt-14">{failure}</ErrorNotice>}
    </Dialog>
  );
}
