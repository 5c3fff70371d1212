import { useId, useMemo, useRef, useState, type KeyboardEvent } from 'react';
import { classNames } from '../lib/class-names.ts';
import { FieldCell, type FieldCellProps } from './cell.tsx';

export interface ComboOption {
  readonly value: string;
  readonly label: string;
  /** Stands after the label and is looked through as well: where it is, what it is. */
  readonly detail?: string;
}

interface ComboCellProps extends FieldCellProps {
  readonly value: string;
  readonly options: readonly ComboOption[];
  readonly onChange: (value: string) => void;
  readonly placeholder?: string;
  /** Said where nothing holds what was typed. */
  readonly none?: string;
}

// More than anybody reads through; who looks for one of them types another letter.
const mostShown = 40;

const holds = ({ label, detail = '' }: ComboOption, words: readonly string[]): boolean => {
  const text = `${label} ${detail}`.toLowerCase();
  return words.every((word) => text.includes(word));
};

/** A cell to choose one of many in: what is typed narrows the list, arrow keys walk it, Enter takes, Escape leaves. */
export function ComboCell({
  value,
  options,
  onChange,
  placeholder,
  none = 'Nothing of that name',
  ...cell
}: ComboCellProps) {
  const listId = useId();
  const [text, setText] = useState<string>();
  const [at, setAt] = useState(0);
  const list = useRef<HTMLUListElement>(null);
  const isOpen = text !== undefined;
  const found = useMemo(() => {
    const words = (text ?? '').toLowerCase().split(/\s+/).filter(Boolean);
    return isOpen ? options.filter((option) => holds(option, words)) : [];
  }, [isOpen, options, text]);
  const shown = found.slice(0, mostShown);
  const chosen = options.find((option) => option.value === value);

  const close = (): void => setText(undefined);
  const take = (option: ComboOption | undefined): void => {
    close();
    if (option !== undefined && option.value !== value) onChange(option.value);
  };
  const walk = (to: number): void => {
    const next = Math.max(0, Math.min(shown.length - 1, to));
    setAt(next);
    list.current?.children[next]?.scrollIntoView({ block: 'nearest' });
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.key === 'ArrowDown' || event.key === 'ArrowUp') {
      event.preventDefault();
      if (!isOpen) setText('');
      else walk(at + (event.key === 'ArrowDown' ? 1 : -1));
    } else if (event.key === 'Enter' && isOpen) {
      event.preventDefault();
      take(shown[at]);
    } else if (event.key === 'Escape' && isOpen) {
      event.stopPropagation();
      close();
    }
  };
  return (
    <FieldCell {...cell}>
      {({ id, describedBy }) => (
        <>
          <input
            id={id}
            type="text"
            role="combobox"
            autoComplete="off"
            spellCheck={false}
            aria-expanded={isOpen}
            aria-controls={listId}
            aria-autocomplete="list"
            aria-activedescendant={isOpen && shown[at] !== undefined ? `${listId}-${at}` : undefined}
            aria-invalid={cell.error ? true : undefined}
            aria-describedby={describedBy}
            placeholder={placeholder}
            value={text ?? chosen?.label ?? value}
            onChange={(event) => {
              setText(event.target.value);
              setAt(0);
            }}
            onClick={() => {
              if (!isOpen) setText('');
              setAt(0);
            }}
            onBlur={close}
            onKeyDown={onKeyDown}
            className={classNames(
              'min-w-0 flex-1 border-0 bg-transparent p-0 text-value text-ellipsis text-ink outline-none',
              cell.error && 'font-semibold text-red',
            )}
          />
          {/* As wide as the cell, under it. */}
          <ul
            ref={list}
            id={listId}
            role="listbox"
            aria-label={cell.label}
            hidden={!isOpen}
            className="absolute top-full -left-9 z-20 mt-6 max-h-220 w-[calc(100%+18px)] overflow-y-auto border-1.5 border-ink bg-field shadow-sheet"
          >
            {shown.map((option, index) => (
              // The input keeps the focus and takes the keys for its list.
              // eslint-disable-next-line jsx-a11y/click-events-have-key-events
              <li
                key={option.value}
                id={`${listId}-${index}`}
                role="option"
                aria-selected={option.value === value}
                onPointerDown={(event) => event.preventDefault()}
                onPointerMove={() => setAt(index)}
                onClick={() => take(option)}
                className={classNames(
                  'pointer-events-auto flex min-h-28 cursor-pointer flex-wrap items-baseline gap-x-8 px-9 py-4 text-base',
                  index === at ? 'bg-strip text-strip-ink' : 'text-ink',
                )}
              >
                <span className={option.value === value ? 'font-semibold' : undefined}>{option.label}</span>
                {option.detail !== undefined && <span className="text-note opacity-80">{option.detail}</span>}
              </li>
            ))}
            {isOpen && found.length > shown.length && (
              <li role="presentation" className="px-9 py-5 text-note text-ink-3">
                {found.length - shown.length} more; type on
              </li>
            )}
            {isOpen && found.length === 0 && (
              <li role="presentation" className="px-9 py-6 text-note text-ink-3">
                {none}
              </li>
            )}
          </ul>
        </>
      )}
    </FieldCell>
  );
}
