import type { ButtonHTMLAttributes, ReactNode, Ref } from 'react';
import { classNames } from '../lib/class-names.ts';

export type ButtonKind = 'primary' | 'secondary' | 'accent' | 'danger' | 'quiet';

export interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  readonly kind?: ButtonKind;
  readonly small?: boolean;
  /** A square button that shows an icon only; give it an `aria-label`. */
  readonly iconOnly?: boolean;
  /** For a button that stays pressed. */
  readonly pressed?: boolean;
  /** Work is under way: the button keeps its place and takes no second press. */
  readonly busy?: boolean;
  readonly icon?: ReactNode;
  readonly ref?: Ref<HTMLButtonElement>;
}

const colours: Record<ButtonKind, string> = {
  primary:
    'border-strip bg-strip text-strip-ink font-semibold enabled:hover:border-ink-2 enabled:hover:bg-ink-2',
  secondary: 'border-rule-strong bg-field text-ink enabled:hover:border-ink enabled:hover:bg-hover',
  accent: 'border-blue bg-field text-blue enabled:hover:bg-blue-wash',
  danger: 'border-red bg-field text-red enabled:hover:bg-red-wash',
  quiet: 'border-transparent bg-transparent text-ink enabled:hover:bg-hover',
};

/** The classes of a button, for the links that look like one. */
export function buttonClasses({
  kind = 'secondary',
  small = false,
  iconOnly = false,
}: Pick<ButtonProps, 'kind' | 'small' | 'iconOnly'> = {}): string {
  return classNames(
    'inline-flex shrink-0 items-center justify-center gap-6 rounded-control border text-base font-medium whitespace-nowrap select-none',
    'disabled:border-dashed disabled:border-rule-strong disabled:bg-transparent disabled:font-medium disabled:text-ink-3',
    small ? 'h-24' : 'h-30',
    iconOnly ? (small ? 'w-24' : 'w-30') : small ? 'px-9' : 'px-13',
    colours[kind],
  );
}

export function Button({
  kind,
  small,
  iconOnly,
  pressed,
  busy = false,
  icon,
  className,
  children,
  type = 'button',
  disabled,
  ...rest
}: ButtonProps) {
  const shownKind = pressed === true ? 'primary' : kind;
  return (
    <button
      type={type}
      aria-pressed={pressed}
      aria-busy={busy || undefined}
      disabled={disabled === true || busy}
      className={classNames(buttonClasses({ kind: shownKind, small, iconOnly }), className)}
      {...rest}
    >
      {icon}
      {children}
    </button>
  );
}
