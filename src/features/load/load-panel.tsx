import type { ReactNode } from 'react';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import type { LoadVerdict } from './load-verdict.ts';

export const loadViews = ['limits', 'demands'] as const;
export type LoadView = (typeof loadViews)[number];
export const kindsShown = ['all', 'tunnels', 'gateways', 'transports', 'cables'] as const;
export type KindShown = (typeof kindsShown)[number];

const kindLabels: Readonly<Record<KindShown, string>> = {
  all: 'All',
  tunnels: 'Tunnels',
  gateways: 'Gateways',
  transports: 'Transports',
  cables: 'Cables',
};

/** What is shown of the load: limits of one kind, or demands. */
export function LoadChoices({
  view,
  onView,
  kind,
  onKind,
}: {
  readonly view: LoadView;
  readonly onView: (view: LoadView) => void;
  readonly kind: KindShown;
  readonly onKind: (kind: KindShown) => void;
}) {
  return (
    <>
      <SegmentedChoice
        label="Shown"
        value={view}
        options={[
          { value: 'limits', label: 'Limits' },
          { value: 'demands', label: 'Demands' },
        ]}
        onChange={onView}
      />
      {view === 'limits' && (
        <SegmentedChoice
          label="Limits of"
          value={kind}
          options={kindsShown.map((value) => ({ value, label: kindLabels[value] }))}
          onChange={onKind}
        />
      )}
    </>
  );
}

/** The first bottleneck in one sentence, with a shape that says how it stands. */
export function VerdictLine({ verdict }: { readonly verdict: LoadVerdict }) {
  return (
    <div role="status" className="flex min-w-0 flex-1 items-start gap-8 text-base">
      <span className="mt-2">
        {verdict.state === 'room' ? (
          <Icon name="check" size={15} />
        ) : (
          <SeverityShape severity={verdict.state === 'over' ? 'degrading' : 'advisory'} />
        )}
      </span>
      <p className="min-w-0">
        <span className="font-semibold text-ink">{verdict.sentence.replaceAll(' %', '\u00a0%')}</span>{' '}
        <span className="text-ink-2">{verdict.besides}</span>
      </p>
    </div>
  );
}

/** Verdict and what-if above, the table below, which scrolls. */
export function LoadFrame({
  status,
  verdict,
  whatIf,
  children,
}: {
  /** What is under way, if anything is. */
  readonly status: ReactNode;
  readonly verdict: ReactNode;
  readonly whatIf: ReactNode;
  readonly children: ReactNode;
}) {
  return (
    <div className="flex h-full min-h-0 flex-col gap-8 px-14 py-10 max-md:h-auto">
      {status}
      <div className="flex shrink-0 flex-wrap items-center gap-x-24 gap-y-8">
        {verdict}
        {whatIf}
      </div>
      <div className="min-h-0 flex-1">{children}</div>
    </div>
  );
}
