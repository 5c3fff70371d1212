import { useState, type KeyboardEvent } from 'react';

interface CommittedText {
  readonly value: string;
  /** Called once per change, when the reader leaves the field or presses Enter; never with the value it has. */
  readonly onCommit: (value: string) => void;
  /** What is wrong with a text, so that it is not committed. */
  readonly validate?: (text: string) => string | undefined;
  /** Enter starts a new line; Ctrl or Cmd with Enter commits. */
  readonly multiline?: boolean;
}

/** A text that counts when its field is left or Enter is pressed; Escape brings the old text back. */
export function useCommittedText({ value, onCommit, validate, multiline = false }: CommittedText) {
  const [draft, setDraft] = useState<string | null>(null);
  const [problem, setProblem] = useState<string>();
  const commit = (): void => {
    if (draft === null) return;
    const text = draft.trim();
    const found = text === value ? undefined : validate?.(text);
    setProblem(found);
    if (found !== undefined) return;
    setDraft(null);
    if (text !== value) onCommit(text);
  };
  return {
    problem,
    field: {
      value: draft ?? value,
      autoComplete: 'off',
      spellCheck: multiline,
      onChange: (event: { readonly target: { readonly value: string } }): void => {
        setDraft(event.target.value);
        setProblem(undefined);
      },
      onBlur: commit,
      onKeyDown: (event: KeyboardEvent): void => {
        if (event.key === 'Enter' && (!multiline || event.ctrlKey || event.metaKey)) commit();
        if (event.key !== 'Escape' || draft === null) return;
        // The first Escape is the field's; what is around it, such as a dialog, gets the next.
        event.stopPropagation();
        setDraft(null);
        setProblem(undefined);
      },
    },
  };
}
