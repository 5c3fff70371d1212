import { zodResolver } from '@hookform/resolvers/zod';
import { useState, type ReactNode } from 'react';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import type { z } from 'zod';
import { version } from '../../../package.json';
import { Button } from '../../components/button.tsx';
import { CellGrid, FieldError } from '../../components/cell.tsx';
import { CheckBox } from '../../components/check-box.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { Mark } from '../../components/mark.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { signInSchema } from '../../contract/session.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useSignIn } from '../../lib/session.ts';
import { chooseTheme, useTheme } from '../../lib/theme.ts';

type Form = z.input<typeof signInSchema>;

/** The sheet's title block, which is the form. */
export function SignInForm() {
  const signIn = useSignIn();
  const theme = useTheme();
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
    <form
      noValidate
      aria-label="Sign in"
      className="bg-paper"
      onSubmit={(event) => void handleSubmit((credentials) => signIn.mutate(credentials))(event)}
    >
      <div className="grid grid-cols-[198px_1fr] max-sm:grid-cols-1">
        <div className="flex flex-col items-center justify-center gap-12 py-14 max-sm:flex-row max-sm:justify-start max-sm:border-b max-sm:border-ink max-sm:px-14">
          <Mark width={48} />
          <span className="text-[22px]/28 font-semibold max-sm:text-title">Longpatch</span>
        </div>
        <CellGrid className="border-ink sm:border-l [&>div:first-child]:p-0 [&>div:last-child]:px-14 [&>div:last-child:not(:empty)]:pb-9">
          <div className="px-14 pt-7 pb-8">
            <span className="block text-label text-ink-3">Title</span>
            <h1 className="text-page font-semibold">Sign in</h1>
          </div>
          <InputCell
            label="E-mail"
            type="email"
            autoComplete="username"
            // eslint-disable-next-line jsx-a11y/no-autofocus -- the page is for nothing else
            autoFocus
            className={signInCell}
            error={emailProblem && `E-mail ${getValues('email')}: ${emailProblem}.`}
            {...register('email')}
          />
          <InputCell
            label="Password"
            type={shown ? 'text' : 'password'}
            autoComplete="current-password"
            className={signInCell}
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
        </CellGrid>
      </div>
      {refusal !== null && (
        <div className="border-t border-ink px-14 pb-8">
          <FieldError>{refusalSentence(refusal)}</FieldError>
        </div>
      )}
      <div className="flex items-center justify-between gap-14 border-t border-ink px-14 py-13">
        <CheckBox {...register('keep')}>Keep me signed in</CheckBox>
        <Button
          type="submit"
          kind="primary"
          busy={signIn.isPending}
          className="h-40! px-33! text-value! font-semibold!"
        >
          Sign in
        </Button>
      </div>
      <div className="grid grid-cols-[84px_128px_1fr_74px_74px] border-t border-ink max-sm:grid-cols-[1fr_1fr_1fr]">
        <Fact label="Language">English</Fact>
        <div className="border-l border-ink px-13 py-6 max-sm:col-span-3 max-sm:row-start-3 max-sm:border-t max-sm:border-l-0">
          <span className="block text-label text-ink-3">Without signing in</span>
          <Link to="/wire" className="text-value text-blue underline">
            Wire
          </Link>
        </div>
        <div className="border-l border-ink px-13 py-6 max-sm:col-span-3 max-sm:row-start-2 max-sm:border-t max-sm:border-l-0">
          <span className="mb-3 block text-label text-ink-3">Theme</span>
          <SegmentedChoice
            small
            label="Theme"
            value={theme}
            options={[
              { value: 'paper', label: 'Paper' },
              { value: 'slate', label: 'Slate' },
            ]}
            onChange={chooseTheme}
          />
        </div>
        <Fact label="Rev." ruled>
          {version}
        </Fact>
        <Fact label="Sheet" ruled>
          1/1
        </Fact>
      </div>
    </form>
  );
}

const signInCell = 'border-ink! border-b-0! border-x-0! mx-0! px-14! pt-8! pb-10! [&_input]:text-section';

function Fact({
  label,
  ruled = false,
  children,
}: {
  readonly label: string;
  readonly ruled?: boolean;
  readonly children: ReactNode;
}) {
  return (
    <div className={ruled ? 'border-l border-ink px-13 py-6' : 'px-14 py-6'}>
      <span className="block text-label text-ink-3">{label}</span>
      <span className="text-value">{children}</span>
    </div>
  );
}

function refusalSentence(refusal: {
  readonly code: string;
  readonly message: string;
  readonly retryAfterSeconds: number | null;
}): string {
  if (refusal.code === 'wrong-credentials') {
    return 'This e-mail and password do not belong together. Check both and type the password again.';
  }
  if (refusal.code === 'too-many-requests' && refusal.retryAfterSeconds !== null) {
    const minutes = Math.ceil(refusal.retryAfterSeconds / 60);
    return `Too many tries. Wait ${minutes === 1 ? 'a minute' : `${minutes} minutes`}, then try again.`;
  }
  return refusal.message;
}
