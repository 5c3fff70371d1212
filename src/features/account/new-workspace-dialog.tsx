import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { membershipSchema } from '../../contract/session.ts';
import { callApi } from '../../lib/api-client.ts';
import { useRefreshSession } from '../../lib/session.ts';
import { engagementsPath } from '../../lib/workspace-path.ts';

const mostCharacters = 80;

/** Starts a workspace of the reader's own and goes there. */
export function NewWorkspaceDialog({ onClose }: { readonly onClose: () => void }) {
  const [name, setName] = useState('');
  const [tried, setTried] = useState(false);
  const navigate = useNavigate();
  const refreshSession = useRefreshSession();
  const start = useMutation({
    mutationFn: () =>
      callApi(membershipSchema, '/api/workspaces', { method: 'POST', body: { name: name.trim() } }),
    onSuccess: async ({ workspaceId }) => {
      await refreshSession();
      onClose();
      await navigate(engagementsPath(workspaceId));
    },
  });
  const problem =
    name.trim() === ''
      ? 'Name is empty. Type at least one character.'
      : name.trim().length > mostCharacters
        ? `Name has ${name.trim().length} characters. Keep it to ${mostCharacters}.`
        : undefined;
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={() => {
        setTried(true);
        if (problem === undefined) start.mutate();
      }}
      title="New workspace"
      description="For a team and its engagements. Nothing in it is seen from another; you own it and invite the others."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={start.isPending}>
            Start
          </Button>
        </>
      }
    >
      <CellGrid>
        <InputCell
          label="Name"
          value={name}
          placeholder="Ternwick Net"
          onChange={(event) => setName(event.target.value)}
          error={tried ? problem : undefined}
        />
      </CellGrid>
      {start.error !== null && <ErrorNotice className="mt-14">{start.error.message}</ErrorNotice>}
    </Dialog>
  );
}
