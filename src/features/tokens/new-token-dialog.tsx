import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ChoiceCell, InputCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { TokenScope } from '../../contract/account.ts';
import type { Membership } from '../../contract/session.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dayByUtc } from '../../lib/format-time.ts';
import { useCreateToken } from './tokens-query.ts';

interface NewTokenDialogProps {
  readonly memberships: readonly Membership[];
  readonly now: Date;
  readonly onMade: (secret: string) => void;
  readonly onClose: () => void;
}

const dayMs = 24 * 60 * 60 * 1000;
const proposedDays = 90;
const everywhere = 'all';

/** What a token is for, how long, and what it may. */
export function NewTokenDialog({ memberships, now, onMade, onClose }: NewTokenDialogProps) {
  const [name, setName] = useState('');
  const [scope, setScope] = useState<TokenScope>('read');
  const [workspaceId, setWorkspaceId] = useState(everywhere);
  const [expiresOn, setExpiresOn] = useState(dayByUtc(new Date(now.getTime() + proposedDays * dayMs)));
  const [tried, setTried] = useState(false);
  const create = useCreateToken();
  const refusal = create.error === null ? null : asApiError(create.error);
  const nameProblem =
    name.trim() === ''
      ? 'Name is empty. Say what will use the token, such as Nightly checks.'
      : name.trim().length > 80
        ? `Name has ${name.trim().length} characters. Keep it to 80.`
        : undefined;
  const lastDay = dayByUtc(new Date(now.getTime() + 365 * dayMs));
  const dayProblem =
    expiresOn < dayByUtc(now) || expiresOn > lastDay
      ? `Last day ${expiresOn || 'is empty: it'} has to be from today to ${lastDay}.`
      : undefined;
  const submit = (): void => {
    setTried(true);
    if (nameProblem !== undefined || dayProblem !== undefined) return;
    create.mutate(
      { name: name.trim(), scope, workspaceId: workspaceId === everywhere ? null : workspaceId, expiresOn },
      { onSuccess: ({ secret }) => onMade(secret) },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title="New API token"
      description="It never may more than you may yourself, and opens neither accounts nor people or settings of a workspace."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={create.isPending}>
            Make the token
          </Button>
        </>
      }
    >
      <CellGrid columns={2}>
        <InputCell
          span={2}
          label="Name"
          placeholder="Nightly checks"
          value={name}
          onChange={(event) => setName(event.target.value)}
          error={tried ? nameProblem : undefined}
        />
        <ChoiceCell
          span={2}
          label="May"
          value={scope}
          options={[
            { value: 'read', label: 'Read' },
            { value: 'write', label: 'Read and write designs' },
          ]}
          onChange={setScope}
        />
        <SelectCell
          label="In"
          value={workspaceId}
          options={[
            { value: everywhere, label: 'All my workspaces' },
            ...memberships.map((each) => ({ value: each.workspaceId, label: each.workspaceName })),
          ]}
          onChange={setWorkspaceId}
        />
        <InputCell
          label="Last day"
          type="date"
          min={dayByUtc(now)}
          max={lastDay}
          value={expiresOn}
          onChange={(event) => setExpiresOn(event.target.value)}
          error={tried ? dayProblem : undefined}
        />
      </CellGrid>
      {refusal !== null && <ErrorNotice className="mt-14">{refusal.message}</ErrorNotice>}
    </Dialog>
  );
}
