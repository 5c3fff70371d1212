import { queryOptions, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { deletionPreviewSchema } from '../../contract/account.ts';
import type { WorkspaceSettings } from '../../contract/workspaces.ts';
import { callApi } from '../../lib/api-client.ts';
import { emptyProof, proofProblems, type ProofProblems } from '../../lib/proof-problems.ts';
import { useDeleteWorkspace } from './settings-query.ts';

// What the reader has to prove themselves with is the same as for the account.
const proofQuery = queryOptions({
  queryKey: ['account-deletion'],
  queryFn: ({ signal }) => callApi(deletionPreviewSchema, '/api/account/deletion', { signal }),
  staleTime: 0,
});

interface DeleteWorkspaceDialogProps {
  readonly settings: WorkspaceSettings;
  readonly onDeleted: () => void;
  readonly onClose: () => void;
}

/** Deletes the workspace, once its name and the password are typed. */
export function DeleteWorkspaceDialog({ settings, onDeleted, onClose }: DeleteWorkspaceDialogProps) {
  const query = useQuery(proofQuery);
  const remove = useDeleteWorkspace(settings.id);
  const [name, setName] = useState('');
  const [password, setPassword] = useState('');
  const [code, setCode] = useState('');
  const [missing, setMissing] = useState<ProofProblems & { readonly name?: string }>({});
  const isReady = query.data?.isOffered === true;
  const needsCode = query.data?.needsCode === true;
  const problems = { ...proofProblems(remove.error), ...missing };
  const submit = (): void => {
    const proof = { password, ...(needsCode ? { code } : {}) };
    const wrong = {
      ...emptyProof(proof),
      ...(name.trim() === settings.name
        ? {}
        : { name: `This is not the workspace’s name. Type ${settings.name}.` }),
    };
    setMissing(wrong);
    if (Object.keys(wrong).length > 0) return;
    // The page is another by the time it is done, and a callback given to `mutate` would go with this dialog.
    void remove.mutateAsync({ name, ...proof }).then(onDeleted, () => undefined);
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      {...(isReady ? { onSubmit: submit } : {})}
      title={`Delete ${settings.name}`}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          {isReady && (
            <Button type="submit" kind="danger" busy={remove.isPending}>
              Delete for good
            </Button>
          )}
        </>
      }
    >
      {query.data === undefined ? (
        <ReadingState what="The conditions" query={query} />
      ) : !query.data.isOffered ? (
        <p className="text-base">The demo’s workspace stays. Start one of your own, which you can delete.</p>
      ) : (
        <>
          <p className="mb-14 text-base">
            Every engagement, design, revision, comment and link in it goes, for everybody, and can’t be
            brought back. Download the workspace first if you may need it.
          </p>
          <CellGrid>
            <InputCell
              label={`Type the name: ${settings.name}`}
              autoComplete="off"
              spellCheck={false}
              value={name}
              onChange={(event) => setName(event.target.value)}
              error={problems.name}
            />
            <InputCell
              label="Your password"
              type="password"
              autoComplete="current-password"
              value={password}
              onChange={(event) => setPassword(event.target.value)}
              error={problems.password}
            />
            {needsCode && (
              <InputCell
                label="Code from your authenticator app, or a recovery code"
                autoComplete="one-time-code"
                value={code}
                onChange={(event) => setCode(event.target.value)}
                error={problems.code}
              />
            )}
          </CellGrid>
          {problems.other !== undefined && <ErrorNotice className="mt-14">{problems.other}</ErrorNotice>}
        </>
      )}
    </Dialog>
  );
}
