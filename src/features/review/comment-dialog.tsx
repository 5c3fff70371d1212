import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { SelectCell } from '../../components/field-cells.tsx';
import { showToast } from '../../components/toast.tsx';
import type { PinTo } from '../../contract/comments.ts';
import type { Design } from '../../engine/model/design.ts';
import { asApiError } from '../../lib/api-error.ts';
import { commentsQuery, useWriteComment } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { useChecks } from '../../workspace/checks-context.tsx';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import { Composer } from './composer.tsx';
import { propertiesOf } from './property-words.ts';

interface CommentDialogProps {
  readonly pin: PinTo;
  readonly onClose: () => void;
  /** Leads to a thread that was begun. */
  readonly onOpenThread: (threadId: string) => void;
}

/** Begins a thread about an element, one of its properties, a finding or the whole design. */
export function CommentDialog({ pin, onClose, onOpenThread }: CommentDialogProps) {
  const { designId } = useDesignPlace();
  const open = useOpenDesign();
  const document = useOpenState((state) => state.document);
  const { findings } = useChecks();
  const { data } = useQuery(commentsQuery(designId));
  const { mutate, isPending, error } = useWriteComment(designId);
  const [property, setProperty] = useState('');
  const [unsaved, setUnsaved] = useState(false);
  const properties = pin.kind === 'element' ? propertiesOfElement(document, pin) : [];
  const chosen = properties.find(({ path }) => path.join('.') === property);

  const submit = async (body: string): Promise<void> => {
    // The server holds what is commented on against the design as it has it.
    await open.flush();
    const isSaved = open.store.getState().save.kind === 'saved';
    setUnsaved(!isSaved);
    if (!isSaved) return;
    mutate(
      {
        body,
        pin: pin.kind === 'element' && chosen !== undefined ? { ...pin, path: [...chosen.path] } : pin,
      },
      {
        onSuccess: ({ id }) => {
          onClose();
          showToast({
            tone: 'done',
            text: 'The comment is written.',
            action: { label: 'Show it', onSelect: () => onOpenThread(id) },
          });
        },
      },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      title={titleOf(document, pin)}
      description="Everybody of the workspace who can open the design reads it."
      widthPx={560}
    >
      {pin.kind === 'finding' && (
        <p className="mb-12 border border-rule-2 bg-raise px-12 py-8 text-base font-medium break-words">
          {findings.find(({ key }) => key === pin.key)?.sentence ?? 'The checks no longer find this.'}
        </p>
      )}
      {properties.length > 0 && (
        <CellGrid className="mb-12">
          <SelectCell
            label="About"
            value={property}
            placeholder="All of it"
            options={properties.map(({ path, label }) => ({ value: path.join('.'), label }))}
            onChange={setProperty}
            onClear={() => setProperty('')}
          />
        </CellGrid>
      )}
      <Composer
        label="Comment"
        members={data?.members ?? []}
        placeholder="Why does this end have another VNI? @ calls somebody."
        submitWords="Comment"
        busy={isPending}
        failure={
          unsaved
            ? 'The design’s last edits are not saved yet, so the server can’t see what you comment on. Wait until the bar says Saved, then send it.'
            : error === null
              ? undefined
              : asApiError(error).message
        }
        onCancel={onClose}
        onSubmit={(body) => void submit(body)}
      />
    </Dialog>
  );
}

const titleOf = (design: Design, pin: PinTo): string => {
  switch (pin.kind) {
    case 'design':
      return 'Comment on the design';
    case 'finding':
      return 'Comment on a finding';
    case 'element':
      return `Comment on ${kindOf(design, pin.ref).toLowerCase()} ${nameOf(design, pin.ref)}`;
  }
};

const propertiesOfElement = (design: Design, { ref }: Extract<PinTo, { kind: 'element' }>) => {
  const device = ref.collection === 'devices' ? design.devices[ref.id] : undefined;
  const entry = ref.port === undefined ? design[ref.collection][ref.id] : device?.ports[ref.port];
  return entry === undefined ? [] : propertiesOf(ref, entry);
};
