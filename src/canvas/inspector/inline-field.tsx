import { useId } from 'react';
import { FieldError, markInks } from '../../components/cell.tsx';
import { useCommittedText } from '../../components/use-committed-text.ts';
import { classNames } from '../../lib/class-names.ts';
import type { FieldPath } from './field-marks.ts';
import { Unknown } from './fields.tsx';
import { refusalSentence, useField } from './use-field.ts';
import { plainText, type Writing } from '../../lib/written-value.ts';

interface InlineFieldProps<T> {
  /** What the value is, and of what: a table's cell has no label of its own to look at. */
  readonly label: string;
  /** Keys from the document's root. */
  readonly path: FieldPath;
  readonly writing?: Writing<T>;
  /** It may not be emptied. */
  readonly required?: boolean;
  readonly alignRight?: boolean;
  readonly emptyWord?: string;
}

const markOutlines = {
  blocking: 'outline-red',
  degrading: 'outline-degr',
  advisory: 'outline-advi',
} as const;

/** A value of the open design typed straight into a row of a table. Its frame shows only when it is gone to. */
export function InlineField<T = string>({
  label,
  path,
  writing = plainText as unknown as Writing<T>,
  required = false,
  alignRight = false,
  emptyWord = 'not stated',
}: InlineFieldProps<T>) {
  const id = useId();
  const field = useField<T>(path);
  const text = field.value === undefined ? '' : writing.write(field.value);
  const { problem, field: input } = useCommittedText({
    value: text,
    validate: (typed) => {
      if (typed === '') return required ? refusalSentence(label, '', 'it has to be given') : undefined;
      const read = writing.read(typed);
      return read.ok ? field.refusal(label, typed, read.value) : refusalSentence(label, typed, read.wayOut);
    },
    onCommit: (typed) => {
      const read = writing.read(typed);
      if (typed === '') field.commit(label, undefined);
      else if (read.ok) field.commit(label, read.value);
    },
  });
  const ink = field.marked === undefined ? 'text-ink' : markInks[field.marked.severity];
  if (!field.editable)
    return (
      <span title={field.marked?.sentence} className={ink}>
        {text === '' ? <Unknown word={emptyWord} /> : text}
        {field.marked !== undefined && <span className="sr-only">. {field.marked.sentence}</span>}
      </span>
    );
  return (
    <span className="block min-w-0">
      <input
        {...input}
        id={id}
        // A press on it goes to the value, not to the row.
        onClick={(event) => event.stopPropagation()}
        aria-label={label}
        title={field.marked?.sentence}
        placeholder={emptyWord}
        inputMode={writing.inputMode}
        aria-invalid={problem === undefined ? undefined : true}
        aria-describedby={
          problem !== undefined ? `${id}-problem` : field.marked !== undefined ? `${id}-mark` : undefined
        }
        className={classNames(
          '-mx-7 w-[calc(100%+14px)] min-w-0 border border-transparent bg-transparent px-6 py-2 outline-offset-[-2px] placeholder:text-ink-3 hover:border-rule-strong hover:bg-field focus:border-rule-strong focus:bg-field',
          alignRight && 'text-right',
          problem !== undefined
            ? 'font-semibold text-red outline-2 outline-red'
            : classNames(ink, field.marked && `outline-2 ${markOutlines[field.marked.severity]}`),
        )}
      />
      {field.marked !== undefined && (
        <span id={`${id}-mark`} hidden>
          {field.marked.sentence}
        </span>
      )}
      {problem !== undefined && <FieldError id={`${id}-problem`}>{problem}</FieldError>}
    </span>
  );
}
