import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { ChoiceCell, SelectCell } from '../../components/field-cells.tsx';
import type { Thread } from '../../contract/comments.ts';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { zoneOf } from '../../drawing/routing/sheet-frame.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useSession } from '../../lib/session.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { commentsQuery } from '../../workspace/comments-query.ts';
import { useDesignPlace, useMayHere } from '../../workspace/design-place.tsx';
import { useSuggesting } from '../../workspace/suggesting.tsx';
import {
  filterThreads,
  placeOfPin,
  refOfPin,
  threadFilterFrom,
  type ThreadCircle,
  type ThreadState,
} from './filter-threads.ts';
import { pinWords, type PinWords } from './pin-words.ts';
import type { ReviewTools } from './review-tools.ts';
import { ThreadCard } from './thread-card.tsx';

interface CommentsDeskProps {
  readonly tools: ReviewTools;
  /** Begins a thread about the whole design. */
  readonly onCommentDesign: () => void;
}

const circles: readonly { readonly value: ThreadCircle; readonly label: string }[] = [
  { value: 'mine', label: 'I wrote in' },
  { value: 'mentions', label: 'Mention me' },
  { value: 'suggestions', label: 'Suggest a change' },
];

/** All that is said about the open design: filtered, answered, resolved. */
export function CommentsDesk({ tools, onCommentDesign }: CommentsDeskProps) {
  const { designId } = useDesignPlace();
  const mayComment = useMayHere('comment.write');
  const { findings, document } = useChecks();
  const { settled } = useDrawn();
  const { valueOf, change } = useSearchValues();
  const { begin } = useSuggesting();
  const personId = useSession()?.person?.id;
  const { data, error, refetch } = useQuery(commentsQuery(designId));
  const keys = useMemo(() => new Set(findings.map(({ key }) => key)), [findings]);
  const asked = valueOf('thread');
  const filter = threadFilterFrom(valueOf);

  if (data === undefined)
    return error === null ? (
      <p role="status" className="px-14 py-16 text-base text-ink-2">
        Fetching the comments…
      </p>
    ) : (
      <ErrorNotice
        className="m-14"
        action={
          <Button small onClick={() => void refetch()}>
            Try again
          </Button>
        }
      >
        {asApiError(error).message}
      </ErrorNotice>
    );

  const { threads, members } = data;
  const wordsOf = (thread: Thread): PinWords => pinWords(thread.pin, document, (key) => keys.has(key));
  const zoneOfThread = ({ pin }: Thread): string | undefined => {
    const ref = refOfPin(pin);
    const at = ref === undefined ? undefined : anchorOf(settled, ref, document);
    return at === undefined ? undefined : zoneOf(settled.sheet, at);
  };
  const found = filterThreads(threads, filter, personId);
  // A link to a thread shows it, whatever the filter says.
  const linked = threads.find(({ id }) => id === asked);
  const shown = linked === undefined || found.includes(linked) ? found : [linked, ...found];
  const count = (state: ThreadState): number => filterThreads(threads, { ...filter, state }, personId).length;
  const places = [...new Map(threads.map((thread) => [placeOfPin(thread.pin), thread])).entries()];

  return (
    <div className="flex flex-col gap-12">
      <div className="flex flex-wrap items-start gap-12">
        <CellGrid columns="repeat(auto-fit, minmax(190px, 1fr))" className="min-w-260 flex-1">
          <ChoiceCell
            label="Threads"
            value={filter.state}
            options={[
              { value: 'open', label: `Open ${count('open')}` },
              { value: 'resolved', label: `Resolved ${count('resolved')}` },
              { value: 'all', label: 'All' },
            ]}
            onChange={(state) => change({ threads: state === 'open' ? '' : state, thread: '' })}
          />
          <SelectCell
            label="Whose"
            value={filter.circle}
            options={circles}
            placeholder="Everybody’s"
            onChange={(circle) => change({ whose: circle, thread: '' })}
            onClear={() => change({ whose: '', thread: '' })}
          />
          <SelectCell
            label="About"
            value={filter.on}
            options={places.map(([place, thread]) => {
              const { kind, name } = wordsOf(thread);
              return { value: place, label: place === 'design' ? 'The whole design' : `${kind} ${name}` };
            })}
            placeholder="Everything"
            onChange={(on) => change({ on, thread: '' })}
            onClear={() => change({ on: '', thread: '' })}
          />
        </CellGrid>
        <div className="flex flex-wrap gap-8">
          {begin !== undefined && <Button onClick={begin}>Suggest a change</Button>}
          {mayComment && <Button onClick={onCommentDesign}>Comment on the design…</Button>}
        </div>
      </div>
      {error !== null && <ErrorNotice>{asApiError(error).message}</ErrorNotice>}
      {shown.map((thread) => (
        <ThreadCard
          key={thread.id}
          thread={thread}
          pin={wordsOf(thread)}
          zone={zoneOfThread(thread)}
          members={members}
          mayComment={mayComment}
          asked={thread.id === asked}
          tools={tools}
        />
      ))}
      {asked !== '' && linked === undefined && (
        <p className="text-base text-ink-2">The thread that the link leads to was deleted.</p>
      )}
      {shown.length === 0 && (
        <NoThreads
          any={threads.length > 0}
          mayComment={mayComment}
          onShowAll={() => change({ threads: 'all', whose: '', on: '', thread: '' })}
        />
      )}
    </div>
  );
}

function NoThreads({
  any,
  mayComment,
  onShowAll,
}: {
  readonly any: boolean;
  readonly mayComment: boolean;
  readonly onShowAll: () => void;
}) {
  return any ? (
    <EmptyState title="No thread fits" action={<Button onClick={onShowAll}>Show all threads</Button>}>
      Threads are there, but none that fits all of what is asked.
    </EmptyState>
  ) : (
    <EmptyState title="Nobody has commented yet">
      {mayComment
        ? 'Pick an element on the sheet and choose Comment… in its menu or the inspector; findings have it in their details. Open threads stand on the sheet as slips until they are resolved.'
        : 'What reviewers and architects say about the design stands here, with the changes that they suggest.'}
    </EmptyState>
  );
}
