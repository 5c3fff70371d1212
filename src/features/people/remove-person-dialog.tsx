import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { Member } from '../../contract/workspaces.ts';
import { useRemovePerson } from './people-query.ts';

interface RemovePersonDialogProps {
  readonly workspaceId: string;
  readonly workspaceName: string;
  readonly member: Member;
  /** The reader is who goes. */
  readonly isReader: boolean;
  readonly onGone: () => void;
  readonly onClose: () => void;
}

/** Says what it means that somebody goes, before they do. */
export function RemovePersonDialog({
  workspaceId,
  workspaceName,
  member,
  isReader,
  onGone,
  onClose,
}: RemovePersonDialogProps) {
  const remove = useRemovePerson(workspaceId);
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={() => remove.mutate(member.personId, { onSuccess: onGone })}
      title={isReader ? `Leave ${workspaceName}` : `Remove ${member.name}`}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="danger" busy={remove.isPending}>
            {isReader ? 'Leave' : 'Remove'}
          </Button>
        </>
      }
    >
      <p className="text-base">
        {isReader
          ? 'You see nothing of this workspace any more, and tokens that you made for it end. What you did stays, under your name. An owner can invite you again.'
          : `${member.name} sees nothing of this workspace any more, from the next request on, and tokens made for it end. What they did stays, under their name. They can be invited again.`}
      </p>
      {remove.error !== null && <ErrorNotice className="mt-14">{remove.error.message}</ErrorNotice>}
    </Dialog>
  );
}
