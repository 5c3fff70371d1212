import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { DesignSummary } from '../../contract/designs.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useChangeDesign } from './engagements-query.ts';
import { titleProblem } from './title-problem.ts';

/** Gives a design another title, here and in the title block of its sheet. */
export function RenameDesignDialog({
  design,
  onClose,
}: {
  readonly design: DesignSummary;
  readonly onClose: () => void;
}) {
  const [title, setTitle] = useState(design.title);
  const [tried, setTried] = useState(false);
  const change = useChangeDesign();
  const problem = titleProblem('Title', title);
  const submit = (): void => {
    setTried(true);
    if (problem === undefined) change.mutate({ id: design.id, title: title.trim() }, { onSuccess: onClose });
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title="Rename the design"
      description="The title stands in the title block of its sheet as well."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={change.isPending}>
            Save
          </Button>
        </>
      }
    >
      <CellGrid>
        <InputCell
          label="Title"
          value={title}
          error={tried ? problem : undefined}
          onChange={(event) => setTitle(event.target.value)}
        />
      </CellGrid>
      {change.error !== null && (
        <ErrorNotice className="mt-14">{asApiError(change.error).message}</ErrorNotice>
      )}
    </Dialog>
  );
}
