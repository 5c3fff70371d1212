import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { emptyProof, proofProblems, type ProofProblems } from '../../lib/proof-problems.ts';
import { ProofCells } from './proof-cells.tsx';
import type { Proof } from './second-step-query.ts';

interface ProofDialogProps {
  readonly title: string;
  readonly description: string;
  /** What the button that does it says. */
  readonly does: string;
  readonly danger?: boolean;
  readonly change: {
    readonly error: Error | null;
    readonly isPending: boolean;
    readonly mutate: (proof: Proof) => void;
  };
  readonly onClose: () => void;
}

/** Asks for password and code before something that weakens or renews the second step. */
export function ProofDialog({ title, description, does, danger = false, change, onClose }: ProofDialogProps) {
  const [proof, setProof] = useState<Proof>({ password: '', code: '' });
  const [missing, setMissing] = useState<ProofProblems>({});
  const refused = proofProblems(change.error);
  const submit = (): void => {
    const problems = emptyProof(proof);
    setMissing(problems);
    if (Object.keys(problems).length === 0) change.mutate(proof);
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title={title}
      description={description}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind={danger ? 'danger' : 'primary'} busy={change.isPending}>
            {does}
          </Button>
        </>
      }
    >
      <CellGrid>
        <ProofCells
          proof={proof}
          onChange={setProof}
          problems={{ ...refused, ...missing }}
          codeLabel="Code from your authenticator app, or a recovery code"
        />
      </CellGrid>
      {refused.other !== undefined && <ErrorNotice className="mt-14">{refused.other}</ErrorNotice>}
    </Dialog>
  );
}
