import { Link } from 'react-router-dom';
import { Button, buttonClasses } from '../../components/button.tsx';
import { focusWhenGone } from '../../lib/focus-when-gone.ts';
import type { CommentingTools } from './commenting-tools.ts';
import type { FindingItem } from './finding-item.ts';
import { previewHandlers } from './preview-handlers.ts';
import type { WaivingTools } from './waiving-tools.ts';

interface FindingDetailsProps {
  readonly id: string;
  readonly finding: FindingItem;
  readonly canFix: boolean;
  readonly waiving: WaivingTools | undefined;
  readonly commenting: CommentingTools | undefined;
  readonly sheetPath: string | undefined;
  readonly onApplyFix: (fixId: string) => void;
  readonly onPreviewFix: (fixId: string | null) => void;
}

/** Why it matters, what is seen on site, on what the check rests, and what would cure it. */
export function FindingDetails({
  id,
  finding,
  canFix,
  waiving,
  commenting,
  sheetPath,
  onApplyFix,
  onPreviewFix,
}: FindingDetailsProps) {
  const { why, seen, sources, severityReason, fixes, waiver } = finding;
  return (
    <div
      id={id}
      className="grid grid-cols-[minmax(0,1fr)_minmax(0,1fr)] gap-x-28 gap-y-10 pt-4 pr-12 pb-14 pl-50 text-base max-md:grid-cols-1 max-md:pl-12"
    >
      <dl className="flex max-w-620 flex-col gap-8">
        <Part term="Why it matters">{why}</Part>
        <Part term="What is seen on site">{seen}</Part>
        {severityReason !== undefined && <Part term="Why this severity">{severityReason}</Part>}
        <Part term="Rests on">{sources.join('; ')}</Part>
        {waiver !== undefined && (
          <Part term={`Waived until ${waiver.until}${waiver.by === null ? '' : ` by ${waiver.by}`}`}>
            {waiver.reason}
          </Part>
        )}
      </dl>
      <div>
        <h3 className="text-label text-ink-3">What would cure it</h3>
        {fixes === undefined && <p className="text-ink-2">Being worked out…</p>}
        {fixes?.length === 0 && (
          <p className="max-w-460 text-ink-2">
            No change could be found that cures this without doing harm elsewhere. It needs a decision of
            yours.
          </p>
        )}
        <ul className="flex flex-col gap-8">
          {fixes?.map((fix) => (
            <li key={fix.id} className="flex flex-col items-start gap-4">
              {canFix ? (
                <Button
                  kind="accent"
                  small
                  className="mt-4"
                  onClick={() => onApplyFix(fix.id)}
                  {...previewHandlers(fix, onPreviewFix)}
                >
                  {fix.label}
                </Button>
              ) : commenting?.onSuggest !== undefined ? (
                <Button
                  kind="accent"
                  small
                  className="mt-4"
                  onClick={() => commenting.onSuggest?.(finding.key, fix.id)}
                  {...previewHandlers(fix, onPreviewFix)}
                >
                  Suggest: {fix.label}
                </Button>
              ) : (
                <span className="font-medium">{fix.label}</span>
              )}
              <span className="max-w-460 text-ink-2">{fix.sentence}</span>
            </li>
          ))}
        </ul>
        {(waiving !== undefined || commenting !== undefined || sheetPath !== undefined) && (
          <div className="mt-14 flex flex-wrap items-center gap-8">
            {waiving !== undefined && (
              <Button small onClick={() => waiving.onWaive(finding.key)}>
                {waiver === undefined ? 'Waive…' : 'Waive anew…'}
              </Button>
            )}
            {waiving !== undefined && waiver !== undefined && (
              <Button
                small
                onClick={(event) => {
                  focusWhenGone(event.currentTarget);
                  waiving.onWithdraw(waiver.id);
                }}
              >
                Withdraw the waiver
              </Button>
            )}
            {commenting !== undefined && (
              <Button small onClick={() => commenting.onComment(finding.key)}>
                Comment…
              </Button>
            )}
            {sheetPath !== undefined && (
              <Link to={sheetPath} className={buttonClasses({ small: true })}>
                Show on the sheet
              </Link>
            )}
          </div>
        )}
      </div>
    </div>
  );
}

function Part({ term, children }: { readonly term: string; readonly children: string }) {
  return (
    <div>
      <dt className="text-label text-ink-3">{term}</dt>
      <dd className="break-words whitespace-pre-line text-ink">{children}</dd>
    </div>
  );
}
