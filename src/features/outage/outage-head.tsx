import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { failedKind, failedName } from './failable.ts';
import type { FailureSummary } from './failure-run.ts';
import { outageSentence, singlesSentence, type OutageFacts } from './outage-facts.ts';

export const outageViews = ['every', 'sites', 'hosts', 'pairs', 'failovers', 'cuts'] as const;
export type OutageView = (typeof outageViews)[number];

const viewLabels: Readonly<Record<OutageView, string>> = {
  every: 'Every failure',
  sites: 'Sites',
  hosts: 'Hosts',
  pairs: 'Two at once',
  failovers: 'Failovers',
  cuts: 'Smallest cuts',
};

export function OutageChoice({
  view,
  onView,
}: {
  readonly view: OutageView;
  readonly onView: (view: OutageView) => void;
}) {
  return (
    <SegmentedChoice
      label="Shown"
      value={view}
      options={outageViews.map((value) => ({ value, label: viewLabels[value] }))}
      onChange={onView}
    />
  );
}

interface OutageHeadProps {
  readonly design: Design;
  readonly failed: readonly ElementRef[];
  /** Named in the address, but nothing of this design that can fail. */
  readonly unknown: readonly string[];
  readonly facts: OutageFacts | undefined;
  /** What every single failure does, once that is known. */
  readonly singles: readonly FailureSummary[] | undefined;
  readonly onRestore: (ref: ElementRef) => void;
  readonly onRestoreAll: () => void;
  /** Takes what is unknown out of the address. */
  readonly onForget: () => void;
}

const mostNamed = 8;

/** What has failed, each with a press to restore it, and in one sentence what has come of it. */
export function OutageHead({
  design,
  failed,
  unknown,
  facts,
  singles,
  onRestore,
  onRestoreAll,
  onForget,
}: OutageHeadProps) {
  const isHarmful = facts !== undefined && facts.outage.pairCount > 0;
  return (
    <div className="flex shrink-0 flex-wrap items-center gap-x-16 gap-y-6">
      {failed.length === 0 ? (
        <p className="text-base text-ink-2">
          <span className="font-semibold text-ink">
            {singles === undefined ? 'Nothing has failed.' : singlesSentence(singles)}
          </span>{' '}
          Press anything on the sheet, or a row below, to fail it; press it again to restore it.
        </p>
      ) : (
        <ul aria-label="Failed" className="flex flex-wrap items-center gap-6">
          {failed.slice(0, mostNamed).map((ref) => (
            <li key={elementKey(ref)}>
              <Button
                small
                className="border-dashed border-red"
                title={`${failedKind(design, ref)}: press to restore`}
                aria-label={`Restore ${failedName(design, ref)}`}
                onClick={() => onRestore(ref)}
              >
                {failedName(design, ref)}
                <Icon name="cross" size={12} />
              </Button>
            </li>
          ))}
          {failed.length > mostNamed && <li className="text-base">and {failed.length - mostNamed} more</li>}
          {failed.length > 1 && (
            <li>
              <Button small kind="quiet" onClick={onRestoreAll}>
                Restore all
              </Button>
            </li>
          )}
        </ul>
      )}
      <div role="status" className="flex min-w-0 flex-wrap items-center gap-8 text-base">
        {facts !== undefined && failed.length > 0 && (
          <>
            {isHarmful ? <SeverityShape severity="degrading" /> : <Icon name="check" size={15} />}
            <span className="font-semibold text-ink">{outageSentence(facts)}</span>
          </>
        )}
        {unknown.length > 0 && (
          <span className="flex flex-wrap items-center gap-8 text-degr">
            {unknown.join(', ')} {unknown.length === 1 ? 'is' : 'are'} nothing of this design that can fail.
            <Button small onClick={onForget}>
              Leave {unknown.length === 1 ? 'it' : 'them'} out
            </Button>
          </span>
        )}
      </div>
    </div>
  );
}
