import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';

interface EmptyStateProps {
  readonly title: string;
  /** What would stand here and how to get it. */
  readonly children: ReactNode;
  readonly action?: ReactNode;
  readonly picture?: ReactNode;
  readonly className?: string;
}

/** A place where nothing is yet: says what belongs here and how to make the first of it. */
export function EmptyState({ title, children, action, picture, className }: EmptyStateProps) {
  return (
    <div
      className={classNames(
        'flex flex-col items-center gap-4 border border-dashed border-rule-strong px-24 py-24 text-center',
        className,
      )}
    >
      {picture !== undefined && <div className="mb-10">{picture}</div>}
      <p className="text-base font-semibold text-ink">{title}</p>
      <div className="max-w-320 text-base text-balance text-ink-2">{children}</div>
      {action !== undefined && <div className="mt-12 flex flex-wrap justify-center gap-8">{action}</div>}
    </div>
  );
}

/** Two endpoints and the cord that is not there yet. */
export function UncabledPicture() {
  return (
    <svg aria-hidden="true" viewBox="0 0 140 50" width="140" height="50">
      <path d="M3 1v48M137 1v48" stroke="var(--ink)" strokeWidth="2.4" />
      <path d="M34 25h72" stroke="var(--blue)" strokeWidth="2.6" strokeDasharray="7 5" />
      {[17.5, 122.5].map((x) => (
        <g key={x} stroke="var(--casing)" strokeWidth="1.6">
          <circle cx={x} cy="25" r="13.5" fill="var(--brass)" />
          <circle cx={x} cy="25" r="6.5" fill="var(--paper)" />
        </g>
      ))}
    </svg>
  );
}
