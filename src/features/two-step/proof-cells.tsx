import { InputCell } from '../../components/field-cells.tsx';
import type { ProofProblems } from '../../lib/proof-problems.ts';
import type { Proof } from './second-step-query.ts';

interface ProofCellsProps {
  readonly proof: Proof;
  readonly onChange: (proof: Proof) => void;
  readonly problems: ProofProblems;
  /** What the code is of. */
  readonly codeLabel: string;
}

/** The code of the moment and the password, as cells of one grid. */
export function ProofCells({ proof, onChange, problems, codeLabel }: ProofCellsProps) {
  return (
    <>
      <InputCell
        label={codeLabel}
        autoComplete="one-time-code"
        spellCheck={false}
        autoCapitalize="none"
        value={proof.code}
        onChange={(event) => onChange({ ...proof, code: event.target.value })}
        error={problems.code}
      />
      <InputCell
        label="Your password"
        type="password"
        autoComplete="current-password"
        value={proof.password}
        onChange={(event) => onChange({ ...proof, password: event.target.value })}
        error={problems.password}
      />
    </>
  );
}
