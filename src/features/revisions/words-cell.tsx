import { FieldCell } from '../../components/cell.tsx';

interface WordsCellProps {
  readonly label: string;
  readonly value: string;
  readonly onChange: (value: string) => void;
  readonly placeholder: string;
  readonly error?: string | undefined;
}

/** A cell for a message, a note or a reason of some lines. */
export function WordsCell({ label, value, onChange, placeholder, error }: WordsCellProps) {
  return (
    <FieldCell label={label} error={error}>
      {({ id, describedBy }) => (
        <textarea
          id={id}
          rows={3}
          value={value}
          // A little more than the server takes, so that who pastes too much is told.
          maxLength={2200}
          aria-invalid={error === undefined ? undefined : true}
          aria-describedby={describedBy}
          placeholder={placeholder}
          onChange={(event) => onChange(event.target.value)}
          className="min-w-0 flex-1 resize-y border-0 bg-transparent p-0 text-base text-ink outline-none"
        />
      )}
    </FieldCell>
  );
}

const mostCharacters = 2000;

/** What is wrong with words that may be left out, as the server would say it. */
export const tooLong = (label: string, value: string): string | undefined =>
  value.trim().length > mostCharacters
    ? `${label} has ${value.trim().length} characters; at most 2,000 fit. Say the rest in comments.`
    : undefined;

/** What is wrong with words that have to be given. */
export const missingOrTooLong = (label: string, value: string, why: string): string | undefined =>
  value.trim() === '' ? `${label} is empty. ${why}` : tooLong(label, value);
