import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import type { EquipmentProfile } from '../../contract/profiles.ts';
import type { Profile } from '../../engine/model/underlay.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { designPath } from '../../lib/workspace-path.ts';
import { useChangeProfile, useCreateProfile } from '../../workspace/profiles-query.ts';
import { draftOf, emptyDraft, readDraft, sameDraft, type ProfileDraft } from './profile-draft.ts';
import { ProfileForm } from './profile-form.tsx';

export interface ProfileEdit {
  readonly draft: ProfileDraft;
  /** When the profile had last been changed as typing began. */
  readonly basedOn: string | undefined;
}

interface ProfileEditorProps {
  readonly workspaceId: string;
  /** The one to read or change; without it a new one is made. */
  readonly original?: EquipmentProfile;
  /** What a new one begins with. */
  readonly startsFrom?: Profile;
  /** What was typed and not saved yet; kept by the page, so that looking at another profile loses nothing. */
  readonly edit: ProfileEdit | undefined;
  readonly onEdit: (edit: ProfileEdit | undefined) => void;
  readonly editable: boolean;
  readonly canOpenDesigns: boolean;
  readonly onSaved: (profile: EquipmentProfile) => void;
  readonly onCopy: (profile: Profile) => void;
  readonly onCancel: () => void;
}

/** One profile: what it says, who said so, where it is used; saved as a whole. */
export function ProfileEditor({
  workspaceId,
  original,
  startsFrom,
  edit,
  onEdit,
  editable,
  canOpenDesigns,
  onSaved,
  onCopy,
  onCancel,
}: ProfileEditorProps) {
  const before = original === undefined ? emptyDraft : draftOf(original.profile);
  const { draft, basedOn } = edit ?? {
    draft: startsFrom === undefined ? before : draftOf(startsFrom),
    basedOn: original?.changedAt,
  };
  const [tried, setTried] = useState(false);
  const create = useCreateProfile(workspaceId);
  const change = useChangeProfile(workspaceId);
  const { error, isPending } = original === undefined ? create : change;
  const read = readDraft(draft);
  const isArchived = original !== undefined && original.archivedAt !== null;
  const isChanged = !sameDraft(draft, before);
  const refusal = error === null ? undefined : asApiError(error);
  const nameTaken = refusal?.expectedOf('profile.name') === undefined ? undefined : refusal.message;
  const problems: Readonly<Record<string, string>> = {
    ...(tried && !read.ok ? read.problems : {}),
    ...(nameTaken === undefined ? {} : { name: nameTaken }),
  };
  const save = (): void => {
    setTried(true);
    if (!read.ok) return;
    const saved = {
      onSuccess: (profile: EquipmentProfile) => {
        showToast({ tone: 'done', text: `${profile.profile.name} is saved.` });
        onEdit(undefined);
        onSaved(profile);
      },
    };
    if (original === undefined) create.mutate({ profile: read.profile }, saved);
    else change.mutate({ id: original.id, profile: read.profile, basedOn }, saved);
  };
  const archive = (id: string, archived: boolean): void =>
    change.mutate(
      { id, archived },
      {
        onSuccess: ({ profile }) =>
          void showToast({
            tone: 'done',
            text: archived ? `${profile.name} is in the archive.` : `${profile.name} is back.`,
            action: { label: 'Undo', onSelect: () => archive(id, !archived) },
          }),
      },
    );
  return (
    <form
      noValidate
      aria-label={original === undefined ? 'New profile' : original.profile.name}
      className="flex min-w-0 flex-1 flex-col"
      onSubmit={(event) => {
        event.preventDefault();
        save();
      }}
    >
      <header className="flex flex-wrap items-start gap-x-16 gap-y-8 border-b border-ink pb-10">
        <div className="min-w-0 flex-1 max-sm:basis-full">
          <h2 className="text-title">{original === undefined ? 'New profile' : original.profile.name}</h2>
          {original !== undefined && (
            <p className="text-base text-ink-2">
              Changed {dateAndTime(new Date(original.changedAt))}
              {original.changedBy !== null && ` by ${original.changedBy}`}
              {isArchived && '. In the archive: offered nowhere, and kept by the designs that have it'}
            </p>
          )}
        </div>
        {editable && (
          <div className="flex flex-wrap gap-8">
            {original !== undefined && (
              <>
                <Button onClick={() => onCopy(original.profile)}>Copy</Button>
                <Button onClick={() => archive(original.id, !isArchived)}>
                  {isArchived ? 'Restore' : 'Archive'}
                </Button>
              </>
            )}
            {(original === undefined || isChanged) && (
              <Button
                onClick={() => {
                  onEdit(undefined);
                  if (original === undefined) onCancel();
                }}
              >
                {original === undefined ? 'Cancel' : 'Take back'}
              </Button>
            )}
            <Button type="submit" kind="primary" busy={isPending} disabled={!isChanged}>
              Save
            </Button>
          </div>
        )}
      </header>
      {refusal !== undefined && nameTaken === undefined && (
        <ErrorNotice className="mt-14">{refusal.message}</ErrorNotice>
      )}
      {tried && !read.ok && (
        <ErrorNotice className="mt-14">Not saved yet: {Object.values(read.problems).join(' ')}</ErrorNotice>
      )}
      {original !== undefined && <UsedIn original={original} canOpenDesigns={canOpenDesigns} />}
      <div className="pt-14">
        <ProfileForm
          draft={draft}
          problems={problems}
          editable={editable}
          onChange={(key, text) => onEdit({ draft: { ...draft, [key]: text }, basedOn })}
        />
      </div>
    </form>
  );
}

function UsedIn({
  original,
  canOpenDesigns,
}: {
  readonly original: EquipmentProfile;
  readonly canOpenDesigns: boolean;
}) {
  const { usedIn } = original;
  return (
    <section aria-label="Used in" className="border-b border-rule-2 py-12">
      <h3 className="text-section font-semibold">Used in</h3>
      {usedIn.length === 0 ? (
        <p className="mt-2 max-w-560 text-base text-ink-2">
          No design has it yet. Choose it for a gateway on the sheet; the design then keeps a copy, so that
          what was approved stays as it was.
        </p>
      ) : (
        <ul className="mt-4 flex flex-col text-base">
          {usedIn.map(({ designId, title, devices, current }) => (
            <li key={designId} className="flex min-h-26 flex-wrap items-center gap-x-10">
              {canOpenDesigns ? (
                <Link
                  to={designPath(designId)}
                  className="flex min-h-24 items-center font-medium text-blue hover:underline"
                >
                  {title}
                </Link>
              ) : (
                <span className="font-medium">{title}</span>
              )}
              <span className="text-ink-2">{devices === 1 ? '1 device' : `${devices} devices`}</span>
              <span className={current ? 'text-ink-2' : 'font-medium text-degr'}>
                {current ? 'this version' : 'an older version or one changed there'}
              </span>
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}
