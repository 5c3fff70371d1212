import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { SeverityShape } from './severity-mark.tsx';

/** Something went wrong, where the reader is looking: what, and the way out. */
export function ErrorNotice({
  children,
  action,
  className,
}: {
  readonly children: ReactNode;
  readonly action?: ReactNode;
  readonly className?: string;
}) {
  return (
    <div
      role="alert"
      className={classNames(
        'flex items-start gap-10 rounded-control border border-red bg-red-wash px-13 py-8 text-base text-ink',
        className,
      )}
    >
      <span className="mt-2">
        <SeverityShape severity="blocking" />
      </span>
      <div className="min-w-0 flex-1 break-words">{children}</div>
      {action}
    </div>
  );
}
