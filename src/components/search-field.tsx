import { classNames } from '../lib/class-names.ts';
import { Icon } from './icon.tsx';

interface SearchFieldProps {
  /** What can be looked for; also shown while nothing is typed. */
  readonly label: string;
  readonly value: string;
  readonly onChange: (value: string) => void;
  readonly className?: string;
}

/** Narrows a list as it is typed into. */
export function SearchField({ label, value, onChange, className }: SearchFieldProps) {
  return (
    <label
      className={classNames(
        'flex h-30 items-center gap-8 border border-rule-strong bg-field px-10 text-ink-2 focus-within:outline-2 focus-within:-outline-offset-1 focus-within:outline-blue',
        className,
      )}
    >
      <Icon name="search" />
      <input
        type="search"
        aria-label={label}
        placeholder={label}
        value={value}
        onChange={(event) => onChange(event.target.value)}
        className="min-w-0 flex-1 bg-transparent text-base text-ink outline-none"
      />
    </label>
  );
}
