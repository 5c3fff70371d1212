import { classNames } from '../lib/class-names.ts';

const stamps = {
  draft: ['Draft', 'border-dashed border-ink-3 text-ink-2'],
  'in-review': ['In review', 'border-blue text-blue'],
  approved: ['Approved', 'border-ok text-ok outline-1 -outline-offset-3 outline-ok'],
  built: ['Built', 'border-strip bg-strip text-strip-ink'],
  superseded: ['Superseded', 'border-ink-3 text-ink-3 line-through'],
} as const;

export type StampState = keyof typeof stamps;

export const stampWords = Object.fromEntries(
  Object.entries(stamps).map(([state, [word]]) => [state, word]),
) as Readonly<Record<StampState, string>>;

interface StampProps {
  readonly state: StampState;
  /** What the stamp is on, such as the revision's letter; stands before the state. */
  readonly prefix?: string;
}

/** The state of a revision. The border says it as well as the word: dashed, solid, double, filled, struck through. */
export function Stamp({ state, prefix }: StampProps) {
  const [word, look] = stamps[state];
  return (
    <span
      className={classNames(
        'inline-flex h-20 items-center rounded-control border px-7 text-label font-semibold whitespace-nowrap',
        look,
      )}
    >
      {prefix === undefined ? word : `${prefix} ${word.toLowerCase()}`}
    </span>
  );
}
