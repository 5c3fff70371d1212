import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useParams } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { CheckBox } from '../components/check-box.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { SearchField } from '../components/search-field.tsx';
import type { Profile } from '../engine/model/underlay.ts';
import { MainBar } from '../features/account/main-bar.tsx';
import { ProfileEditor, type ProfileEdit } from '../features/profiles/profile-editor.tsx';
import { ProfilesTable } from '../features/profiles/profiles-table.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { rememberWorkspace } from '../lib/workspace-path.ts';
import { profilesQuery } from '../workspace/profiles-query.ts';
import { NotFoundPage } from './not-found-page.tsx';

/** /workspaces/:workspaceId/profiles?profile=…&q=…&archived=1: what classes of equipment can do, as the team measured it. */
export function ProfilesPage() {
  usePageTitle('Equipment');
  const { workspaceId = '' } = useParams();
  const membership = useMembership(workspaceId);
  const { valueOf, change } = useSearchValues();
  /** The profile that is being made, and what it begins with. */
  const [fresh, setFresh] = useState<{ readonly key: string; readonly startsFrom?: Profile }>();
  const [edits, setEdits] = useState<Readonly<Record<string, ProfileEdit | undefined>>>({});
  const { data, error, refetch, isFetching } = useQuery({
    ...profilesQuery(workspaceId),
    enabled: membership !== undefined,
  });
  useEffect(() => {
    if (membership !== undefined) rememberWorkspace(workspaceId);
  }, [membership, workspaceId]);
  if (membership === undefined) return <NotFoundPage />;

  const editable = may(membership, 'profile.edit');
  const words = valueOf('q').toLowerCase();
  const withArchived = valueOf('archived') === '1';
  const profiles = data ?? [];
  const shown = profiles.filter(
    ({ profile, archivedAt }) =>
      (withArchived || archivedAt === null) &&
      `${profile.name} ${profile.basis ?? ''}`.toLowerCase().includes(words),
  );
  const asked = valueOf('profile');
  const selected = fresh === undefined ? (profiles.find(({ id }) => id === asked) ?? shown[0]) : undefined;
  const begin = (): void => setFresh({ key: 'new' });
  const beginFrom = (startsFrom: Profile): void =>
    setFresh({
      key: `copy of ${startsFrom.name}`,
      startsFrom: { ...startsFrom, name: `${startsFrom.name} (copy)`.slice(0, 80) },
    });
  const select = (id: string): void => {
    setFresh(undefined);
    change({ profile: id });
  };
  const editing = (key: string) => ({
    edit: edits[key],
    onEdit: (edit: ProfileEdit | undefined) => setEdits((all) => ({ ...all, [key]: edit })),
  });
  const common = {
    workspaceId,
    editable,
    canOpenDesigns: may(membership, 'design.read'),
    onCopy: beginFrom,
    onCancel: () => setFresh(undefined),
    onSaved: ({ id }: { readonly id: string }) => select(id),
  };
  return (
    <>
      <MainBar workspaceId={workspaceId} />
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 py-12">
          <h1 className="text-page font-semibold">Equipment</h1>
          <SearchField
            label="Profile or basis"
            value={valueOf('q')}
            onChange={(q) => change({ q })}
            className="w-240 max-sm:w-full"
          />
          <CheckBox
            checked={withArchived}
            onChange={(event) => change({ archived: event.target.checked ? '1' : '' })}
          >
            Show archived
          </CheckBox>
          {editable && (
            <Button kind="primary" className="ml-auto max-sm:ml-0" onClick={begin}>
              New profile
            </Button>
          )}
        </div>
        <p className="mb-14 max-w-720 text-base text-ink-2">
          A profile says what a class of gateway can do, as you measured it. Load, frame trace and checks hold
          designs against it. What is not stated counts as unknown, never as unlimited.
        </p>
        {error !== null && (
          <ErrorNotice
            className="mb-16"
            action={
              <Button small busy={isFetching} onClick={() => void refetch()}>
                Try again
              </Button>
            }
          >
            The profiles could not be read. {error.message}
          </ErrorNotice>
        )}
        {data === undefined && error === null && (
          <p role="status" className="border-t border-ink py-16 text-ink-2">
            Reading the profiles…
          </p>
        )}
        {data !== undefined && profiles.length === 0 && fresh === undefined && (
          <EmptyState
            title="No equipment is measured yet"
            action={
              editable && (
                <Button kind="primary" onClick={begin}>
                  New profile
                </Button>
              )
            }
          >
            Put a gateway on the bench, send one flow and many through an encrypted tunnel, and write down
            what comes out. The next design then knows its limits before anybody orders a line.
          </EmptyState>
        )}
        {(profiles.length > 0 || fresh !== undefined) && (
          <div className="grid grid-cols-[minmax(300px,420px)_minmax(0,1fr)] items-start gap-28 max-lg:grid-cols-1">
            <div className="lg:sticky lg:top-0">
              {shown.length > 0 || fresh !== undefined ? (
                <ProfilesTable profiles={shown} selectedId={selected?.id} onSelect={select} />
              ) : (
                <EmptyState
                  title="No profile fits"
                  action={<Button onClick={() => change({ q: '', archived: '1' })}>Show all</Button>}
                >
                  None has these words in its name or its basis.
                </EmptyState>
              )}
            </div>
            {fresh !== undefined && (
              <ProfileEditor
                key={fresh.key}
                {...common}
                {...editing(fresh.key)}
                editable
                {...(fresh.startsFrom === undefined ? {} : { startsFrom: fresh.startsFrom })}
              />
            )}
            {selected !== undefined && (
              <ProfileEditor key={selected.id} original={selected} {...common} {...editing(selected.id)} />
            )}
          </div>
        )}
      </main>
    </>
  );
}
