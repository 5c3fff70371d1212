import { useId, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';

export interface ChoiceOption<Value extends string> {
  readonly value: Value;
  readonly label: string;
  readonly disabled?: boolean;
}

interface SegmentedChoiceProps<Value extends string> {
  /** Says to a screen reader what is chosen here. */
  readonly label: string;
  readonly value: Value | undefined;
  readonly options: readonly (ChoiceOption<Value> & { readonly detail?: ReactNode })[];
  readonly onChange: (value: Value) => void;
  readonly small?: boolean;
  /** As wide as what it stands in. */
  readonly stretch?: boolean;
  readonly disabled?: boolean;
}

/** One of a few, all in sight. Arrow keys move between them, as between radio buttons, which they are. */
export function SegmentedChoice<Value extends string>({
  label,
  value,
  options,
  onChange,
  small = false,
  stretch = false,
  disabled = false,
}: SegmentedChoiceProps<Value>) {
  const name = useId();
  return (
    <div
      role="radiogroup"
      aria-label={label}
      className={classNames(
        'max-w-full border border-rule-strong bg-field',
        stretch ? 'flex w-full' : 'inline-flex flex-wrap',
      )}
    >
      {options.map((option) => (
        <label
          key={option.value}
          className={classNames(
            'relative inline-flex cursor-pointer items-center justify-center gap-5 border-l border-rule-2 bg-field text-base font-medium whitespace-nowrap text-ink-2 first:border-l-0',
            'hover:bg-hover has-checked:bg-strip has-checked:font-semibold has-checked:text-strip-ink has-disabled:cursor-default has-disabled:text-ink-3',
            'has-focus-visible:z-1 has-focus-visible:outline-2 has-focus-visible:outline-offset-2 has-focus-visible:outline-blue',
            small ? 'h-22 px-8' : 'h-28 px-12',
            stretch && 'flex-1',
          )}
        >
          <input
            type="radio"
            name={name}
            value={option.value}
            checked={option.value === value}
            disabled={disabled || option.disabled}
            onChange={() => onChange(option.value)}
            className="absolute inset-0 cursor-pointer appearance-none opacity-0 outline-none disabled:cursor-default"
          />
          {option.label}
          {option.detail}
        </label>
      ))}
    </div>
  );
}
