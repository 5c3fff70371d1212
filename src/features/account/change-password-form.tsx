import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { z } from 'zod';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { changePasswordSchema } from '../../contract/session.ts';
import { callApiForNothing } from '../../lib/api-client.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useSession } from '../../lib/session.ts';

const formSchema = changePasswordSchema
  .extend({ again: z.string() })
  .refine(({ next, again }) => next === again, {
    path: ['again'],
    error: 'The two new passwords differ. Type the same one twice.',
  });
type Form = z.infer<typeof formSchema>;

const labels = { current: 'Current password', next: 'New password', again: 'New password again' } as const;

/** Changes the reader's password. Their other sessions end with it. */
export function ChangePasswordForm({ onDone }: { readonly onDone: () => void }) {
  const session = useSession();
  const { register, handleSubmit, setError, getValues, formState } = useForm<Form>({
    resolver: zodResolver(formSchema),
    defaultValues: { current: '', next: '', again: '' },
  });
  const change = useMutation({
    mutationFn: ({ current, next }: Form) =>
      callApiForNothing('/api/account/password', { method: 'PUT', body: { current, next } }),
    onSuccess: onDone,
    onError: (thrown) => {
      const error = asApiError(thrown);
      if (error.code === 'wrong-credentials') {
        setError(
          'current',
          { message: 'This is not your current password. Type it again.' },
          { shouldFocus: true },
        );
        return;
      }
      for (const { path, expected } of error.details) {
        if (path === 'current' || path === 'next') setError(path, { message: expected });
      }
    },
  });
  const refusal = change.error === null ? null : asApiError(change.error);
  const { errors } = formState;
  const nextLength = getValues('next').length;
  return (
    <form
      noValidate
      className="flex flex-col gap-14"
      onSubmit={(event) => void handleSubmit((form) => change.mutate(form))(event)}
    >
      {/* Password managers look for whose password it is. */}
      <input
        type="text"
        name="username"
        autoComplete="username"
        readOnly
        hidden
        value={session?.person?.email ?? ''}
      />
      <CellGrid>
        <InputCell
          label={labels.current}
          type="password"
          autoComplete="current-password"
          error={
            errors.current?.type === 'too_small'
              ? 'The current password is empty. Type it.'
              : errors.current?.message
          }
          {...register('current')}
        />
        <InputCell
          label={labels.next}
          type="password"
          autoComplete="new-password"
          error={errors.next && `The new password has ${nextLength} characters: ${errors.next.message}.`}
          {...register('next')}
        />
        <InputCell
          label={labels.again}
          type="password"
          autoComplete="new-password"
          error={errors.again?.message}
          {...register('again')}
        />
      </CellGrid>
      <p className="text-base text-ink-2">
        At least 12 characters; several words are easier to keep than odd signs. Wherever else you are signed
        in, you will have to sign in again.
      </p>
      {refusal !== null && refusal.code !== 'wrong-credentials' && refusal.details.length === 0 && (
        <ErrorNotice>{refusal.message}</ErrorNotice>
      )}
      <div>
        <Button type="submit" kind="primary" busy={change.isPending}>
          Change password
        </Button>
      </div>
    </form>
  );
}
