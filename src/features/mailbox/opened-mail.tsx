import { useQuery } from '@tanstack/react-query';
import { CellGrid, PlainCell, ReadCell } from '../../components/cell.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import type { KeptMail } from '../../contract/mailbox.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { keptMailQuery, mailPagePath } from './mailbox-query.ts';
import { TextWithLinks } from './text-with-links.tsx';

export const mailLooks = ['page', 'text', 'source'] as const;
export type MailLook = (typeof mailLooks)[number];
const lookWords: Readonly<Record<MailLook, string>> = { page: 'HTML', text: 'Plain text', source: 'Source' };

interface OpenedMailProps {
  readonly workspaceId: string;
  readonly mail: KeptMail;
  readonly look: MailLook;
  readonly onLook: (look: MailLook) => void;
}

/** One kept mail as its reader would have it, as plain text, and as it went over the wire. */
export function OpenedMail({ workspaceId, mail, look, onLook }: OpenedMailProps) {
  const query = useQuery(keptMailQuery(workspaceId, mail.id));
  const { data } = query;
  return (
    <article aria-label={mail.subject}>
      <CellGrid columns={2}>
        <ReadCell label="Subject" span={2}>
          {mail.subject}
        </ReadCell>
        <ReadCell label="To">{mail.to}</ReadCell>
        <ReadCell label="From">{data?.from ?? '…'}</ReadCell>
        <PlainCell span={2} className="flex-row! flex-wrap items-center justify-between gap-8 py-8!">
          <span className="text-base text-ink-2">kept {dateAndTime(new Date(mail.keptAt))}</span>
          <SegmentedChoice
            small
            label="Shown as"
            value={look}
            options={mailLooks.map((value) => ({ value, label: lookWords[value] }))}
            onChange={onLook}
          />
        </PlainCell>
      </CellGrid>
      <div className="-mt-px border border-rule-strong bg-field">
        {look === 'page' ? (
          <iframe
            title={`The mail ‘${mail.subject}’`}
            src={mailPagePath(workspaceId, mail.id)}
            sandbox="allow-popups allow-popups-to-escape-sandbox"
            className="block h-560 w-full bg-field"
          />
        ) : data === undefined ? (
          <div className="px-14">
            <ReadingState what="The mail’s words" query={query} />
          </div>
        ) : (
          // Focusable, so that the keyboard scrolls it.
          // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
          <pre tabIndex={0} className="max-h-560 overflow-auto px-14 py-12 text-base whitespace-pre-wrap">
            {look === 'text' ? <TextWithLinks text={data.text} /> : data.source}
          </pre>
        )}
      </div>
    </article>
  );
}
