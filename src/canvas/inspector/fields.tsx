import type { CellProps } from '../../components/cell.tsx';
import { ReadCell } from '../../components/cell.tsx';
import { CheckCell, CommitAreaCell, CommitCell, SelectCell } from '../../components/field-cells.tsx';
import type { FieldPath } from './field-marks.ts';
import { refusalSentence, useField } from './use-field.ts';
import { plainText, type Writing } from '../../lib/written-value.ts';

interface FieldProps extends CellProps {
  /** Keys from the document's root. */
  readonly path: FieldPath;
  readonly hint?: string;
}

const unknownWord = 'not stated';

export function Unknown({ word = unknownWord }: { readonly word?: string }) {
  return <span className="font-normal text-ink-3">{word}</span>;
}

function Unit({ children }: { readonly children: string | undefined }) {
  return children === undefined ? null : <span className="shrink-0 text-value text-ink-2">{children}</span>;
}

export interface TextFieldProps<T> extends FieldProps {
  readonly writing?: Writing<T>;
  /** It may not be emptied. */
  readonly required?: boolean;
  readonly emptyWord?: string;
}

/** A value that is typed. An empty cell means unknown. */
export function TextField<T = string>({
  path,
  writing = plainText as unknown as Writing<T>,
  required = false,
  emptyWord = unknownWord,
  hint,
  ...cell
}: TextFieldProps<T>) {
  const field = useField<T>(path);
  const text = field.value === undefined ? '' : writing.write(field.value);
  const { label, place } = cell;
  if (!field.editable)
    return (
      <ReadCell {...cell} marked={field.marked}>
        {field.value === undefined ? (
          <Unknown word={emptyWord} />
        ) : (
          [text, writing.unit].filter((part) => part !== undefined).join(' ')
        )}
      </ReadCell>
    );
  const subject = place === undefined ? label : `${label} at ${place}`;
  return (
    <CommitCell
      {...cell}
      hint={hint}
      value={text}
      marked={field.marked}
      inputMode={writing.inputMode}
      placeholder={emptyWord}
      after={text === '' ? undefined : <Unit>{writing.unit}</Unit>}
      validate={(typed) => {
        if (typed === '') return required ? refusalSentence(subject, '', 'it has to be given') : undefined;
        const read = writing.read(typed);
        return read.ok
          ? field.refusal(subject, typed, read.value)
          : refusalSentence(subject, typed, read.wayOut);
      }}
      onCommit={(typed) => {
        const read = writing.read(typed);
        if (typed === '') field.commit(label, undefined);
        else if (read.ok) field.commit(label, read.value);
      }}
    />
  );
}

/** Several lines of text. */
export function LongTextField({
  path,
  required = false,
  hint,
  ...cell
}: FieldProps & { readonly required?: boolean }) {
  const field = useField<string>(path);
  if (!field.editable)
    return (
      <ReadCell {...cell} marked={field.marked}>
        {field.value === undefined ? (
          <Unknown word="none" />
        ) : (
          <span className="text-base font-normal whitespace-pre-wrap">{field.value}</span>
        )}
      </ReadCell>
    );
  const { label } = cell;
  return (
    <CommitAreaCell
      {...cell}
      hint={hint}
      value={field.value ?? ''}
      marked={field.marked}
      validate={(typed) =>
        typed === ''
          ? required
            ? refusalSentence(label, '', 'it has to be given')
            : undefined
          : field.refusal(label, `of ${typed.length} characters`, typed)
      }
      onCommit={(typed) => field.commit(label, typed === '' ? undefined : typed)}
    />
  );
}

export interface Choice<Value> {
  readonly value: Value;
  readonly label: string;
  readonly disabled?: boolean;
}

export interface SelectFieldProps<Value> extends FieldProps {
  readonly choices: readonly Choice<Value>[];
  /** It may not be made unknown. */
  readonly required?: boolean;
  readonly emptyWord?: string;
  /** Which choice a stored value is, where it isn't the value itself. */
  readonly read?: (stored: unknown) => Value | undefined;
  /** Takes the place of the field's own commit, where a choice changes more than itself. */
  readonly onChoose?: (value: Value | undefined) => void;
  readonly disabled?: boolean;
}

/** One of several values, or unknown. */
export function SelectField<Value extends string | number | boolean>({
  path,
  choices,
  required = false,
  emptyWord = unknownWord,
  read,
  onChoose,
  ...cell
}: SelectFieldProps<Value>) {
  const field = useField<Value>(path);
  const stored = read === undefined ? field.value : read(field.value);
  const choose = (value: Value | undefined): void =>
    onChoose === undefined ? field.commit(cell.label, value) : onChoose(value);
  const current = choices.find(({ value }) => value === stored);
  if (!field.editable)
    return (
      <ReadCell {...cell} marked={field.marked}>
        {current === undefined ? <Unknown word={emptyWord} /> : current.label}
      </ReadCell>
    );
  return (
    <SelectCell
      {...cell}
      value={current === undefined ? '' : String(current.value)}
      marked={field.marked}
      options={choices.map((choice) => ({ ...choice, value: String(choice.value) }))}
      onChange={(text) => choose(choices.find(({ value }) => String(value) === text)?.value)}
      placeholder={required ? undefined : emptyWord}
      onClear={required ? undefined : () => choose(undefined)}
    />
  );
}

export const yesOrNo: readonly Choice<boolean>[] = [
  { value: true, label: 'yes' },
  { value: false, label: 'no' },
];

/** Yes, no, or unknown. */
export function YesNoField({
  words = ['yes', 'no'],
  ...field
}: Omit<SelectFieldProps<boolean>, 'choices'> & { readonly words?: readonly [yes: string, no: string] }) {
  return (
    <SelectField
      {...field}
      choices={[
        { value: true, label: words[0] },
        { value: false, label: words[1] },
      ]}
    />
  );
}

/** A mark that is there or isn't; its absence means no and never unknown. */
export function FlagField({
  path,
  words = ['yes', 'no'],
  ...cell
}: FieldProps & { readonly words?: readonly [on: string, off: string] }) {
  const field = useField<boolean>(path);
  const on = field.value === true;
  if (!field.editable)
    return (
      <ReadCell {...cell} marked={field.marked}>
        {on ? words[0] : words[1]}
      </ReadCell>
    );
  return (
    <CheckCell
      {...cell}
      checked={on}
      words={words}
      marked={field.marked}
      onChange={(checked) => field.commit(cell.label, checked ? true : undefined)}
    />
  );
}
