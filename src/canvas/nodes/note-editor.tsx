import { useStore } from '@xyflow/react';
import { useId, useRef, useState, type KeyboardEvent } from 'react';
import { FieldError } from '../../components/cell.tsx';
import { editNote, useDesk } from '../desk-state.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { useField } from '../inspector/use-field.ts';

const takeFocus = (area: HTMLTextAreaElement | null): void => {
  if (area === null || area === document.activeElement) return;
  area.focus({ preventScroll: true });
  area.select();
};

/** A note's words, typed where they stand: Enter or leaving them keeps the new ones, Escape the old ones or no note. */
export function NoteEditor({
  note,
  widthPx,
  heightPx,
}: {
  readonly note: string;
  readonly widthPx: number;
  readonly heightPx: number;
}) {
  const open = useOpenDesign();
  const isNew = useDesk((state) => state.isNewNote);
  const { value = '', refusal, commit } = useField<string>(['notes', note, 'text']);
  const [draft, setDraft] = useState(value);
  const [problem, setProblem] = useState<string>();
  const isDone = useRef(false);
  const problemId = useId();
  const zoom = useStore((state) => state.transform[2]);
  const end = (backTo: Element | null | undefined): void => {
    isDone.current = true;
    editNote(undefined);
    if (backTo instanceof HTMLElement) backTo.focus({ preventScroll: true });
  };
  const keep = (backTo?: Element | null): void => {
    if (isDone.current) return;
    const text = draft.trim();
    const why = text === value ? undefined : refusal('Text', text, text);
    if (why !== undefined) return setProblem(why);
    if (text !== value) commit('Text', text);
    end(backTo);
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    // The keys of the sheet are not meant while words are typed.
    event.stopPropagation();
    const node = event.currentTarget.closest('.react-flow__node');
    if (event.key === 'Enter' && !event.shiftKey) {
      event.preventDefault();
      keep(node);
    } else if (event.key === 'Escape') {
      event.preventDefault();
      if (!isNew) return end(node);
      end(document.getElementById('main'));
      // Its making and its going are one: nothing is left to be undone.
      open.undo();
    }
  };
  return (
    // From afar what one types is as large as anything else that one reads.
    <div
      className="note-editor nodrag nopan nowheel"
      style={{ width: widthPx + 12, transform: zoom < 1 ? `scale(${1 / zoom})` : undefined }}
    >
      <textarea
        ref={takeFocus}
        aria-label="Text of the note"
        aria-invalid={problem === undefined ? undefined : true}
        aria-describedby={problem === undefined ? undefined : problemId}
        value={draft}
        rows={Math.max(2, Math.ceil(heightPx / 19))}
        onChange={(event) => {
          setDraft(event.target.value);
          setProblem(undefined);
        }}
        onBlur={() => keep()}
        onKeyDown={onKeyDown}
      />
      {problem === undefined ? (
        <p>
          Enter keeps it, Shift Enter begins a line, Esc {isNew ? 'takes it away' : 'leaves it as it was'}.
        </p>
      ) : (
        <FieldError id={problemId}>{problem}</FieldError>
      )}
    </div>
  );
}
