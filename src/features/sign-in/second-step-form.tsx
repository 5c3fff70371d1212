import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { asApiError } from '../../lib/api-error.ts';
import { useSecondStep, useSignOut } from '../../lib/session.ts';
import { blockCell, FormBlock } from './form-block.tsx';
import { refusalSentence } from './refusal-sentence.ts';

/** After the password: the code of the moment, or a recovery code. */
export function SecondStepForm() {
  const [code, setCode] = useState('');
  const [problem, setProblem] = useState<string>();
  const secondStep = useSecondStep();
  const startAgain = useSignOut();
  const refusal = secondStep.error === null ? null : asApiError(secondStep.error);
  const isAtField = refusal?.code === 'wrong-credentials';
  const submit = (): void => {
    if (code.replace(/[\s-]/g, '').length < 6) {
      setProblem(
        code.trim() === ''
          ? 'The code is empty. Type the six digits that your authenticator app shows.'
          : `Code ${code.trim()} is too short. Type six digits, or a recovery code of fifteen characters.`,
      );
      return;
    }
    secondStep.mutate(code);
  };
  return (
    <FormBlock
      title="Second step"
      label="Second step of signing in"
      onSubmit={submit}
      refusal={refusal === null || isAtField ? undefined : refusalSentence(refusal)}
      actions={
        <>
          <Button kind="quiet" busy={startAgain.isPending} onClick={() => startAgain.mutate()}>
            Start again
          </Button>
          <Button
            type="submit"
            kind="primary"
            busy={secondStep.isPending}
            className="h-40! px-33! text-value! font-semibold!"
          >
            Sign in
          </Button>
        </>
      }
    >
      <InputCell
        label="Code from your authenticator app"
        inputMode="text"
        autoComplete="one-time-code"
        spellCheck={false}
        autoCapitalize="none"
        // eslint-disable-next-line jsx-a11y/no-autofocus -- the page is for nothing else
        autoFocus
        className={blockCell}
        value={code}
        onChange={(event) => {
          setCode(event.target.value);
          setProblem(undefined);
          secondStep.reset();
        }}
        error={problem ?? (isAtField ? refusal?.message : undefined)}
      />
      <p className="border-t border-ink px-14 pt-8 pb-10 text-base text-ink-2">
        Lost the authenticator? Type one of your recovery codes in its place; each works once. Without any,
        ask whoever runs this server.
      </p>
    </FormBlock>
  );
}
