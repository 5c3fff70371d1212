import { classNames } from '../lib/class-names.ts';

const looks = {
  here: 'border-strip bg-strip text-strip-ink',
  other: 'border-blue bg-blue-wash text-blue',
  away: 'border-dashed border-ink-3 text-ink-3',
} as const;

export type Presence = keyof typeof looks;

interface PersonTagProps {
  readonly initials: string;
  readonly name: string;
  readonly presence?: Presence;
}

/** Somebody's initials. The name and what they are doing are said to screen readers and shown on hover. */
export function PersonTag({ initials, name, presence = 'here' }: PersonTagProps) {
  const words = presence !== 'away' ? name : `${name}, ${presence}`;
  return (
    <span
      title={words}
      className={classNames(
        'inline-flex h-22 min-w-28 items-center justify-center rounded-control border px-4 text-label font-bold',
        looks[presence],
      )}
    >
      <span aria-hidden="true">{initials}</span>
      <span className="sr-only">{words}</span>
    </span>
  );
}
