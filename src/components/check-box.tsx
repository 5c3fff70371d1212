import type { InputHTMLAttributes, ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';

interface CheckBoxProps extends InputHTMLAttributes<HTMLInputElement> {
  readonly children?: ReactNode;
  /** The box alone, inside something that is its label. */
  readonly bare?: boolean;
}

/** A square to tick, with its words to the right. */
export function CheckBox({ children, bare = false, className, ...input }: CheckBoxProps) {
  const box = (
    <span className="relative inline-flex size-18 shrink-0">
      <input
        {...input}
        type="checkbox"
        className={classNames(
          'peer size-18 appearance-none border border-rule-strong bg-field checked:border-strip checked:bg-strip disabled:border-dashed',
          bare && 'outline-none',
        )}
      />
      <svg
        aria-hidden="true"
        viewBox="0 0 18 18"
        className="pointer-events-none absolute inset-0 hidden text-strip-ink peer-checked:block"
      >
        <path d="M4 9.4l3.4 3.6L14 5.6" fill="none" stroke="currentColor" strokeWidth="1.8" />
      </svg>
    </span>
  );
  if (bare) return box;
  return (
    <label className={classNames('inline-flex items-center gap-8 text-base text-ink', className)}>
      {box}
      <span>{children}</span>
    </label>
  );
}
