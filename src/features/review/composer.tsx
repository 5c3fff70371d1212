import {
  useEffect,
  useId,
  useLayoutEffect,
  useRef,
  useState,
  type KeyboardEvent,
  type ReactNode,
} from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid, FieldCell } from '../../components/cell.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { Mentionable } from '../../contract/comments.ts';
import { roleWords } from '../../lib/role-words.ts';
import { classNames } from '../../lib/class-names.ts';
import { composerProblem } from './composer-problem.ts';
import { membersFor, mentionAt, mentionLabel, toBody, toText, withMention } from './composer-text.ts';

interface ComposerProps {
  readonly label: string;
  readonly members: readonly Mentionable[];
  /** Words to begin with, with tokens for people. */
  readonly initialBody?: string;
  /** People whom the initial words call and who are members no more. */
  readonly others?: readonly { readonly id: string; readonly name: string }[];
  readonly placeholder?: string;
  readonly submitWords: string;
  readonly busy: boolean;
  /** Why the last attempt failed. */
  readonly failure?: string | undefined;
  readonly onSubmit: (body: string) => void;
  readonly onCancel: () => void;
  readonly children?: ReactNode;
}

const mostOffered = 8;

/** Where a comment is written. '@' and the beginning of a name offer the workspace's people; Control Enter sends. */
export function Composer({
  label,
  members,
  initialBody = '',
  others = [],
  placeholder,
  submitWords,
  busy,
  failure,
  onSubmit,
  onCancel,
  children,
}: ComposerProps) {
  const people = [...members, ...others.filter(({ id }) => !members.some((member) => member.id === id))];
  const [text, setText] = useState(() => toText(initialBody, people));
  const [caret, setCaret] = useState(0);
  const [at, setAt] = useState(0);
  const [closed, setClosed] = useState(false);
  const [tried, setTried] = useState(false);
  const field = useRef<HTMLTextAreaElement>(null);
  const wanted = useRef<number>(undefined);
  const listId = useId();
  useEffect(() => {
    const { current } = field;
    current?.focus();
    current?.setSelectionRange(current.value.length, current.value.length);
  }, []);
  useLayoutEffect(() => {
    // React puts the caret to the end when the text is set; it belongs behind the name that was chosen.
    if (wanted.current !== undefined) field.current?.setSelectionRange(wanted.current, wanted.current);
    wanted.current = undefined;
  }, [text]);

  const query = closed ? undefined : mentionAt(text, caret);
  const offered = query === undefined ? [] : membersFor(query.words, members).slice(0, mostOffered);
  const chosen = Math.min(at, offered.length - 1);
  const body = toBody(text, people).trim();
  const problem = composerProblem(body);

  const take = (member: Mentionable | undefined): void => {
    if (query === undefined || member === undefined) return;
    const next = withMention(text, caret, query, mentionLabel(member, members));
    wanted.current = next.caret;
    setText(next.text);
    setCaret(next.caret);
    setClosed(true);
  };
  const submit = (): void => {
    setTried(true);
    if (problem === undefined && !busy) onSubmit(body);
    else field.current?.focus();
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) {
      event.preventDefault();
      submit();
      return;
    }
    if (offered.length === 0) {
      if (event.key === 'Escape') {
        event.stopPropagation();
        if (text.trim() === '') onCancel();
      }
      return;
    }
    if (event.key === 'ArrowDown' || event.key === 'ArrowUp') {
      event.preventDefault();
      const step = event.key === 'ArrowDown' ? 1 : offered.length - 1;
      setAt((chosen + step) % offered.length);
    } else if (event.key === 'Enter' || event.key === 'Tab') {
      event.preventDefault();
      take(offered[chosen]);
    } else if (event.key === 'Escape') {
      event.preventDefault();
      event.stopPropagation();
      setClosed(true);
    }
  };
  return (
    <div>
      <CellGrid>
        <FieldCell label={label} error={tried ? problem : undefined}>
          {({ id, describedBy }) => (
            <textarea
              ref={field}
              id={id}
              rows={3}
              value={text}
              placeholder={placeholder}
              aria-invalid={(tried && problem !== undefined) || undefined}
              aria-describedby={describedBy}
              aria-autocomplete="list"
              aria-controls={offered.length > 0 ? listId : undefined}
              aria-activedescendant={offered.length > 0 ? `${listId}-${chosen}` : undefined}
              onChange={(event) => {
                setText(event.target.value);
                setCaret(event.target.selectionStart);
                setAt(0);
                setClosed(false);
              }}
              onSelect={(event) => setCaret(event.currentTarget.selectionStart)}
              onBlur={() => setClosed(true)}
              onKeyDown={onKeyDown}
              className="min-w-0 flex-1 resize-y border-0 bg-transparent p-0 text-base text-ink outline-none"
            />
          )}
        </FieldCell>
      </CellGrid>
      <div>
        <ul
          id={listId}
          role="listbox"
          aria-label="People to mention"
          hidden={offered.length === 0}
          // In the flow, so that nothing it stands in cuts it off.
          className="mt-2 max-h-200 overflow-y-auto border-1.5 border-ink bg-field py-4"
        >
          {offered.map((member, index) => (
            // The field keeps the focus and takes the keys; the pointer takes the rows.
            // eslint-disable-next-line jsx-a11y/click-events-have-key-events
            <li
              key={member.id}
              id={`${listId}-${index}`}
              role="option"
              aria-selected={index === chosen}
              onPointerDown={(event) => event.preventDefault()}
              onClick={() => take(member)}
              className={classNames(
                'flex min-h-28 cursor-pointer items-center gap-12 px-12 text-base',
                index === chosen ? 'bg-strip text-strip-ink' : 'text-ink',
              )}
            >
              <span className="min-w-0 flex-1 truncate">{member.name}</span>
              <span className="text-note opacity-80">{roleWords[member.role]}</span>
            </li>
          ))}
        </ul>
        <p role="status" className="sr-only">
          {offered.length === 0 ? '' : `${offered.length} to mention; ${offered[chosen]?.name ?? ''}`}
        </p>
      </div>
      {children}
      {failure !== undefined && <ErrorNotice className="mt-10">{failure}</ErrorNotice>}
      <div className="mt-8 flex flex-wrap items-center justify-end gap-8">
        <span className="mr-auto text-note text-ink-3 max-sm:hidden">
          @ mentions somebody, Control Enter sends
        </span>
        <Button onClick={onCancel}>Cancel</Button>
        <Button kind="primary" busy={busy} onClick={submit}>
          {submitWords}
        </Button>
      </div>
    </div>
  );
}
