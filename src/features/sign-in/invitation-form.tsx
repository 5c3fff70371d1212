import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button, buttonClasses } from '../../components/button.tsx';
import { ReadCell } from '../../components/cell.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { newcomerSchema, type OfferedInvitation } from '../../contract/invitations.ts';
import type { Person } from '../../contract/session.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { signInPath } from '../../lib/return-path.ts';
import { roleWords } from '../../lib/role-words.ts';
import { useSignOut } from '../../lib/session.ts';
import { blockCell, FormBlock } from './form-block.tsx';
import { useAcceptInvitation } from './invitation-query.ts';
import { PasswordCell } from './password-cell.tsx';
import { refusalSentence } from './refusal-sentence.ts';

interface InvitationFormProps {
  readonly token: string;
  readonly offered: OfferedInvitation;
  /** Who is signed in, if anybody is. */
  readonly reader: Person | null;
  /** The reader is in the workspace now. */
  readonly onJoined: (workspaceId: string) => void;
}

const doIt = 'h-40! px-33! text-value! font-semibold!';
const factCell = `${blockCell} bg-transparent!`;

/** The title block as an invitation: what to, and the step that is left for whoever holds the link. */
export function InvitationForm({ token, offered, reader, onJoined }: InvitationFormProps) {
  const [name, setName] = useState('');
  const [password, setPassword] = useState('');
  const [tried, setTried] = useState(false);
  const accept = useAcceptInvitation();
  const signOut = useSignOut();
  const refusal = accept.error === null ? null : asApiError(accept.error);
  const step = stepOf(offered, reader);
  const read = newcomerSchema.safeParse({ name, password });
  const problemOf = (field: 'name' | 'password'): string | undefined =>
    read.error?.issues.find(({ path }) => path[0] === field)?.message;
  const nameProblem =
    name.trim() === ''
      ? 'Your name is empty. Type it as your colleagues know it.'
      : problemOf('name') && `Name ${name}: ${problemOf('name')}.`;
  const passwordProblem =
    problemOf('password') && `The password has ${password.length} characters: ${problemOf('password')}.`;
  const submit = (): void => {
    setTried(true);
    const onSuccess = ({ workspaceId }: { readonly workspaceId: string }) => onJoined(workspaceId);
    if (step === 'join') accept.mutate({ token }, { onSuccess });
    if (step === 'begin' && read.success) accept.mutate({ token, newcomer: read.data }, { onSuccess });
  };
  return (
    <FormBlock
      title={`Join ${offered.workspaceName}`}
      label="Invitation"
      onSubmit={submit}
      refusal={refusal === null ? undefined : refusalSentence(refusal)}
      actions={
        step === 'leave' ? (
          <>
            <Link to="/" className="text-base text-blue underline">
              Stay signed in
            </Link>
            <Button kind="primary" busy={signOut.isPending} className={doIt} onClick={() => signOut.mutate()}>
              Sign out and go on
            </Button>
          </>
        ) : step === 'sign-in' ? (
          <Link
            to={signInPath(`/invitation/${token}`)}
            className={`${buttonClasses({ kind: 'primary' })} ml-auto ${doIt}`}
          >
            Sign in and join
          </Link>
        ) : (
          <Button type="submit" kind="primary" busy={accept.isPending} className={`ml-auto ${doIt}`}>
            {step === 'join' ? 'Join' : 'Make my account and join'}
          </Button>
        )
      }
    >
      <ReadCell label="As" className={factCell}>
        {roleWords[offered.role]}
        {offered.invitedBy !== null && `, invited by ${offered.invitedBy}`}
      </ReadCell>
      <ReadCell label="For" className={factCell}>
        {offered.email}
        <span className="block text-note font-normal text-ink-3">
          once, until {dateAndTime(new Date(offered.expiresAt))}
        </span>
      </ReadCell>
      {step === 'begin' && (
        <>
          {/* Password managers look for whose password it is. */}
          <input type="text" name="username" autoComplete="username" readOnly hidden value={offered.email} />
          <InputCell
            label="Your name"
            autoComplete="name"
            // eslint-disable-next-line jsx-a11y/no-autofocus -- the page is for nothing else
            autoFocus
            className={blockCell}
            value={name}
            onChange={(event) => setName(event.target.value)}
            error={tried ? nameProblem : undefined}
          />
          <PasswordCell
            label="Password, at least 12 characters"
            value={password}
            onChange={setPassword}
            error={tried ? passwordProblem : undefined}
          />
        </>
      )}
      {step === 'sign-in' && (
        <p className="border-t border-ink px-14 pt-8 pb-10 text-base text-ink-2">
          Somebody signs in with this address already. Sign in with it, and you come back here to join.
        </p>
      )}
      {step === 'leave' && (
        <p className="border-t border-ink px-14 pt-8 pb-10 text-base text-ink-2">
          You are signed in as {reader?.email}, and the invitation is for {offered.email}. Sign out to go on
          with it, or ask for an invitation of your own address.
        </p>
      )}
    </FormBlock>
  );
}

type Step = 'join' | 'begin' | 'sign-in' | 'leave';

function stepOf({ email, hasAccount }: OfferedInvitation, reader: Person | null): Step {
  if (reader === null) return hasAccount ? 'sign-in' : 'begin';
  return reader.email === email ? 'join' : 'leave';
}
