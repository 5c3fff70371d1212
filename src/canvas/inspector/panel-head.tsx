import { useId } from 'react';
import { Button } from '../../components/button.tsx';
import { FieldError } from '../../components/cell.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu, type MenuAction } from '../../components/menu.tsx';
import { showToast } from '../../components/toast.tsx';
import { Tooltip } from '../../components/tooltip.tsx';
import { useCommittedText } from '../../components/use-committed-text.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { classNames } from '../../lib/class-names.ts';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { copyParts, pasteParts } from '../../workspace/operations/copy-parts.ts';
import { canLock, isLocked, setLocked, type Standing } from '../../workspace/operations/move-parts.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import type { Operation } from '../../workspace/operations/operation.ts';
import { removeElements } from '../../workspace/operations/remove-parts.ts';
import type { FieldPath } from './field-marks.ts';
import { useInspectorTools } from './inspector-context.ts';
import { refusalSentence, useEditable, useField } from './use-field.ts';

const nameLook = 'text-title text-ink';

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

/** Does an operation and says why when it can't be done. */
export const usePerform = (): ((operation: Operation) => void) => {
  const design = useOpenDesign();
  return (operation) => {
    const done = perform(design, operation);
    if (!done.ok) showToast({ tone: 'failed', text: done.why });
  };
};

/** Kind, name, lock and what else can be done with the whole element. */
export function PanelHead({ of: ref, namePath }: { readonly of: ElementRef; readonly namePath?: FieldPath }) {
  const design = useOpenState((state) => state.document);
  const editable = useEditable();
  return (
    <header className="flex items-start gap-4">
      <div className="min-w-0 flex-1">
        <p className="text-note text-ink-2">{kindOf(design, ref)}</p>
        {namePath !== undefined && editable ? (
          <NameInput path={namePath} />
        ) : (
          <h2 className={classNames(nameLook, 'break-words')}>{nameOf(design, ref)}</h2>
        )}
      </div>
      {editable && <LockButton of={ref} />}
      {editable && <ElementMenu of={ref} />}
    </header>
  );
}

function NameInput({ path }: { readonly path: FieldPath }) {
  const { value, refusal, commit } = useField<string>(path);
  const id = useId();
  const { field, problem } = useCommittedText({
    value: value ?? '',
    validate: (text) =>
      text === '' ? refusalSentence('Name', '', 'it has to be given') : refusal('Name', text, text),
    onCommit: (text) => commit('Name', text),
  });
  return (
    <h2>
      <span className="sr-only">{value}</span>
      <input
        {...field}
        aria-label="Name"
        aria-invalid={problem === undefined ? undefined : true}
        aria-describedby={problem === undefined ? undefined : id}
        className={classNames(
          nameLook,
          '-ml-5 w-full border border-transparent bg-transparent px-4 py-1 text-ellipsis hover:border-rule-2 hover:bg-field focus:bg-field',
        )}
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
        icon={<Icon name={locked ? 'lock' : 'unlock'} size={18} />}
        onClick={() => run(setLocked(design, standing, [ref], !locked))}
      />
    </Tooltip>
  );
}

function ElementMenu({ of: ref }: { readonly of: ElementRef }) {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const standing = useStanding();
  const run = usePerform();
  const { menuOf } = useInspectorTools();
  const now = (): Design => open.store.getState().document;
  const duplicate = (): void => {
    const design = now();
    const parts = copyParts(design, standing(design), [ref]);
    if (parts !== undefined)
      run(
        pasteParts(design, parts, { dx: copyOffsetPx, dy: copyOffsetPx }, undefined, newEntryId, numbering),
      );
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
      groups={menuOf?.(ref) ?? [{ actions }]}
    />
  );
}
