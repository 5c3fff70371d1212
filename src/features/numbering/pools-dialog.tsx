import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { Icon } from '../../components/icon.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { WorkspacePools } from '../../contract/numbering.ts';
import { asApiError } from '../../lib/api-error.ts';
import { usePutPools } from '../../lib/pools-query.ts';
import {
  addLine,
  changeLine,
  draftOf,
  poolLists,
  readDraft,
  removeLine,
  type PoolDraft,
  type PoolList,
} from './pools-draft.ts';

interface PoolsDialogProps {
  readonly workspaceId: string;
  readonly kept: WorkspacePools;
  readonly onClose: () => void;
}

/** Sets where the workspace's designs take their numbers from, and what they leave alone. */
export function PoolsDialog({ workspaceId, kept, onClose }: PoolsDialogProps) {
  const [draft, setDraft] = useState(() => draftOf(kept.pools));
  const [tried, setTried] = useState(false);
  const put = usePutPools(workspaceId);
  const read = readDraft(draft);
  const problems = tried && !read.ok ? read.problems : {};
  const submit = (): void => {
    setTried(true);
    if (read.ok) put.mutate({ pools: read.pools, basedOn: kept.changedAt }, { onSuccess: onClose });
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      widthPx={640}
      title="Pools of the workspace"
      description="All designs of the workspace take their numbers from here. A pool without a range leaves the usual ones."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={put.isPending}>
            Save
          </Button>
        </>
      }
    >
      <div className="flex flex-col gap-20">
        {poolLists.map((list) => (
          <PoolLines key={list.name} list={list} draft={draft} problems={problems} onChange={setDraft} />
        ))}
      </div>
      {put.error !== null && <ErrorNotice className="mt-14">{asApiError(put.error).message}</ErrorNotice>}
    </Dialog>
  );
}

interface PoolLinesProps {
  readonly list: PoolList;
  readonly draft: PoolDraft;
  readonly problems: { readonly [field: string]: string };
  readonly onChange: (draft: PoolDraft) => void;
}

function PoolLines({ list, draft, problems, onChange }: PoolLinesProps) {
  const lines = draft[list.name];
  return (
    <fieldset className="flex flex-col gap-6">
      <legend className="mb-4 text-section font-semibold">{list.title}</legend>
      <p className="text-note text-ink-2">{list.explains}</p>
      {lines.map((line, at) => (
        // Lines have no names of their own: their place is what tells them apart.
        <div key={at} className="flex items-start gap-6">
          <CellGrid columns={list.isRange ? '1fr 1fr 2fr' : '2fr 2fr'} className="min-w-0 flex-1">
            {list.fields.map(({ field, label, example }) => (
              <InputCell
                key={field}
                label={label}
                place={`${list.title}, line ${at + 1}`}
                value={line[field]}
                placeholder={example}
                error={problems[`${list.name}.${at}.${field}`]}
                onChange={(event) =>
                  onChange(changeLine(draft, list.name, at, { [field]: event.target.value }))
                }
              />
            ))}
          </CellGrid>
          <Button
            kind="quiet"
            small
            iconOnly
            className="mt-9"
            aria-label={`Remove line ${at + 1} of ${list.title}`}
            icon={<Icon name="cross" size={14} />}
            onClick={() => onChange(removeLine(draft, list.name, at))}
          />
        </div>
      ))}
      <Button small className="self-start" onClick={() => onChange(addLine(draft, list.name))}>
        {list.isRange ? 'Add a range' : 'Add a prefix'}
      </Button>
    </fieldset>
  );
}
