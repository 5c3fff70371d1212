import type { Reach } from '../../engine/outage/site-reach.ts';
import { classNames } from '../../lib/class-names.ts';
import { reachWords } from './outage-facts.ts';

const shapes: Readonly<Record<Reach, string>> = {
  // A cord that is whole, one that is frayed, one that is cut, and none.
  reaches: 'M1 7h20',
  partly: 'M1 7h20M1 11h6M15 11h6',
  parted: 'M1 7h6M15 7h6M8.4 3.4l5.2 7.2M13.6 3.4L8.4 10.6',
  'out-of-service': 'M4 3h14v8H4z',
};

/** How a site stands, by shape and word. */
export function ReachMark({ reach, lost }: { readonly reach: Reach; readonly lost: string }) {
  return (
    <span
      className={classNames(
        'inline-flex items-center gap-8 whitespace-nowrap',
        reach === 'reaches' ? 'text-ink-2' : 'font-semibold text-ink',
      )}
    >
      <svg aria-hidden="true" viewBox="0 0 22 14" width="22" height="14" className="shrink-0">
        <path
          d={shapes[reach]}
          fill="none"
          stroke="currentColor"
          strokeWidth={reach === 'out-of-service' ? 1.4 : 2.2}
          strokeDasharray={reach === 'out-of-service' ? '3 2' : undefined}
        />
      </svg>
      {reachWords[reach]} {lost !== '' && <span className="font-normal text-ink-2">{lost}</span>}
    </span>
  );
}
