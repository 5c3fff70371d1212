import { queryOptions, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { deletionPreviewSchema } from '../../contract/account.ts';
import { callApi } from '../../lib/api-client.ts';
import { emptyProof, proofProblems, type ProofProblems } from '../../lib/proof-problems.ts';
import { useDeleteAccount } from '../../lib/session.ts';
import { peoplePath } from '../../lib/workspace-path.ts';

const previewQuery = queryOptions({
  queryKey: ['account-deletion'],
  queryFn: ({ signal }) => callApi(deletionPreviewSchema, '/api/account/deletion', { signal }),
  // Others may have come or gone since.
  staleTime: 0,
});

/** What deleting the account means for this reader, what stands in its way, and the deed. */
export function DeleteAccountForm() {
  const query = useQuery(previewQuery);
  const [password, setPassword] = useState('');
  const [code, setCode] = useState('');
  const [missing, setMissing] = useState<ProofProblems>({});
  const remove = useDeleteAccount();
  const preview = query.data;
  if (preview === undefined) return <ReadingState what="Your workspaces" query={query} />;
  if (!preview.isOffered) {
    return (
      <EmptyState title="The people of the demo stay">
        Whoever has an account of their own can delete it here.
      </EmptyState>
    );
  }
  if (preview.lastOwnerOf.length > 0) {
    return (
      <ErrorNotice>
        <p className="font-semibold">You are the only owner of a workspace with others in it.</p>
        <p className="mt-2">
          Make somebody else an owner first, on its page People; or delete the workspace.
        </p>
        <ul className="mt-6 flex flex-col gap-2">
          {preview.lastOwnerOf.map(({ workspaceId, workspaceName }) => (
            <li key={workspaceId}>
              <Link to={peoplePath(workspaceId)} className="text-blue underline">
                People of {workspaceName}
              </Link>
            </li>
          ))}
        </ul>
      </ErrorNotice>
    );
  }
  const refused = proofProblems(remove.error);
  const problems = { ...refused, ...missing };
  const submit = (): void => {
    const proof = { password, ...(preview.needsCode ? { code } : {}) };
    const empty = emptyProof(proof);
    setMissing(empty);
    if (Object.keys(empty).length === 0) remove.mutate(proof);
  };
  return (
    <form
      noValidate
      className="flex flex-col gap-14"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      {preview.aloneIn.length > 0 && (
        <p className="text-base">
          Nobody else is in{' '}
          <span className="font-semibold">
            {preview.aloneIn.map(({ workspaceName }) => workspaceName).join(', ')}
          </span>
          : {preview.aloneIn.length === 1 ? 'it goes' : 'they go'} with your account, with every design.
        </p>
      )}
      <CellGrid>
        <InputCell
          label="Your password"
          type="password"
          autoComplete="current-password"
          value={password}
          onChange={(event) => setPassword(event.target.value)}
          error={problems.password}
        />
        {preview.needsCode && (
          <InputCell
            label="Code from your authenticator app, or a recovery code"
            autoComplete="one-time-code"
            value={code}
            onChange={(event) => setCode(event.target.value)}
            error={problems.code}
          />
        )}
      </CellGrid>
      {problems.other !== undefined && <ErrorNotice>{problems.other}</ErrorNotice>}
      <div>
        <Button type="submit" kind="danger" busy={remove.isPending}>
          Delete my account for good
        </Button>
      </div>
    </form>
  );
}
