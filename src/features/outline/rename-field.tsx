import { useId, useRef, useState, type KeyboardEvent } from 'react';
import { useField } from '../../canvas/inspector/use-field.ts';
import { FieldError } from '../../components/cell.tsx';

interface RenameFieldProps {
  readonly path: readonly string[];
  /** What has the name, such as 'fw-gul'. */
  readonly subject: string;
  /** It may be left empty. */
  readonly optional: boolean;
  /** The row takes the focus back unless the reader has moved on. */
  readonly onDone: (returnFocus: boolean) => void;
}

const takeFocus = (input: HTMLInputElement | null): void => {
  input?.focus();
  input?.select();
};

/** A name being changed in its row: Enter or leaving it keeps the new one, Escape the old one. */
export function RenameField({ path, subject, optional, onDone }: RenameFieldProps) {
  const { value = '', refusal, commit } = useField<string>(path);
  const [draft, setDraft] = useState(value);
  const [problem, setProblem] = useState<string>();
  const isDone = useRef(false);
  const problemId = useId();
  const end = (returnFocus: boolean): void => {
    isDone.current = true;
    onDone(returnFocus);
  };
  const keep = (returnFocus: boolean): void => {
    if (isDone.current) return;
    const text = draft.trim();
    if (text === value) return end(returnFocus);
    const next = text === '' && optional ? undefined : text;
    const why = refusal('Name', text, next);
    if (why !== undefined) return setProblem(why);
    commit('Name', next);
    end(returnFocus);
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    // The keys of the row are not meant while its name is typed.
    event.stopPropagation();
    if (event.key === 'Enter') {
      event.preventDefault();
      keep(true);
    } else if (event.key === 'Escape') {
      event.preventDefault();
      end(true);
    }
  };
  return (
    <span className="flex min-w-0 flex-col">
      <input
        ref={takeFocus}
        aria-label={`Name of ${subject}`}
        aria-invalid={problem === undefined ? undefined : true}
        aria-describedby={problem === undefined ? undefined : problemId}
        autoComplete="off"
        spellCheck={false}
        value={draft}
        className="h-24 w-240 max-w-full border border-rule-strong bg-field px-4 text-base font-medium"
        onChange={(event) => {
          setDraft(event.target.value);
          setProblem(undefined);
        }}
        onClick={(event) => event.stopPropagation()}
        onBlur={() => keep(false)}
        onKeyDown={onKeyDown}
      />
      {problem !== undefined && <FieldError id={problemId}>{problem}</FieldError>}
    </span>
  );
}
