import { useQuery } from '@tanstack/react-query';
import { Suspense, useEffect, useMemo } from 'react';
import { Outlet } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { showToast } from '../components/toast.tsx';
import type { OpenDesign as OpenDesignAnswer } from '../contract/designs.ts';
import type { Design } from '../engine/model/design.ts';
import { parseDesign } from '../engine/model/parse-design.ts';
import { DesignBar } from '../features/design-bar/design-bar.tsx';
import { useTravelKeys } from '../features/design-bar/use-travel-keys.ts';
import { PresentPeople } from '../features/presence/present-people.tsx';
import { toldWords } from '../features/presence/told-words.ts';
import { SuggestingBar } from '../features/review/suggesting-bar.tsx';
import { ReleaseMenu } from '../features/revisions/release-menu.tsx';
import { StateBar } from '../features/revisions/state-bar.tsx';
import { useRelease } from '../features/revisions/use-release.tsx';
import { StretchDialogs } from '../features/stretch/stretch-dialogs.tsx';
import { asApiError } from '../lib/api-error.ts';
import { DesignPlaceProvider } from '../workspace/design-place.tsx';
import { designServer } from '../workspace/design-server.ts';
import { browserEditStorage } from '../workspace/edit-storage.ts';
import { useLiveDesign } from '../workspace/live/use-live-design.ts';
import { openDesign, type OpenDesign } from '../workspace/open-design.ts';
import { openDesignQuery } from '../workspace/open-design-query.ts';
import { OpenDesignProvider, useOpenDesign } from '../workspace/open-design-context.tsx';
import { StoredChecks } from '../workspace/stored-checks.tsx';
import { SuggestingProvider } from '../workspace/suggesting.tsx';
import { WorkspaceProfilesProvider } from '../workspace/workspace-profiles.tsx';
import { FindAnywhere } from './find-anywhere.tsx';

const phone = '(max-width: 767px)';

/** Opens one design for the pages on it: each shows a side of the same open document, so edits and undo go across. */
export function DesignDesk({ designId }: { readonly designId: string }) {
  const answer = useQuery(openDesignQuery(designId));
  if (answer.error !== null)
    return <CannotOpen message={asApiError(answer.error).message} onRetry={() => void answer.refetch()} />;
  if (answer.data === undefined) return <Opening />;
  return <ReadDesign answer={answer.data} />;
}

export function Opening() {
  return (
    <main
      id="main"
      tabIndex={-1}
      aria-busy="true"
      className="flex min-h-0 flex-1 items-center justify-center bg-desk outline-none"
    >
      <p role="status" className="text-base text-ink-2">
        Opening the design…
      </p>
    </main>
  );
}

export function CannotOpen({ message, onRetry }: { readonly message: string; readonly onRetry: () => void }) {
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-0 flex-1 items-start justify-center bg-desk p-28 outline-none"
    >
      <ErrorNotice
        action={
          <Button small onClick={onRetry}>
            Try again
          </Button>
        }
      >
        {message}
      </ErrorNotice>
    </main>
  );
}

function ReadDesign({ answer }: { readonly answer: OpenDesignAnswer }) {
  const parsed = useMemo(() => parseDesign(answer.document), [answer.document]);
  if (!parsed.ok)
    return (
      <CannotOpen
        message={`This design can't be read: ${parsed.problems[0]!.path}, ${parsed.problems[0]!.expected}.`}
        onRetry={() => location.reload()}
      />
    );
  return <Desk answer={answer} document={parsed.value} />;
}

function Desk({ answer, document }: { readonly answer: OpenDesignAnswer; readonly document: Design }) {
  const { id } = answer.summary;
  const { workspaceId, actions } = answer;
  const place = useMemo(() => ({ designId: id, workspaceId, actions }), [id, workspaceId, actions]);
  const open = (): OpenDesign =>
    openDesign({
      document,
      sequence: answer.sequence,
      editable: isEditable(answer),
      server: designServer(id),
      storage: browserEditStorage(localStorage, id, Date.now),
      newEditId: () => crypto.randomUUID(),
      now: Date.now,
      tell: (told) => {
        const text = toldWords(told);
        if (text !== undefined) showToast({ tone: 'other', text });
      },
    });
  return (
    <DesignPlaceProvider place={place}>
      <OpenDesignProvider open={open}>
        <Live designId={id} />
        <FollowAnswer answer={answer} />
        <SuggestingProvider>
          <StoredChecks>
            <ReleasedBars answer={answer} />
            <TravelKeys />
            <FindAnywhere />
            <SuggestingBar />
            <WorkspaceProfilesProvider>
              <Suspense fallback={<Opening />}>
                <Outlet />
              </Suspense>
            </WorkspaceProfilesProvider>
            <StretchDialogs />
          </StoredChecks>
        </SuggestingProvider>
      </OpenDesignProvider>
    </DesignPlaceProvider>
  );
}

// A phone shows the sheet; to draw on it takes a larger screen.
const isEditable = ({ actions }: OpenDesignAnswer): boolean =>
  actions.includes('design.edit') && !window.matchMedia(phone).matches;

/** The state of a design decides who may edit it: the open design follows what the server says of it. */
function FollowAnswer({ answer }: { readonly answer: OpenDesignAnswer }) {
  const open = useOpenDesign();
  useEffect(() => {
    open.setEditable(isEditable(answer));
    if (open.store.getState().sequence < answer.sequence) void open.catchUp();
  }, [open, answer]);
  return null;
}

function ReleasedBars({
  answer: { summary, engagementName, workspaceId },
}: {
  readonly answer: OpenDesignAnswer;
}) {
  const release = useRelease(summary);
  return (
    <>
      <DesignBar
        engagementName={engagementName}
        workspaceId={workspaceId}
        summary={summary}
        people={<PresentPeople designId={summary.id} />}
        release={summary.state === 'draft' && <ReleaseMenu commands={release.commands} />}
      />
      <StateBar summary={summary} release={release} />
      {release.dialog}
    </>
  );
}

function Live({ designId }: { readonly designId: string }) {
  useLiveDesign(designId);
  return null;
}

function TravelKeys() {
  useTravelKeys();
  return null;
}
