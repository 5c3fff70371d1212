import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { Button, buttonClasses } from '../../components/button.tsx';
import { SeverityCounts } from '../../components/severity-mark.tsx';
import { Stamp } from '../../components/stamp.tsx';
import type { DesignSummary } from '../../contract/designs.ts';
import type { Revision, Sitting } from '../../contract/revisions.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { revisionPath } from '../../lib/workspace-path.ts';
import type { HistoryPoint } from './history-point.ts';
import { stampOf, stepsOf } from './revision-words.ts';
import type { TimelineEntry } from './timeline-entries.ts';

interface TimelineTools {
  readonly onCompare: (from: HistoryPoint, to: HistoryPoint) => void;
  /** Absent where the reader may not restore, or not now. */
  readonly onRestore: ((point: HistoryPoint) => void) | undefined;
}

interface TimelineProps extends TimelineTools {
  readonly summary: Pick<DesignSummary, 'id' | 'state'>;
  readonly revision: string | undefined;
  readonly entries: readonly TimelineEntry[];
}

const now: HistoryPoint = { kind: 'now' };
const begun: HistoryPoint = { kind: 'patch', sequence: 0 };

/** A design's life from now back to its beginning: what was frozen and what became of it, who worked on it when. */
export function Timeline({ summary, revision, entries, ...tools }: TimelineProps) {
  const last = revisionIn(entries);
  return (
    <ol aria-label="History" className="flex flex-col">
      <Entry head={<Stamp state={summary.state} prefix={revision} />} title="The design as it is now">
        <Button small onClick={() => tools.onCompare(last, now)}>
          {last.kind === 'revision'
            ? `What changed since revision ${last.label}`
            : 'What changed since the beginning'}
        </Button>
      </Entry>
      {entries.map((entry, index) => {
        if (entry.kind === 'revision')
          return (
            <RevisionEntry
              key={entry.revision.id}
              designId={summary.id}
              of={entry.revision}
              before={revisionIn(entries.slice(index + 1))}
              {...tools}
            />
          );
        if (entry.kind === 'sitting')
          return <SittingEntry key={`s${entry.sitting.firstSequence}`} of={entry.sitting} {...tools} />;
        return (
          <Entry
            key="begun"
            title="Begun"
            notes={[[entry.by ?? 'Somebody', dateAndTime(new Date(entry.at))].join(', ')]}
          >
            {tools.onRestore && (
              <Button small kind="quiet" onClick={() => tools.onRestore?.(begun)}>
                Restore…
              </Button>
            )}
          </Entry>
        );
      })}
    </ol>
  );
}

/** The newest revision of these entries; the beginning where there is none. */
const revisionIn = (entries: readonly TimelineEntry[]): HistoryPoint => {
  const entry = entries.find(({ kind }) => kind === 'revision');
  return entry?.kind === 'revision' ? { kind: 'revision', label: entry.revision.label } : begun;
};

interface EntryProps {
  readonly title: ReactNode;
  /** What was frozen stands at a full mark on the line. */
  readonly frozen?: boolean;
  readonly head?: ReactNode;
  readonly notes?: readonly ReactNode[];
  /** Buttons. */
  readonly children: ReactNode;
}

function Entry({ title, frozen = false, head, notes = [], children }: EntryProps) {
  return (
    <li className="relative flex flex-wrap items-start gap-x-16 gap-y-6 border-l border-rule-strong py-12 pl-22 last:border-transparent">
      <span
        aria-hidden="true"
        className={
          frozen
            ? 'absolute top-16 -left-7 size-13 border-1.5 border-ink bg-brass'
            : 'absolute top-18 -left-5 size-9 rounded-full border-1.5 border-ink bg-paper'
        }
      />
      <div className="min-w-0 flex-1 basis-280">
        <p className="flex flex-wrap items-center gap-8 text-value font-semibold">
          {title}
          {head}
        </p>
        {notes.map((note, index) => (
          <p key={index} className="mt-2 max-w-680 text-base break-words text-ink-2">
            {note}
          </p>
        ))}
      </div>
      <div className="flex flex-wrap gap-8">{children}</div>
    </li>
  );
}

function RevisionEntry({
  designId,
  of: revision,
  before,
  onCompare,
  onRestore,
}: TimelineTools & {
  readonly designId: string;
  readonly of: Revision;
  /** The revision before it, or the beginning. */
  readonly before: HistoryPoint;
}) {
  const point: HistoryPoint = { kind: 'revision', label: revision.label };
  const { state, counts, waived, message, note } = revision;
  return (
    <Entry
      frozen
      title={`Revision ${revision.label}`}
      head={
        state === 'withdrawn' || state === 'sent-back' ? (
          <span className="text-base font-medium text-ink-2">
            {state === 'withdrawn' ? 'Taken back' : 'Sent back'}
          </span>
        ) : (
          <Stamp state={stampOf(state)} />
        )
      }
      notes={[
        ...stepsOf(revision),
        ...(message === '' ? [] : [`Asked: ${message}`]),
        ...(note === '' ? [] : [`${state === 'sent-back' ? 'Reason' : 'Note'}: ${note}`]),
        <span key="counts" className="inline-flex flex-wrap items-center gap-10">
          <SeverityCounts counts={counts} worded clear="no open findings" />
          {waived > 0 && <span>{waived === 1 ? '1 waived' : `${waived} waived`}</span>}
          <span title={`SHA-256 ${revision.contentHash}`}>Content {revision.contentHash.slice(0, 12)}</span>
        </span>,
      ]}
    >
      <Link to={revisionPath(designId, revision.id)} className={buttonClasses({ small: true })}>
        Open<span className="sr-only"> revision {revision.label}</span>
      </Link>
      <Button small onClick={() => onCompare(before, point)}>
        What it changed<span className="sr-only">, revision {revision.label}</span>
      </Button>
      {onRestore && (
        <Button small kind="quiet" onClick={() => onRestore(point)}>
          Restore…<span className="sr-only"> revision {revision.label}</span>
        </Button>
      )}
    </Entry>
  );
}

const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' });

function SittingEntry({ of: sitting, onCompare, onRestore }: TimelineTools & { readonly of: Sitting }) {
  const { by, from, until, firstSequence, lastSequence } = sitting;
  const edits = lastSequence - firstSequence + 1;
  const [start, end] = [new Date(from), new Date(until)];
  const isMoment = clock.format(start) === clock.format(end);
  const when = isMoment ? dateAndTime(start) : `${dateAndTime(start)} to ${clock.format(end)}`;
  const after: HistoryPoint = { kind: 'patch', sequence: lastSequence };
  return (
    <Entry title={by ?? 'Somebody'} notes={[`${when}, ${edits === 1 ? '1 edit' : `${edits} edits`}`]}>
      <Button small onClick={() => onCompare({ kind: 'patch', sequence: firstSequence - 1 }, after)}>
        What changed
        <span className="sr-only">
          {' '}
          by {by ?? 'somebody'}, {when}
        </span>
      </Button>
      {onRestore && (
        <Button small kind="quiet" onClick={() => onRestore(after)}>
          Restore…
          <span className="sr-only">
            {' '}
            as {by ?? 'somebody'} left it, {when}
          </span>
        </Button>
      )}
    </Entry>
  );
}
