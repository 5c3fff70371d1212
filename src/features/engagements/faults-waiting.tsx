import { Link } from 'react-router-dom';
import { buttonClasses } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import type { Engagement } from '../../contract/designs.ts';
import { dateAndTime, timeZoneName } from '../../lib/format-time.ts';
import { useNow } from '../../lib/use-now.ts';
import { designPath } from '../../lib/workspace-path.ts';
import { faultsWaiting } from './filter-engagements.ts';

const mostShown = 6;

/** The column at the right: where faults wait to be mended, worst first. */
export function FaultsWaiting({
  engagements,
  canOpen,
}: {
  readonly engagements: readonly Engagement[];
  readonly canOpen: boolean;
}) {
  const now = useNow();
  const waiting = faultsWaiting(engagements, mostShown);
  return (
    <aside
      aria-labelledby="faults-waiting"
      className="flex w-304 shrink-0 flex-col overflow-y-auto border-l-1.5 border-ink bg-panel max-lg:w-auto max-lg:overflow-visible max-lg:border-t-1.5 max-lg:border-l-0"
    >
      <h2
        id="faults-waiting"
        className="flex h-62 shrink-0 items-center border-b border-rule-2 px-14 text-title"
      >
        Faults waiting
      </h2>
      {waiting.length === 0 ? (
        <p className="flex items-start gap-8 px-14 py-14 text-base text-ink-2">
          <span className="mt-1 text-ok">
            <Icon name="check" />
          </span>
          No design here has a blocking finding.
        </p>
      ) : (
        <ul>
          {waiting.map(({ design, engagement }) => (
            <li key={design.id} className="border-b border-rule-2 px-14 py-13">
              <p className="flex items-center gap-6 text-note font-semibold text-red">
                <SeverityShape severity="blocking" size={12} />
                {design.counts.blocking} blocking
              </p>
              <p className="mt-2 text-value font-semibold">{design.title}</p>
              <p className="text-base text-ink-2">
                {engagement.name}
                {design.identification !== null && `, ${design.identification}`}
              </p>
              {canOpen && (
                <Link
                  to={designPath(design.id)}
                  aria-label={`Open the sheet of ${design.title}`}
                  className={`mt-8 ${buttonClasses({ small: true })}`}
                >
                  Open the sheet
                </Link>
              )}
            </li>
          ))}
        </ul>
      )}
      <p className="mt-auto border-t border-rule-2 px-14 py-13 text-base text-ink-2" title={timeZoneName()}>
        Times are yours: {dateAndTime(now)}.
      </p>
    </aside>
  );
}
