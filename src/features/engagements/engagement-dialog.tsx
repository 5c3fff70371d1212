import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { Engagement } from '../../contract/designs.ts';
import { asApiError } from '../../lib/api-error.ts';
import { titleProblem } from './title-problem.ts';
import { useChangeEngagement, useCreateEngagement } from './engagements-query.ts';

const maxSummaryCharacters = 200;

interface EngagementDialogProps {
  readonly workspaceId: string;
  /** The one to change; without it a new one is made. */
  readonly engagement?: Engagement;
  readonly onClose: () => void;
}

/** Names an engagement, a new one or one that is there. */
export function EngagementDialog({ workspaceId, engagement, onClose }: EngagementDialogProps) {
  const [name, setName] = useState(engagement?.name ?? '');
  const [summary, setSummary] = useState(engagement?.summary ?? '');
  const [tried, setTried] = useState(false);
  const create = useCreateEngagement(workspaceId);
  const change = useChangeEngagement();
  const { error, isPending } = engagement === undefined ? create : change;
  const problem = titleProblem('Name', name);
  const submit = (): void => {
    setTried(true);
    if (problem !== undefined) return;
    const body = { name: name.trim(), summary: summary.trim() };
    if (engagement === undefined) create.mutate(body, { onSuccess: onClose });
    else change.mutate({ id: engagement.id, ...body }, { onSuccess: onClose });
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title={engagement === undefined ? 'New engagement' : 'Rename or describe the engagement'}
      description="A piece of work for one customer. Its designs stand beside its label."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={isPending}>
            {engagement === undefined ? 'Create' : 'Save'}
          </Button>
        </>
      }
    >
      <CellGrid>
        <InputCell
          label="Name"
          value={name}
          placeholder="Saltmarsh Ferries"
          error={tried ? problem : undefined}
          onChange={(event) => setName(event.target.value)}
        />
        <InputCell
          label="In a few words"
          value={summary}
          maxLength={maxSummaryCharacters}
          placeholder="Head office, Gullhaven, Orrin Point, Skerry"
          onChange={(event) => setSummary(event.target.value)}
        />
      </CellGrid>
      {error !== null && <ErrorNotice className="mt-14">{asApiError(error).message}</ErrorNotice>}
    </Dialog>
  );
}
