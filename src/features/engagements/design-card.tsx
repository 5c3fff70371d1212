import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu, type MenuAction } from '../../components/menu.tsx';
import { SeverityCounts } from '../../components/severity-mark.tsx';
import { Stamp } from '../../components/stamp.tsx';
import { deletedForDays, type DesignSummary } from '../../contract/designs.ts';
import { classNames } from '../../lib/class-names.ts';
import { dateAndTime, relativeTime } from '../../lib/format-time.ts';
import { useTheme } from '../../lib/theme.ts';
import { useNow } from '../../lib/use-now.ts';
import { designPath, revisionPath } from '../../lib/workspace-path.ts';

interface DesignCardProps {
  readonly design: DesignSummary;
  /** The reader may open it; without, the card tells what there is and leads nowhere. */
  readonly canOpen: boolean;
  /** What the reader may do with it, in a menu. */
  readonly actions: readonly MenuAction[];
}

export function DesignCard({ design, canOpen, actions }: DesignCardProps) {
  const now = useNow();
  const changed = new Date(design.changedAt);
  const archived = design.archivedAt !== null;
  const { issued } = design;
  // Who reads no drafts opens what is to be built from.
  const to = canOpen
    ? designPath(design.id)
    : issued === null
      ? undefined
      : revisionPath(design.id, issued.id);
  const number = [design.identification, design.revision].filter((part) => part !== null).join(', ');
  return (
    <article
      className={classNames(
        'relative flex w-200 flex-col border border-rule-strong bg-paper max-sm:w-full',
        to !== undefined &&
          'hover:outline-2 hover:outline-offset-2 hover:outline-blue has-[a:focus-visible]:outline-2 has-[a:focus-visible]:outline-offset-2 has-[a:focus-visible]:outline-blue',
      )}
    >
      <Thumbnail design={design} canOpen={canOpen} />
      <div className="flex flex-1 flex-col border-t border-rule-2 bg-field px-9 pt-7 pb-6">
        <div className="flex items-start gap-2">
          <h3 className="line-clamp-2 min-w-0 flex-1 text-value font-semibold" title={design.title}>
            {to !== undefined ? (
              // The whole card takes a press for its title's link.
              <Link to={to} className="outline-none after:absolute after:inset-0">
                {design.title}
              </Link>
            ) : (
              design.title
            )}
          </h3>
          {actions.length > 0 && (
            <span className="relative z-1 -mt-3 -mr-6">
              <Menu
                align="end"
                groups={[{ actions }]}
                trigger={
                  <Button
                    kind="quiet"
                    small
                    iconOnly
                    aria-label={`What to do with ${design.title}`}
                    icon={<Icon name="more" />}
                  />
                }
              />
            </span>
          )}
        </div>
        <div className="mt-auto flex flex-wrap items-baseline justify-between gap-x-8 pt-2 text-note">
          <span className="text-ink">{number === '' ? 'No number yet' : number}</span>
          <time
            dateTime={design.changedAt}
            title={`Changed ${dateAndTime(changed)}${design.changedBy === null ? '' : ` by ${design.changedBy}`}`}
            className="whitespace-nowrap text-ink-2"
          >
            {relativeTime(changed, now)}
          </time>
        </div>
      </div>
      <div className="flex min-h-31 flex-wrap items-center justify-between gap-x-8 gap-y-4 border-t border-rule-2 bg-field px-9 py-5 text-base">
        {archived ? (
          <span className="text-note text-ink-2">
            {design.deletedAt === null ? 'Archived' : `Deleted, gone ${lastDayOf(design.deletedAt)}`}
          </span>
        ) : (
          <span className="flex flex-wrap items-center gap-6">
            <Stamp state={design.state} />
            {issued !== null && issued.state !== design.state && (
              <Link
                to={revisionPath(design.id, issued.id)}
                className="relative z-1 text-note text-ink underline hover:no-underline"
              >
                <span className="sr-only">Revision </span>
                {issued.label} {issued.state}
              </Link>
            )}
          </span>
        )}
        <SeverityCounts counts={design.counts} />
      </div>
    </article>
  );
}

const dayMs = 24 * 60 * 60 * 1000;
const shortDay = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short' });
const lastDayOf = (deletedAt: string): string =>
  shortDay.format(new Date(new Date(deletedAt).getTime() + deletedForDays * dayMs));

/** The sheet from far off. The address names the version, so the browser may keep each picture for good. */
function Thumbnail({ design, canOpen }: { readonly design: DesignSummary; readonly canOpen: boolean }) {
  const theme = useTheme();
  const address = `/api/designs/${design.id}/thumbnail?v=${design.sequence}&open=${design.counts.blocking}&theme=${theme}`;
  const [failedAddress, setFailedAddress] = useState<string>();
  return (
    <div className="flex aspect-[212/150] items-center justify-center overflow-hidden">
      {canOpen && failedAddress !== address ? (
        <img
          src={address}
          alt=""
          loading="lazy"
          width={212}
          height={150}
          className="size-full object-cover"
          onError={() => setFailedAddress(address)}
        />
      ) : (
        <p className="px-14 text-center text-note text-ink-3">
          {canOpen
            ? 'Its picture cannot be shown just now'
            : design.issued === null
              ? 'Opens to you once it is approved'
              : `Revision ${design.issued.label} is ${design.issued.state}: open it to build from it`}
        </p>
      )}
    </div>
  );
}
