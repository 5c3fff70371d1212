import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import type { Column } from '../../components/table-view.ts';
import { EmptyState } from '../../components/empty-state.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { ShownOnce } from '../../components/shown-once.tsx';
import { showToast } from '../../components/toast.tsx';
import { useTableView } from '../../components/use-table-view.ts';
import { WorkTable } from '../../components/work-table.tsx';
import type { Share } from '../../contract/shares.ts';
import { dateAndTime, dayByUtc, dayInWords, relativeTime } from '../../lib/format-time.ts';
import { useNow } from '../../lib/use-now.ts';
import { revisionsQuery } from '../../workspace/revisions-query.ts';
import { ShareDialog } from './share-dialog.tsx';
import { sharesQuery, useRevokeShare } from './shares-query.ts';

const shareable = new Set(['in-review', 'approved', 'built']);

interface SharesDeskProps {
  readonly designId: string;
  /** The revision for which a link was asked; its dialog is open at first. */
  readonly asked?: string | undefined;
}

/** Who may see which revision by a link, how often they looked, a new link, the end of any. */
export function SharesDesk({ designId, asked }: SharesDeskProps) {
  const shares = useQuery(sharesQuery(designId));
  const revisions = useQuery(revisionsQuery(designId));
  const now = useNow();
  const revoke = useRevokeShare(designId);
  const [isMaking, setMaking] = useState(asked !== undefined);
  const [link, setLink] = useState<string>();
  const view = useTableView('shares');
  if (shares.data === undefined) return <ReadingState what="The links" query={shares} />;
  if (revisions.data === undefined) return <ReadingState what="The revisions" query={revisions} />;
  const offered = revisions.data.filter(({ state }) => shareable.has(state));
  const end = ({ id, label }: Share): void =>
    revoke.mutate(id, {
      onSuccess: () => showToast({ tone: 'done', text: `The link for ${label} opens nothing any more.` }),
      onError: (error) => showToast({ tone: 'failed', text: `Not revoked. ${error.message}` }),
    });
  const make =
    offered.length === 0 ? undefined : (
      <Button kind="primary" onClick={() => setMaking(true)}>
        New link
      </Button>
    );
  return (
    <div className="flex flex-col gap-14">
      {link !== undefined && (
        <ShownOnce what="link" secret={link} onKept={() => setLink(undefined)}>
          It is kept as a hash and can’t be shown again. Whoever has it sees the revision; send it only to
          those it is for.
        </ShownOnce>
      )}
      {shares.data.length === 0 ? (
        <EmptyState title="Nobody outside sees this design" action={make}>
          {offered.length === 0
            ? 'A link shows one revision to a customer without a sign-in. There is none to show yet: ask for a review first, which freezes the design.'
            : 'A link shows one revision to a customer without a sign-in, until a day that you set. Addresses and findings can be left out.'}
        </EmptyState>
      ) : (
        <WorkTable
          caption="Links to revisions"
          filterLabel="For, revision or person"
          columns={columnsOf(now, end, revoke.isPending)}
          rows={shares.data}
          rowKey={({ id }) => id}
          view={view}
          before={make}
        />
      )}
      {isMaking && offered.length > 0 && (
        <ShareDialog
          designId={designId}
          revisions={offered}
          revisionId={asked}
          now={now}
          onMade={(made) => {
            setLink(made);
            setMaking(false);
          }}
          onClose={() => setMaking(false)}
        />
      )}
    </div>
  );
}

/** What has become of a link. */
const endWords = ({ revokedAt, revokedBy, expiresOn }: Share, now: Date): string => {
  if (revokedAt !== null) return `revoked by ${revokedBy ?? 'somebody'}`;
  return expiresOn < dayByUtc(now) ? `ended on ${dayInWords(expiresOn)}` : `to ${dayInWords(expiresOn)}`;
};
const isOpen = ({ revokedAt, expiresOn }: Share, now: Date): boolean =>
  revokedAt === null && expiresOn >= dayByUtc(now);

const showsWords = ({ showsAddresses, showsFindings, hasPassphrase }: Share): string =>
  [
    showsAddresses ? 'addresses' : 'no addresses',
    showsFindings ? 'findings' : 'no findings',
    ...(hasPassphrase ? ['passphrase'] : []),
  ].join(', ');

const columnsOf = (now: Date, end: (share: Share) => void, isEnding: boolean): readonly Column<Share>[] => [
  {
    key: 'label',
    head: 'For',
    cell: ({ label }) => <span className="font-medium">{label}</span>,
    text: ({ label }) => label,
    sortBy: ({ label }) => label,
  },
  {
    key: 'revision',
    head: 'Revision',
    cell: ({ revisionLabel }) => revisionLabel,
    text: ({ revisionLabel }) => revisionLabel,
    sortBy: ({ revisionLabel }) => revisionLabel,
  },
  { key: 'shows', head: 'Shows', cell: showsWords, text: showsWords },
  {
    key: 'until',
    head: 'Opens',
    cell: (share) => endWords(share, now),
    text: (share) => endWords(share, now),
    sortBy: ({ expiresOn }) => expiresOn,
  },
  {
    key: 'views',
    head: 'Opened',
    align: 'right',
    cell: ({ views, viewedAt }) => (
      <span title={viewedAt === null ? undefined : `last ${dateAndTime(new Date(viewedAt))}`}>
        {views === 0 ? 'never' : views}
      </span>
    ),
    text: ({ views }) => String(views),
    sortBy: ({ views }) => views,
    highestFirst: true,
  },
  {
    key: 'made',
    head: 'Made',
    cell: ({ madeBy, madeAt }) => `${madeBy ?? 'somebody'}, ${relativeTime(new Date(madeAt), now)}`,
    text: ({ madeBy }) => madeBy ?? '',
    sortBy: ({ madeAt }) => madeAt,
    highestFirst: true,
  },
  {
    key: 'end',
    head: 'Revoke',
    align: 'right',
    cell: (share) =>
      isOpen(share, now) && (
        <Button
          small
          aria-label={`Revoke the link for ${share.label}`}
          disabled={isEnding}
          onClick={() => end(share)}
        >
          Revoke
        </Button>
      ),
  },
];
