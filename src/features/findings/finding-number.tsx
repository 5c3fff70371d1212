import { classNames } from '../../lib/class-names.ts';
import type { FindingItem } from './finding-item.ts';

/** The number of the balloon on the sheet: in an octagon when the finding blocks, else in a ring; dashed when waived. */
export function FindingNumber({
  finding,
}: {
  readonly finding: Pick<FindingItem, 'number' | 'severity' | 'waiver'>;
}) {
  const { number, severity } = finding;
  const waived = finding.waiver !== undefined;
  const solid = severity === 'blocking' && !waived;
  const ink = waived
    ? 'text-ink-3'
    : severity === 'blocking'
      ? 'text-red'
      : severity === 'degrading'
        ? 'text-degr'
        : 'text-advi';
  return (
    <span className={classNames('relative inline-flex size-22 items-center justify-center', ink)}>
      <svg aria-hidden="true" viewBox="0 0 22 22" className="absolute inset-0">
        {severity === 'blocking' ? (
          <path
            d="M6.9 1h8.200L21 6.900v8.200L15.1 21H6.900L1 15.100V6.900z"
            fill={solid ? 'currentColor' : 'none'}
            stroke="currentColor"
            strokeWidth="1.5"
            strokeDasharray={waived ? '3 2' : undefined}
          />
        ) : (
          <circle
            cx="11"
            cy="11"
            r="9.8"
            fill="none"
            stroke="currentColor"
            strokeWidth="1.6"
            strokeDasharray={waived ? '3 2' : undefined}
          />
        )}
      </svg>
      <span className={classNames('relative text-label font-bold', solid && 'text-red-ink')}>{number}</span>
    </span>
  );
}
