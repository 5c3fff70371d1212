import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Revision } from '../../contract/revisions.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useMarkBuilt } from '../../workspace/revisions-query.ts';
import { useNow } from '../../lib/use-now.ts';
import { builtProblem, localDay } from './built-problem.ts';

/** Notes the day on which the approved revision was built. */
export function BuiltDialog({
  revision,
  onClose,
}: {
  readonly revision: Revision;
  readonly onClose: () => void;
}) {
  const now = useNow();
  const { mutate, error, isPending } = useMarkBuilt(revision.designId);
  const [builtOn, setBuiltOn] = useState(() => localDay(now));
  const [tried, setTried] = useState(false);
  const problem = builtProblem(builtOn, revision.decidedAt, now);
  const submit = (): void => {
    setTried(true);
    if (problem !== undefined) return;
    mutate(
      { revisionId: revision.id, builtOn },
      {
        onSuccess: ({ label }) => {
          showToast({ tone: 'done', text: `Revision ${label} is marked as built.` });
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
      title={`Mark revision ${revision.label} as built`}
      description="From then on the drawing says what stands there. Changes go into the next revision."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={isPending}>
            Mark as built
          </Button>
        </>
      }
    >
      <CellGrid>
        <InputCell
          label="Built on"
          type="date"
          value={builtOn}
          max={localDay(now)}
          error={tried ? problem : undefined}
          onChange={(event) => setBuiltOn(event.target.value)}
        />
      </CellGrid>
      {error !== null && <ErrorNotice className="mt-14">{asApiError(error).message}</ErrorNotice>}
    </Dialog>
  );
}
