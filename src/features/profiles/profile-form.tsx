import { useState, type ReactNode } from 'react';
import { CellGrid, FieldCell, ReadCell } from '../../components/cell.tsx';
import { InputCell, SelectCell } from '../../components/field-cells.tsx';
import { Icon } from '../../components/icon.tsx';
import { fieldKey, profileSections, type FieldSection, type ProfileField } from './profile-fields.ts';
import type { ProfileDraft } from './profile-draft.ts';

interface ProfileFormProps {
  readonly draft: ProfileDraft;
  /** By field, as sentences. */
  readonly problems: Readonly<Record<string, string>>;
  readonly editable: boolean;
  readonly onChange: (key: string, text: string) => void;
}

/** Every field of a profile with what it means beside it. */
export function ProfileForm({ draft, problems, editable, onChange }: ProfileFormProps) {
  return (
    <div className="flex flex-col gap-20">
      {profileSections.map((section) => (
        <FormSection key={section.title} section={section} opened={opensAtFirst(section, draft)}>
          {section.fields.map((field) => (
            <div
              key={fieldKey(field)}
              className="grid grid-cols-[minmax(0,300px)_minmax(0,1fr)] items-start gap-x-20 gap-y-6 border-t border-rule-2 py-8 max-sm:grid-cols-1"
            >
              <Field
                field={field}
                text={draft[fieldKey(field)] ?? ''}
                problem={problems[fieldKey(field)]}
                editable={editable}
                onChange={(text) => onChange(fieldKey(field), text)}
              />
              <p className="max-w-560 pt-4 text-base text-ink-2">{field.about}</p>
            </div>
          ))}
        </FormSection>
      ))}
    </div>
  );
}

// Sixteen addresses that few profiles say anything of stay folded until one does.
const foldedFrom = 10;
const opensAtFirst = ({ fields }: FieldSection, draft: ProfileDraft): boolean =>
  fields.length < foldedFrom || fields.some((field) => (draft[fieldKey(field)] ?? '') !== '');

function FormSection({
  section,
  opened,
  children,
}: {
  readonly section: FieldSection;
  readonly opened: boolean;
  readonly children: ReactNode;
}) {
  const [open, setOpen] = useState(opened);
  return (
    <section aria-label={section.title}>
      <h3>
        <button
          type="button"
          aria-expanded={open}
          onClick={() => setOpen(!open)}
          className="-ml-3 flex min-h-30 w-full items-center gap-4 text-left text-section font-semibold"
        >
          <Icon name={open ? 'chevron-down' : 'chevron-right'} size={14} />
          {section.title}
        </button>
      </h3>
      {open && children}
    </section>
  );
}

interface FieldProps {
  readonly field: ProfileField;
  readonly text: string;
  readonly problem: string | undefined;
  readonly editable: boolean;
  readonly onChange: (text: string) => void;
}

const notStated = 'not stated';

function Field({ field, text, problem, editable, onChange }: FieldProps) {
  const { label } = field;
  if (!editable) {
    const shown =
      field.kind === 'chosen' ? field.choices.find(({ value }) => String(value) === text)?.label : text;
    const unit = field.kind === 'typed' && text !== '' ? field.unit : undefined;
    return (
      <CellGrid>
        <ReadCell label={label}>
          <span className="whitespace-pre-line">
            {shown === undefined || shown === '' ? (
              <span className="font-normal text-ink-3">{notStated}</span>
            ) : (
              [shown, unit].filter((part) => part !== undefined).join(' ')
            )}
          </span>
        </ReadCell>
      </CellGrid>
    );
  }
  if (field.kind === 'chosen')
    return (
      <CellGrid>
        <SelectCell
          label={label}
          value={text}
          options={field.choices.map(({ value, label: words }) => ({ value: String(value), label: words }))}
          placeholder={notStated}
          error={problem}
          onChange={onChange}
          onClear={() => onChange('')}
        />
      </CellGrid>
    );
  if (field.long)
    return (
      <CellGrid>
        <FieldCell label={label} error={problem}>
          {({ id, describedBy }) => (
            <textarea
              id={id}
              rows={3}
              value={text}
              placeholder={notStated}
              aria-invalid={problem !== undefined || undefined}
              aria-describedby={describedBy}
              onChange={(event) => onChange(event.target.value)}
              className="min-w-0 flex-1 resize-y border-0 bg-transparent p-0 text-base text-ink outline-none"
            />
          )}
        </FieldCell>
      </CellGrid>
    );
  const { unit, inputMode } = field;
  return (
    <CellGrid>
      <InputCell
        label={label}
        value={text}
        placeholder={notStated}
        inputMode={inputMode}
        error={problem}
        after={
          text === '' || unit === undefined ? undefined : (
            <span className="shrink-0 text-value text-ink-2">{unit}</span>
          )
        }
        onChange={(event) => onChange(event.target.value)}
      />
    </CellGrid>
  );
}
