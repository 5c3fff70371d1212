import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Revision } from '../../contract/revisions.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { useRestore } from '../../workspace/revisions-query.ts';
import { pointWords, type HistoryPoint } from './history-point.ts';

interface RestoreDialogProps {
  readonly designId: string;
  readonly point: HistoryPoint;
  readonly revisions: readonly Revision[];
  readonly onClose: () => void;
}

/** Makes the draft what the design was at a moment; one edit, which its own button undoes. */
export function RestoreDialog({ designId, point, revisions, onClose }: RestoreDialogProps) {
  const open = useOpenDesign();
  const { mutate, error, isPending } = useRestore(designId);
  const words = pointWords(point);
  const restore = async (): Promise<void> => {
    await open.flush();
    const before = open.store.getState().sequence;
    const revisionId =
      point.kind === 'revision' ? revisions.find(({ label }) => label === point.label)?.id : undefined;
    mutate(
      revisionId === undefined
        ? { sequence: point.kind === 'patch' ? point.sequence : before }
        : { revisionId },
      {
        onSuccess: ({ editId }) => {
          if (editId === null) showToast({ tone: 'done', text: `The draft is the same as ${words}.` });
          else
            showToast({
              tone: 'done',
              text: `The draft is now ${words}.`,
              action: { label: 'Undo', onSelect: () => mutate({ sequence: before }) },
            });
          onClose();
        },
      },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      title="Restore as the draft"
      description={`The draft becomes ${words}. That is one edit more: nothing of the history is lost, and it can be undone.`}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="primary" busy={isPending} onClick={() => void restore()}>
            Restore
          </Button>
        </>
      }
    >
      <p className="text-base text-ink-2">
        Title, values and places on the sheet change for everybody who has the design open. Frozen revisions
        stay as they are.
      </p>
      {error !== null && <ErrorNotice className="mt-14">{asApiError(error).message}</ErrorNotice>}
    </Dialog>
  );
}
