import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { ReadCell } from '../../components/cell.tsx';
import { newPasswordSchema } from '../../contract/session.ts';
import { callApiForNothing } from '../../lib/api-client.ts';
import { asApiError } from '../../lib/api-error.ts';
import { blockCell, FormBlock } from './form-block.tsx';
import { PasswordCell } from './password-cell.tsx';
import { refusalSentence } from './refusal-sentence.ts';

interface NewPasswordFormProps {
  readonly token: string;
  readonly email: string;
  readonly onSet: () => void;
}

/** Sets a new password by a link. */
export function NewPasswordForm({ token, email, onSet }: NewPasswordFormProps) {
  const [password, setPassword] = useState('');
  const [tried, setTried] = useState(false);
  const change = useMutation({
    mutationFn: () =>
      callApiForNothing('/api/password-reset/password', { method: 'POST', body: { token, password } }),
    onSuccess: onSet,
  });
  const problem = newPasswordSchema.safeParse(password).error?.issues[0]?.message;
  const refusal = change.error === null ? null : asApiError(change.error);
  return (
    <FormBlock
      title="New password"
      label="Set a new password"
      onSubmit={() => {
        setTried(true);
        if (problem === undefined) change.mutate();
      }}
      refusal={refusal === null ? undefined : refusalSentence(refusal)}
      actions={
        <Button
          type="submit"
          kind="primary"
          busy={change.isPending}
          className="ml-auto h-40! px-33! text-value! font-semibold!"
        >
          Set it
        </Button>
      }
    >
      {/* Password managers look for whose password it is. */}
      <input type="text" name="username" autoComplete="username" readOnly hidden value={email} />
      <ReadCell label="Of" className={`${blockCell} bg-transparent!`}>
        {email}
      </ReadCell>
      <PasswordCell
        label="New password, at least 12 characters"
        focused
        value={password}
        onChange={setPassword}
        error={
          tried && problem !== undefined
            ? `The new password has ${password.length} characters: ${problem}.`
            : undefined
        }
      />
      <p className="border-t border-ink px-14 pt-8 pb-10 text-base text-ink-2">
        Wherever you are signed in, you will have to sign in again.
      </p>
    </FormBlock>
  );
}
