import { Button } from '../../components/button.tsx';
import { CellGrid, PlainCell, ReadCell } from '../../components/cell.tsx';
import { Stamp } from '../../components/stamp.tsx';
import type { DesignSummary } from '../../contract/designs.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { useRelease } from './use-release.tsx';

/** Where a design's review stands: its state, who asked and with what words, who decided; and for a draft the way to ask. */
export function ReleaseFacts({ summary }: { readonly summary: DesignSummary }) {
  const { commands, revision, dialog } = useRelease(summary);
  const isDraft = summary.state === 'draft';
  const shown = isDraft ? undefined : revision;
  return (
    <>
      <CellGrid>
        <ReadCell label="State">
          <Stamp state={summary.state} prefix={shown?.label ?? summary.revision ?? undefined} />
        </ReadCell>
        {shown !== undefined && (
          <ReadCell label="Review asked for by">
            {shown.askedBy.name}, {dateAndTime(new Date(shown.askedAt))}
          </ReadCell>
        )}
        {shown !== undefined && shown.message !== '' && (
          <ReadCell label="With the words">
            <span className="font-normal whitespace-pre-line">{shown.message}</span>
          </ReadCell>
        )}
        {shown?.decidedBy != null && shown.decidedAt !== null && (
          <ReadCell label="Approved by">
            {shown.decidedBy.name}, {dateAndTime(new Date(shown.decidedAt))}
          </ReadCell>
        )}
        {shown !== undefined && shown.note !== '' && (
          <ReadCell label="Note">
            <span className="font-normal whitespace-pre-line">{shown.note}</span>
          </ReadCell>
        )}
        {isDraft && commands.length > 0 && (
          <PlainCell className="flex flex-wrap gap-8">
            {commands.map(({ label, run, primary = false, busy = false }) => (
              <Button key={label} kind={primary ? 'primary' : 'secondary'} busy={busy} onClick={run}>
                {label}
              </Button>
            ))}
          </PlainCell>
        )}
      </CellGrid>
      {dialog}
    </>
  );
}
