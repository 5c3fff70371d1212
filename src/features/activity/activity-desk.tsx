import { keepPreviousData, useInfiniteQuery } from '@tanstack/react-query';
import { Button, buttonClasses } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { activityPageSize } from '../../contract/activity.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { ActivityFilters } from './activity-filters.tsx';
import { activityQuery, csvAddress, isNarrowed, wishFrom } from './activity-query.ts';
import { ActivityTable } from './activity-table.tsx';

const everything = { person: '', action: '', design: '', from: '', to: '' };

/** What was done in a workspace, narrowed by what the address asks for. */
export function ActivityDesk({ workspaceId }: { readonly workspaceId: string }) {
  const { valueOf, change } = useSearchValues();
  const wish = wishFrom(valueOf);
  const query = useInfiniteQuery({ ...activityQuery(workspaceId, wish), placeholderData: keepPreviousData });
  const pages = query.data?.pages ?? [];
  const [first] = pages;
  const activity = pages.flatMap((page) => page.activity);
  const narrowed = isNarrowed(wish);
  const clear = (
    <Button small onClick={() => change(everything)}>
      Show everything
    </Button>
  );
  return (
    <div className="flex min-w-0 flex-col gap-14">
      <ActivityFilters
        wish={wish}
        people={first?.people ?? []}
        designs={first?.designs ?? []}
        onChange={change}
      />
      <div className="flex flex-wrap items-center gap-8">
        <p role="status" className="text-note text-ink-2">
          {first === undefined || activity.length === 0
            ? ''
            : query.hasNextPage
              ? `The newest ${activity.length}; there is more`
              : `${activity.length} ${activity.length === 1 ? 'entry' : 'entries'}`}
        </p>
        {narrowed && clear}
        {activity.length > 0 && (
          <a
            href={csvAddress(workspaceId, wish)}
            download="activity.csv"
            className={`${buttonClasses({ small: true })} ml-auto`}
          >
            Download CSV
          </a>
        )}
      </div>
      {first === undefined || (query.isError && !query.isFetchNextPageError) ? (
        <ReadingState what="The activities" query={query} />
      ) : (
        <ActivityTable
          workspaceId={workspaceId}
          activity={activity}
          empty={
            <EmptyState title={narrowed ? 'Nothing fits' : 'Nothing is on record yet'} className="m-14">
              {narrowed
                ? 'Nothing like this was done in these days. Ask for less, or show everything.'
                : 'Who starts a design, asks for a review, approves, waives, shares or invites is told of here, from the next deed on. Single edits stand in each design’s History.'}
            </EmptyState>
          }
        />
      )}
      {query.isFetchNextPageError && <ReadingState what="Older activities" query={query} />}
      {query.hasNextPage && (
        <div>
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show {activityPageSize} more
          </Button>
        </div>
      )}
    </div>
  );
}
