import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import type { z } from 'zod';
import { Button } from '../../components/button.tsx';
import { CheckBox } from '../../components/check-box.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { signInSchema } from '../../contract/session.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useSignIn } from '../../lib/session.ts';
import { blockCell, FormBlock } from './form-block.tsx';
import { refusalSentence } from './refusal-sentence.ts';

type Form = z.input<typeof signInSchema>;

/** The sheet's title block, which is the form. */
export function SignInForm() {
  const signIn = useSignIn();
  const [shown, setShown] = useState(false);
  const { register, handleSubmit, getValues, formState } = useForm<
    Form,
    unknown,
    z.output<typeof signInSchema>
  >({
    resolver: zodResolver(signInSchema),
    defaultValues: { email: '', password: '', keep: false },
  });
  const emailProblem = formState.errors.email?.message;
  const refusal = signIn.error === null ? null : asApiError(signIn.error);
  return (
    <FormBlock
      title="Sign in"
      label="Sign in"
      onSubmit={() => void handleSubmit((credentials) => signIn.mutate(credentials))()}
      refusal={
        refusal === null
          ? undefined
          : refusal.code === 'wrong-credentials'
            ? 'This e-mail and password do not belong together. Check both and type the password again.'
            : refusalSentence(refusal)
      }
      actions={
        <>
          <div className="flex flex-wrap gap-x-20 gap-y-6">
            <CheckBox {...register('keep')}>Keep me signed in</CheckBox>
            <Link to="/reset" className="text-base text-blue underline">
              Password lost
            </Link>
          </div>
          <Button
            type="submit"
            kind="primary"
            busy={signIn.isPending}
            className="h-40! px-33! text-value! font-semibold!"
          >
            Sign in
          </Button>
        </>
      }
    >
      <InputCell
        label="E-mail"
        type="email"
        autoComplete="username"
        // eslint-disable-next-line jsx-a11y/no-autofocus -- the page is for nothing else
        autoFocus
        className={blockCell}
        error={emailProblem && `E-mail ${getValues('email')}: ${emailProblem}.`}
        {...register('email')}
      />
      <InputCell
        label="Password"
        type={shown ? 'text' : 'password'}
        autoComplete="current-password"
        className={blockCell}
        error={formState.errors.password && 'The password is empty. Type it.'}
        after={
          <button
            type="button"
            aria-pressed={shown}
            aria-label="Show the password"
            onClick={() => setShown(!shown)}
            className="text-base text-blue underline"
          >
            {shown ? 'Hide' : 'Show'}
          </button>
        }
        {...register('password')}
      />
    </FormBlock>
  );
}
