import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import { invitationDays } from '../../contract/invitations.ts';
import { emailSchema, roles, type Role } from '../../contract/session.ts';
import { asApiError } from '../../lib/api-error.ts';
import { roleWords } from '../../lib/role-words.ts';
import { useInvite } from './invitations-query.ts';

const mayDo: Readonly<Record<Role, string>> = {
  owner: 'Runs the workspace: people, pools and profiles, and everything in it.',
  architect: 'Creates and edits designs, asks for their review.',
  reviewer: 'Reads, comments, waives findings, approves or sends back; edits no drawing.',
  presales: 'Reads, comments, starts drafts, shares revisions with customers.',
  installer: 'Reads approved revisions and builds from them.',
};

interface InviteDialogProps {
  readonly workspaceId: string;
  readonly onClose: () => void;
}

/** Asks somebody into the workspace by mail. */
export function InviteDialog({ workspaceId, onClose }: InviteDialogProps) {
  const [email, setEmail] = useState('');
  const [role, setRole] = useState<Role>('reviewer');
  const [tried, setTried] = useState(false);
  const invite = useInvite(workspaceId);
  const refusal = invite.error === null ? null : asApiError(invite.error);
  const read = emailSchema.safeParse(email);
  const problem =
    email.trim() === ''
      ? 'E-mail is empty. Type the address that the invitation goes to.'
      : read.success
        ? undefined
        : `E-mail ${email.trim()}: ${read.error.issues[0]?.message ?? ''}.`;
  const isOfEmail = refusal?.expectedOf('email') !== undefined;
  const submit = (): void => {
    setTried(true);
    if (!read.success) return;
    invite.mutate(
      { email: read.data, role },
      {
        onSuccess: () => {
          showToast({ tone: 'done', text: `${read.data} is invited as ${role}.` });
          onClose();
        },
      },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title="Invite somebody"
      description={`They get a mail with a link that works once, for ${invitationDays} days.`}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={invite.isPending}>
            Send the invitation
          </Button>
        </>
      }
    >
      <CellGrid>
        <InputCell
          label="E-mail"
          type="email"
          autoComplete="off"
          placeholder="r.halloran@ternwick.example"
          value={email}
          onChange={(event) => {
            setEmail(event.target.value);
            invite.reset();
          }}
          error={(tried ? problem : undefined) ?? (isOfEmail ? refusal?.message : undefined)}
        />
        <SelectCell
          label="Role"
          value={role}
          options={roles.map((each) => ({ value: each, label: roleWords[each] }))}
          onChange={setRole}
        />
      </CellGrid>
      <p className="mt-8 text-base text-ink-2">{mayDo[role]}</p>
      {refusal !== null && !isOfEmail && <ErrorNotice className="mt-14">{refusal.message}</ErrorNotice>}
    </Dialog>
  );
}
