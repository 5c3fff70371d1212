import { Button } from '../../components/button.tsx';
import { ReadCell } from '../../components/cell.tsx';
import { SelectCell } from '../../components/field-cells.tsx';
import { copyIdOf, profileIdOf } from '../../contract/profiles.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { giveProfile, isCopyOlder, takeNewerProfile } from '../../workspace/operations/take-profile.ts';
import { useWorkspaceProfiles } from '../../workspace/workspace-profiles.tsx';
import { Unknown } from './fields.tsx';
import { usePerform } from './panel-head.tsx';
import { useEditable, useField } from './use-field.ts';

/** The profile of a gateway: one that the design has, or one of the workspace, of which the design then takes a copy. */
export function ProfileCell({ device }: { readonly device: string }) {
  const held = useOpenState((state) => state.document.profiles);
  const design = useOpenState((state) => state.document);
  const field = useField<string>(['devices', device, 'profile']);
  const originals = useWorkspaceProfiles();
  const run = usePerform();
  const offered = originals.filter(
    ({ id, archivedAt }) => archivedAt === null && !Object.hasOwn(held, copyIdOf(id)),
  );
  if (!field.editable)
    return (
      <ReadCell label="Equipment profile" span={2} marked={field.marked}>
        {held[field.value ?? '']?.name ?? <Unknown />}
      </ReadCell>
    );
  return (
    <SelectCell
      label="Equipment profile"
      span={2}
      value={field.value ?? ''}
      marked={field.marked}
      placeholder="not stated"
      options={[
        ...Object.entries(held).map(([value, { name }]) => ({ value, label: name })),
        ...offered.map(({ id, profile }) => ({
          value: copyIdOf(id),
          label: `${profile.name}, from Equipment`,
        })),
      ]}
      onChange={(copyId) => {
        const original = offered.find(({ id }) => id === profileIdOf(copyId));
        if (original === undefined) field.commit('Equipment profile', copyId);
        else run(giveProfile(design, device, original));
      }}
      onClear={() => field.commit('Equipment profile', undefined)}
    />
  );
}

/** Says where the workspace's profile has moved on from the design's copy, with a way to follow it. */
export function NewerProfile({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const editable = useEditable();
  const run = usePerform();
  const original = useWorkspaceProfiles().find((each) => each.id === profileIdOf(id));
  if (original === undefined || !isCopyOlder(design, original)) return null;
  return (
    <div className="flex flex-col items-start gap-6 border border-l-5 border-blue bg-field px-9 py-8 text-base">
      <p>
        The workspace’s profile says something else than this copy: it was measured anew since, or the copy
        was changed here.
      </p>
      {editable && (
        <Button small onClick={() => run(takeNewerProfile(design, original))}>
          Take what it says now
        </Button>
      )}
    </div>
  );
}
