import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { classNames } from '../../lib/class-names.ts';
import type { TraceVerdict } from './trace-verdict.ts';

const looks: Readonly<Record<TraceVerdict['tone'], { readonly ground: string; readonly ink: string }>> = {
  arrives: { ground: 'bg-ok-wash', ink: 'text-ok' },
  milder: { ground: 'bg-degr-wash', ink: 'text-degr' },
  lost: { ground: 'bg-red-wash', ink: 'text-red' },
  meant: { ground: 'bg-advi-wash', ink: 'text-advi' },
};

interface VerdictBarProps {
  readonly verdict: TraceVerdict;
  /** Said before it where two probes are compared. */
  readonly which?: string;
  readonly onShowFinding?: () => void;
  readonly onSendInstead?: () => void;
}

/** What came of the frame, in the end: shape, what and where, why, and what to do next. */
export function VerdictBar({ verdict, which, onShowFinding, onSendInstead }: VerdictBarProps) {
  const { tone, what, why, insteadBytes } = verdict;
  const { ground, ink } = looks[tone];
  return (
    <div
      className={classNames(
        'flex min-h-46 shrink-0 flex-wrap items-center gap-x-12 gap-y-6 border-t border-rule-2 px-12 py-6',
        ground,
      )}
    >
      <p role="status" className="flex min-w-200 flex-1 items-start gap-10 text-base text-ink">
        <span className="mt-1">
          {tone === 'arrives' ? (
            <Icon name="check" size={18} className="shrink-0 text-ok" />
          ) : (
            <SeverityShape
              severity={tone === 'lost' ? 'blocking' : tone === 'milder' ? 'degrading' : 'advisory'}
              size={18}
            />
          )}
        </span>
        <span className="line-clamp-3 min-w-0" title={why}>
          {which !== undefined && <span className="font-semibold">{which}: </span>}
          <span className={classNames('font-semibold', ink)}>{what}</span> {why}
        </span>
      </p>
      {onShowFinding !== undefined && <Button onClick={onShowFinding}>Show the finding</Button>}
      {onSendInstead !== undefined && insteadBytes !== undefined && (
        <Button kind="primary" onClick={onSendInstead}>
          Send {insteadBytes} B instead
        </Button>
      )}
    </div>
  );
}
