import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { resetMinutes } from '../../contract/password-reset.ts';
import { emailSchema } from '../../contract/session.ts';
import { callApiForNothing } from '../../lib/api-client.ts';
import { asApiError } from '../../lib/api-error.ts';
import { blockCell, FormBlock } from './form-block.tsx';
import { refusalSentence } from './refusal-sentence.ts';

/** Asks for a link that sets a new password. What is said afterwards tells nobody who has an account. */
export function AskForResetForm() {
  const [email, setEmail] = useState('');
  const [tried, setTried] = useState(false);
  const ask = useMutation({
    mutationFn: (address: string) =>
      callApiForNothing('/api/password-reset', { method: 'POST', body: { email: address } }),
  });
  const read = emailSchema.safeParse(email);
  const refusal = ask.error === null ? null : asApiError(ask.error);
  return (
    <FormBlock
      title="New password"
      label="Ask for a new password"
      onSubmit={() => {
        setTried(true);
        if (read.success) ask.mutate(read.data);
      }}
      refusal={refusal === null ? undefined : refusalSentence(refusal)}
      actions={
        <>
          <Link to="/sign-in" className="text-base text-blue underline">
            Back to signing in
          </Link>
          <Button
            type="submit"
            kind="primary"
            busy={ask.isPending}
            className="h-40! px-33! text-value! font-semibold!"
          >
            {ask.isSuccess ? 'Send another link' : 'Send me a link'}
          </Button>
        </>
      }
    >
      <InputCell
        label="E-mail that you sign in with"
        type="email"
        autoComplete="username"
        // eslint-disable-next-line jsx-a11y/no-autofocus -- the page is for nothing else
        autoFocus
        className={blockCell}
        value={email}
        onChange={(event) => {
          setEmail(event.target.value);
          ask.reset();
        }}
        error={
          tried && !read.success
            ? email.trim() === ''
              ? 'E-mail is empty. Type the address that you sign in with.'
              : `E-mail ${email.trim()}: ${read.error.issues[0]?.message ?? ''}.`
            : undefined
        }
      />
      <p role="status" className="border-t border-ink px-14 pt-8 pb-10 text-base text-ink-2">
        {ask.isSuccess
          ? `If somebody signs in as ${ask.variables}, a mail with a link is on its way to them. Nothing after some minutes? Look among unwanted mail, and check the address.`
          : `You get a mail with a link that works once, for ${resetMinutes} minutes.`}
      </p>
    </FormBlock>
  );
}
