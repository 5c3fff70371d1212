import { useId } from 'react';
import { Button } from '../../components/button.tsx';
import { FieldError } from '../../components/cell.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu, type MenuAction } from '../../components/menu.tsx';
import { showToast } from '../../components/toast.tsx';
import { Tooltip } from '../../components/tooltip.tsx';
import { useCommittedText } from '../../components/use-committed-text.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { copyParts, pasteParts } from '../../workspace/operations/copy-parts.ts';
import { isLocked, setLocked, type Standing } from '../../workspace/operations/move-parts.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import type { Operation } from '../../workspace/operations/operation.ts';
import { removeElements } from '../../workspace/operations/remove-parts.ts';
import type { FieldPath } from './field-marks.ts';
import { useInspectorTools } from './inspector-context.ts';
import { refusalSentence, useEditable, useField } from './use-field.ts';

// Far enough for a copy to be seen beside its original.
const copyOffsetPx = 24;

const placedByHand = ({ layout }: Design): Standing => ({
  devices: layout.devices ?? {},
  sites: layout.sites ?? {},
  notes: layout.notes ?? {},
});

/** Where things stand: as drawn, or as far as a person placed them. */
export const useStanding = (): ((design: Design) => Standing) => {
  const { standing } = useInspectorTools();
  return standing === undefined ? placedByHand : () => standing;
};

/** Whether an element has a place of its own that can be locked. */
export const canLock = (design: Design, standing: Standing, { collection, id, port }: ElementRef): boolean =>
  port === undefined &&
  (collection === 'transports'
    ? design.layout.transports?.[id] !== undefined
    : (collection === 'devices' || collection === 'sites' || collection === 'notes') &&
      standing[collection][id] !== undefined);

/** Does an operation and says why when it can't be done. */
export const usePerform = (): ((operation: Operation) => void) => {
  const design = useOpenDesign();
  return (operation) => {
    const done = perform(design, operation);
    if (!done.ok) showToast({ tone: 'failed', text: done.why });
  };
};

/** Kind, name, lock and what else can be done with the whole element. */
export function PanelHead({
  of: ref,
  namePath,
  nameRequired = true,
}: {
  readonly of: ElementRef;
  readonly namePath?: FieldPath;
  /** False for what may go without a name of its own. */
  readonly nameRequired?: boolean;
}) {
  const design = useOpenState((state) => state.document);
  const editable = useEditable();
  return (
    <header className="flex items-start gap-4">
      <div className="min-w-0 flex-1">
        <p className="text-note text-ink-2">{kindOf(design, ref)}</p>
        {namePath !== undefined && editable ? (
          <NameInput path={namePath} shown={nameOf(design, ref)} required={nameRequired} />
        ) : (
          <h2 className="text-panel break-words text-ink">{nameOf(design, ref)}</h2>
        )}
      </div>
      {editable && <LockButton of={ref} />}
      {editable && <ElementMenu of={ref} />}
    </header>
  );
}

function NameInput({
  path,
  shown,
  required,
}: {
  readonly path: FieldPath;
  readonly shown: string;
  readonly required: boolean;
}) {
  const { value, refusal, commit } = useField<string>(path);
  const id = useId();
  const { field, problem } = useCommittedText({
    value: value ?? '',
    validate: (text) =>
      text === ''
        ? required
          ? refusalSentence('Name', '', 'it has to be given')
          : undefined
        : refusal('Name', text, text),
    onCommit: (text) => commit('Name', text === '' ? undefined : text),
  });
  return (
    <h2>
      <span className="sr-only">{shown}</span>
      <input
        {...field}
        aria-label="Name"
        aria-invalid={problem === undefined ? undefined : true}
        aria-describedby={problem === undefined ? undefined : id}
        // What an element without a name of its own is called by what it joins.
        placeholder={shown}
        className="-ml-5 w-full border border-transparent bg-transparent px-4 py-1 text-panel text-ellipsis text-ink hover:border-rule-2 hover:bg-field focus:bg-field"
      />
      {problem !== undefined && <FieldError id={id}>{problem}</FieldError>}
    </h2>
  );
}

function LockButton({ of: ref }: { readonly of: ElementRef }) {
  const design = useOpenState((state) => state.document);
  const standing = useStanding()(design);
  const run = usePerform();
  if (!canLock(design, standing, ref)) return null;
  const locked = isLocked(design, ref);
  const words = locked ? 'Free its place' : 'Lock its place';
  return (
    <Tooltip text={words}>
      <Button
        kind="quiet"
        iconOnly
        aria-label={words}
        aria-pressed={locked}
        icon={<Icon name={locked ? 'lock' : 'unlock'} size={18} />}
        onClick={() => run(setLocked(design, standing, [ref], !locked))}
      />
    </Tooltip>
  );
}

function ElementMenu({ of: ref }: { readonly of: ElementRef }) {
  const open = useOpenDesign();
  const standing = useStanding();
  const run = usePerform();
  const now = (): Design => open.store.getState().document;
  const duplicate = (): void => {
    const design = now();
    const parts = copyParts(design, standing(design), [ref]);
    if (parts !== undefined)
      run(pasteParts(design, parts, { dx: copyOffsetPx, dy: copyOffsetPx }, undefined, newEntryId));
  };
  const canCopy =
    ref.port === undefined &&
    (ref.collection === 'devices' || ref.collection === 'sites' || ref.collection === 'notes');
  const actions: readonly MenuAction[] = [
    ...(canCopy ? [{ label: 'Duplicate', onSelect: duplicate }] : []),
    { label: 'Remove', danger: true, onSelect: () => run(removeElements(now(), [ref])) },
  ];
  return (
    <Menu
      align="end"
      trigger={
        <Button
          kind="quiet"
          iconOnly
          aria-label={`More for ${nameOf(now(), ref)}`}
          icon={<Icon name="more" size={18} />}
        />
      }
      groups={[{ actions }]}
    />
  );
}
