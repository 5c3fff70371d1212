import { useState, type ReactNode } from 'react';
import type { z } from 'zod';
import { Button } from '../../components/button.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { secondStepOfferSchema } from '../../contract/account.ts';
import { emptyProof, proofProblems, type ProofProblems } from '../../lib/proof-problems.ts';
import { ProofCells } from './proof-cells.tsx';
import { useConfirm, type Proof } from './second-step-query.ts';

interface SetUpFormProps {
  readonly offer: z.infer<typeof secondStepOfferSchema>;
  readonly onCancel: () => void;
  readonly onDone: (recoveryCodes: readonly string[]) => void;
}

/** Two things to do: tell the authenticator app the secret, and show that it has understood. */
export function SetUpForm({ offer, onCancel, onDone }: SetUpFormProps) {
  const [proof, setProof] = useState<Proof>({ password: '', code: '' });
  const [missing, setMissing] = useState<ProofProblems>({});
  const confirm = useConfirm();
  const refused = proofProblems(confirm.error);
  const submit = (): void => {
    const problems = emptyProof(proof);
    setMissing(problems);
    if (Object.keys(problems).length === 0) confirm.mutate(proof, { onSuccess: onDone });
  };
  return (
    <form
      noValidate
      className="flex flex-col gap-20"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <Step number={1} title="Scan the picture with an authenticator app">
        <div className="flex flex-wrap items-start gap-20">
          <img
            src={offer.picture}
            alt="The secret, to scan with an authenticator app; the text beside says the same"
            width={180}
            height={180}
            className="border border-rule-strong [image-rendering:pixelated]"
          />
          <div className="min-w-0 flex-1 basis-200">
            <p className="text-base text-ink-2">
              Any app that shows six digits every half minute will do. Without a camera type this secret into
              it:
            </p>
            <CellGrid className="mt-8">
              <ReadCell label="Secret">
                <span className="block text-balance select-all">
                  {offer.secret.replace(/(.{4})(?=.)/g, '$1 ')}
                </span>
              </ReadCell>
            </CellGrid>
          </div>
        </div>
      </Step>
      <Step number={2} title="Type what it shows, and your password">
        <CellGrid columns={2} className="max-sm:[&>div:first-child]:grid-cols-1!">
          <ProofCells
            proof={proof}
            onChange={setProof}
            problems={{ ...refused, ...missing }}
            codeLabel="Six digits from the app"
          />
        </CellGrid>
        {refused.other !== undefined && <ErrorNotice className="mt-14">{refused.other}</ErrorNotice>}
      </Step>
      <div className="flex gap-8">
        <Button type="submit" kind="primary" busy={confirm.isPending}>
          Switch on
        </Button>
        <Button onClick={onCancel}>Cancel</Button>
      </div>
    </form>
  );
}

function Step({
  number,
  title,
  children,
}: {
  readonly number: number;
  readonly title: string;
  readonly children: ReactNode;
}) {
  return (
    <section className="flex gap-14">
      <span
        aria-hidden="true"
        className="flex size-24 shrink-0 items-center justify-center bg-strip text-base font-semibold text-strip-ink"
      >
        {number}
      </span>
      <div className="min-w-0 flex-1">
        <h2 className="mb-10 pt-2 text-section font-semibold">{title}</h2>
        {children}
      </div>
    </section>
  );
}
