import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '../../components/button.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { firstOwnerSchema, type FirstOwner } from '../../contract/workspaces.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useBecomeFirstOwner } from '../../lib/session.ts';
import { blockCell, FormBlock } from './form-block.tsx';
import { refusalSentence } from './refusal-sentence.ts';

/** The first account of an empty server, and its workspace. */
export function FirstOwnerForm() {
  const become = useBecomeFirstOwner();
  const { register, handleSubmit, getValues, formState } = useForm<
    FirstOwner,
    unknown,
    z.output<typeof firstOwnerSchema>
  >({
    resolver: zodResolver(firstOwnerSchema),
    defaultValues: { code: '', name: '', email: '', password: '', workspaceName: '' },
  });
  const { errors } = formState;
  const refusal = become.error === null ? null : asApiError(become.error);
  const isCodeWrong = refusal?.code === 'wrong-credentials';
  return (
    <FormBlock
      title="First owner"
      label="First owner"
      onSubmit={() => void handleSubmit((wanted) => become.mutate(wanted))()}
      refusal={refusal === null || isCodeWrong ? undefined : refusalSentence(refusal)}
      actions={
        <Button
          type="submit"
          kind="primary"
          busy={become.isPending}
          className="ml-auto h-40! px-33! text-value! font-semibold!"
        >
          Begin
        </Button>
      }
    >
      <InputCell
        label="Code that the server printed at its start"
        autoComplete="off"
        spellCheck={false}
        // eslint-disable-next-line jsx-a11y/no-autofocus -- the page is for nothing else
        autoFocus
        className={blockCell}
        error={
          errors.code
            ? 'The code is empty. Copy it from where the server was started.'
            : isCodeWrong
              ? refusal.message
              : undefined
        }
        {...register('code')}
      />
      <InputCell
        label="Your name"
        autoComplete="name"
        className={blockCell}
        error={problemOf('Name', getValues('name'), errors.name?.message)}
        {...register('name')}
      />
      <InputCell
        label="E-mail"
        type="email"
        autoComplete="username"
        className={blockCell}
        error={problemOf('E-mail', getValues('email'), errors.email?.message)}
        {...register('email')}
      />
      <InputCell
        label="Password, at least 12 characters"
        type="password"
        autoComplete="new-password"
        className={blockCell}
        error={
          errors.password &&
          (getValues('password') === ''
            ? 'The password is empty: expected at least 12 characters.'
            : `The password has ${getValues('password').length} characters: ${errors.password.message}.`)
        }
        {...register('password')}
      />
      <InputCell
        label="Name of your workspace"
        autoComplete="organization"
        placeholder="Ternwick Net"
        className={blockCell}
        error={problemOf('Workspace', getValues('workspaceName'), errors.workspaceName?.message)}
        {...register('workspaceName')}
      />
    </FormBlock>
  );
}

/** Field, value and way out. */
function problemOf(label: string, value: string, expected: string | undefined): string | undefined {
  if (expected === undefined) return undefined;
  return value.trim() === '' ? `${label} is empty: ${expected}.` : `${label} ${value.trim()}: ${expected}.`;
}
