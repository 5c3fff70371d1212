import { classNames } from '../lib/class-names.ts';
import { Icon } from './icon.tsx';

export const severities = ['blocking', 'degrading', 'advisory'] as const;
export type Severity = (typeof severities)[number];

export const severityWords: Readonly<Record<Severity, string>> = {
  blocking: 'Blocking',
  degrading: 'Degrading',
  advisory: 'Advisory',
};

const inks: Readonly<Record<Severity, string>> = {
  blocking: 'text-red',
  degrading: 'text-degr',
  advisory: 'text-advi',
};

/** The shape that stands for a severity: solid octagon, triangle with its lower half filled, hollow lozenge. */
export function SeverityShape({
  severity,
  size = 14,
  ink = inks[severity],
}: {
  readonly severity: Severity;
  readonly size?: number;
  /** Class of its colour, where that is not the severity's own. */
  readonly ink?: string;
}) {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 14 14"
      width={size}
      height={size}
      className={classNames('shrink-0', ink)}
    >
      {severity === 'blocking' && (
        <path fill="currentColor" d="M4.1 0h5.8L14 4.1v5.8L9.9 14H4.1L0 9.9V4.1z" />
      )}
      {severity === 'degrading' && (
        <>
          <path fill="currentColor" d="M4 7.6h6l3.4 5.3H.6z" />
          <path
            fill="none"
            stroke="currentColor"
            strokeWidth="1.5"
            strokeLinejoin="round"
            d="M7 1.6l6 11.2H1z"
          />
        </>
      )}
      {severity === 'advisory' && (
        <path fill="none" stroke="currentColor" strokeWidth="1.5" d="M7 1l6 6-6 6-6-6z" />
      )}
    </svg>
  );
}

/** Shape and word together; a severity is never told by colour alone. Muted where it asks for nothing at the moment. */
export function SeverityMark({
  severity,
  muted = false,
}: {
  readonly severity: Severity;
  readonly muted?: boolean;
}) {
  const ink = muted ? 'text-ink-3' : inks[severity];
  return (
    <span className={classNames('inline-flex items-center gap-6 font-semibold', ink)}>
      <SeverityShape severity={severity} ink={ink} />
      {severityWords[severity]}
    </span>
  );
}

interface SeverityCountsProps {
  readonly counts: Readonly<Record<Severity, number>>;
  /** With the severity's word after each number; without it the word is for screen readers only. */
  readonly worded?: boolean;
  /** Said when there is nothing to count. */
  readonly clear?: string;
}

/** How many findings there are of each severity; severities without any are left out. */
export function SeverityCounts({ counts, worded = false, clear = 'clear' }: SeverityCountsProps) {
  const present = severities.filter((severity) => counts[severity] > 0);
  if (present.length === 0) {
    return (
      <span className="inline-flex items-center gap-5 font-semibold text-ok">
        <Icon name="check" size={14} />
        {clear}
      </span>
    );
  }
  return (
    <span className={classNames('inline-flex items-center', worded ? 'gap-16 max-sm:gap-10' : 'gap-8')}>
      {present.map((severity) => (
        <span
          key={severity}
          className={classNames(
            'inline-flex items-center gap-5 font-semibold whitespace-nowrap',
            inks[severity],
          )}
        >
          <SeverityShape severity={severity} size={worded ? 14 : 13} />
          <span>
            {counts[severity]}
            <span className={worded ? 'max-sm:sr-only @max-[66rem]/tabs:sr-only' : 'sr-only'}>
              {' '}
              {severity}
            </span>
          </span>
        </span>
      ))}
    </span>
  );
}
