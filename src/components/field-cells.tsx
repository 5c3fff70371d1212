import type { InputHTMLAttributes, ReactNode, Ref } from 'react';
import { classNames } from '../lib/class-names.ts';
import { CheckBox } from './check-box.tsx';
import { FieldCell, markInks, type FieldCellProps } from './cell.tsx';
import { Icon } from './icon.tsx';
import { SegmentedChoice, type ChoiceOption } from './segmented-choice.tsx';
import { useCommittedText } from './use-committed-text.ts';

// The cell draws the focus; the input itself has no look of its own.
const bareInput =
  'min-w-0 flex-1 border-0 bg-transparent p-0 text-value text-ink outline-none disabled:text-ink-2 file:mr-8 file:font-medium file:text-blue file:underline';

export interface InputCellProps
  extends FieldCellProps, Omit<InputHTMLAttributes<HTMLInputElement>, 'children' | 'className'> {
  readonly ref?: Ref<HTMLInputElement>;
}

/** A cell to type in. Takes everything that an input takes, so that form libraries can register it. */
export function InputCell({
  label,
  place,
  subject,
  span,
  alignRight,
  className,
  error,
  marked,
  hint,
  after,
  ref,
  disabled,
  ...input
}: InputCellProps) {
  return (
    <FieldCell
      {...{ label, place, subject, span, alignRight, className, error, marked, hint, after, disabled }}
    >
      {({ id, describedBy }) => (
        <input
          {...input}
          id={id}
          ref={ref}
          disabled={disabled}
          aria-invalid={error ? true : undefined}
          aria-describedby={describedBy}
          className={classNames(
            bareInput,
            alignRight && 'text-right',
            error ? 'font-semibold text-red' : marked && markInks[marked.severity],
          )}
        />
      )}
    </FieldCell>
  );
}

export interface CommitCellProps extends FieldCellProps {
  readonly value: string;
  /** Called once per change, when the reader leaves the cell or presses Enter; never with the value it has. */
  readonly onCommit: (value: string) => void;
  /** What is wrong with a text, so that it is not committed. */
  readonly validate?: (text: string) => string | undefined;
  readonly disabled?: boolean;
  readonly placeholder?: string;
  readonly inputMode?: 'text' | 'numeric' | 'decimal' | 'email';
  readonly maxLength?: number;
}

/** A cell whose text counts when it is left or Enter is pressed; Escape brings the old text back. */
export function CommitCell({ value, onCommit, validate, error, ...cell }: CommitCellProps) {
  const { field, problem } = useCommittedText({ value, onCommit, validate });
  return <InputCell {...cell} {...field} error={problem ?? error} />;
}

export interface CommitAreaCellProps extends Omit<CommitCellProps, 'inputMode' | 'alignRight'> {
  readonly rows?: number;
}

/** A cell for several lines; Enter starts a new one, and the text counts when the cell is left. */
export function CommitAreaCell({
  value,
  onCommit,
  validate,
  error,
  disabled,
  placeholder,
  maxLength,
  rows = 3,
  ...cell
}: CommitAreaCellProps) {
  const { field, problem } = useCommittedText({ value, onCommit, validate, multiline: true });
  const shown = problem ?? error;
  return (
    <FieldCell {...cell} error={shown} disabled={disabled}>
      {({ id, describedBy }) => (
        <textarea
          {...field}
          {...{ id, disabled, placeholder, maxLength, rows }}
          aria-invalid={shown ? true : undefined}
          aria-describedby={describedBy}
          className={classNames(bareInput, 'resize-y text-base font-normal', shown && 'text-red')}
        />
      )}
    </FieldCell>
  );
}

export interface NumberCellProps extends Omit<
  CommitCellProps,
  'value' | 'onCommit' | 'validate' | 'inputMode'
> {
  /** Absent means unknown; an empty cell commits it. */
  readonly value: number | undefined;
  readonly onCommit: (value: number | undefined) => void;
  readonly min: number;
  readonly max: number;
  /** A value must be given. */
  readonly required?: boolean;
}

/** A cell for a whole number between two bounds. */
export function NumberCell({ value, onCommit, min, max, required = false, label, ...cell }: NumberCellProps) {
  const wayOut = `Type a whole number from ${min} to ${max}.`;
  return (
    <CommitCell
      {...cell}
      label={label}
      inputMode="numeric"
      value={value === undefined ? '' : String(value)}
      validate={(text) => {
        if (text === '') return required ? `${label} is empty. ${wayOut}` : undefined;
        if (!/^\d+$/.test(text)) return `${label} ${text} is not a whole number. ${wayOut}`;
        return Number(text) < min || Number(text) > max
          ? `${label} ${text} is out of range. ${wayOut}`
          : undefined;
      }}
      onCommit={(text) => onCommit(text === '' ? undefined : Number(text))}
    />
  );
}

export interface SelectCellProps<Value extends string> extends FieldCellProps {
  readonly value: Value | '';
  readonly options: readonly ChoiceOption<Value>[];
  readonly onChange: (value: Value) => void;
  /** Shown while nothing is chosen; with `onClear` it can be chosen again. */
  readonly placeholder?: string;
  readonly onClear?: () => void;
  readonly disabled?: boolean;
}

/** A cell to choose one of several in. */
export function SelectCell<Value extends string>({
  value,
  options,
  onChange,
  placeholder,
  onClear,
  disabled,
  ...cell
}: SelectCellProps<Value>) {
  return (
    <FieldCell {...cell} disabled={disabled} after={<Icon name="chevron-down" size={14} />}>
      {({ id, describedBy }) => (
        <select
          id={id}
          value={value}
          disabled={disabled}
          aria-invalid={cell.error ? true : undefined}
          aria-describedby={describedBy}
          onChange={(event) => {
            const chosen = options.find((option) => option.value === event.target.value);
            if (chosen === undefined) onClear?.();
            else onChange(chosen.value);
          }}
          className={classNames(
            bareInput,
            // As wide as the sign after it, too, which then opens it.
            '-mr-22 appearance-none pr-22 text-ellipsis [&_option]:bg-field [&_option]:text-ink',
            cell.alignRight && '[text-align-last:right]',
            cell.marked ? markInks[cell.marked.severity] : value === '' && 'text-ink-3',
          )}
        >
          {placeholder !== undefined && (
            <option value="" disabled={onClear === undefined}>
              {placeholder}
            </option>
          )}
          {options.map((option) => (
            <option key={option.value} value={option.value} disabled={option.disabled}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </FieldCell>
  );
}

export interface CheckCellProps extends FieldCellProps {
  readonly checked: boolean;
  readonly onChange: (checked: boolean) => void;
  /** What a tick says, such as 'set'; and no tick, such as 'not set'. */
  readonly words?: readonly [on: ReactNode, off: ReactNode];
  readonly disabled?: boolean;
}

/** A cell that is either ticked or not. */
export function CheckCell({ checked, onChange, words = ['yes', 'no'], disabled, ...cell }: CheckCellProps) {
  return (
    <FieldCell {...cell} disabled={disabled}>
      {({ id, describedBy }) => (
        <>
          <CheckBox
            id={id}
            bare
            checked={checked}
            disabled={disabled}
            aria-describedby={describedBy}
            onChange={(event) => onChange(event.target.checked)}
          />
          <span aria-hidden="true" className="text-value text-ink">
            {checked ? words[0] : words[1]}
          </span>
        </>
      )}
    </FieldCell>
  );
}

export interface ChoiceCellProps<Value extends string> extends FieldCellProps {
  readonly value: Value | undefined;
  readonly options: readonly ChoiceOption<Value>[];
  readonly onChange: (value: Value) => void;
  readonly disabled?: boolean;
}

/** A cell with all its choices side by side. */
export function ChoiceCell<Value extends string>({
  value,
  options,
  onChange,
  disabled,
  ...cell
}: ChoiceCellProps<Value>) {
  return (
    <FieldCell {...cell} group disabled={disabled}>
      {() => (
        <SegmentedChoice
          label={cell.label}
          small
          stretch
          value={value}
          options={options}
          onChange={onChange}
          disabled={disabled}
        />
      )}
    </FieldCell>
  );
}
