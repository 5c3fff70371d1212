import { useId, useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape, severityWords, type Severity } from '../../components/severity-mark.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import type { Finding, Source } from '../../engine/rules/finding.ts';
import { listed } from '../../engine/rules/wording.ts';
import { classNames } from '../../lib/class-names.ts';
import { dayInWords } from '../../lib/format-time.ts';
import { useChecks, useFixes } from '../../workspace/checks-context.tsx';
import { TextButton } from './element-link.tsx';
import { findingsAbout } from './field-marks.ts';
import { useInspectorTools } from './inspector-context.ts';
import { useCommit, useEditable } from './use-field.ts';

const edges: Readonly<Record<Severity, string>> = {
  blocking: 'border-red',
  degrading: 'border-degr',
  advisory: 'border-advi',
};
const inks: Readonly<Record<Severity, string>> = {
  blocking: 'text-red',
  degrading: 'text-degr',
  advisory: 'text-advi',
};

/** Sources in one line, the clauses of one document behind its name. */
export const sourcesLine = (sources: readonly Source[]): string => {
  const clauses = new Map<string, string[]>();
  for (const source of sources) {
    const document = typeof source === 'string' ? source : source.document;
    const clause = typeof source === 'string' ? undefined : source.clause;
    clauses.set(document, [...(clauses.get(document) ?? []), ...(clause === undefined ? [] : [clause])]);
  }
  return [...clauses]
    .map(([document, list]) => (list.length === 0 ? document : `${document}, ${listed(list)}`))
    .join('; ');
};

/** What the checks say about an element, with what can be done about it. */
export function FindingBoxes({ about }: { readonly about: ElementRef }) {
  const { findings } = useChecks();
  const found = findingsAbout(findings, about);
  if (found.length === 0) return null;
  return (
    <section aria-label="Findings" className="flex flex-col gap-8">
      {found.map((finding, at) => (
        // Each proposal of a fix costs a run of all checks, so only the first finding is open from the start.
        <FindingBox key={finding.key} finding={finding} open={at === 0} />
      ))}
    </section>
  );
}

/** One finding: words, sentence, why, sources, and its fixes with what each will do. */
export function FindingBox({ finding, open }: { readonly finding: Finding; readonly open: boolean }) {
  const { waiverOf } = useChecks();
  const waiver = waiverOf(finding.key);
  const [shown, setShown] = useState(open && waiver === undefined);
  const { severity, words } = finding;
  return (
    <article
      className={classNames(
        'border bg-field px-9 py-8',
        waiver === undefined ? `border-l-5 ${edges[severity]}` : 'border-dashed border-ink-3',
      )}
    >
      <h3>
        <button
          type="button"
          aria-expanded={shown}
          onClick={() => setShown(!shown)}
          className={classNames(
            'flex w-full items-center gap-6 text-left text-value font-semibold',
            waiver === undefined ? inks[severity] : 'text-ink-3',
          )}
        >
          <SeverityShape severity={severity} {...(waiver === undefined ? {} : { ink: 'text-ink-3' })} />
          <span className="min-w-0 flex-1">
            {severityWords[severity]}: {words}
            {waiver !== undefined && ' (waived)'}
          </span>
          <Icon name={shown ? 'chevron-up' : 'chevron-down'} size={14} />
        </button>
      </h3>
      {shown && <FindingBody finding={finding} />}
    </article>
  );
}

function FindingBody({ finding }: { readonly finding: Finding }) {
  const { onShowFinding } = useInspectorTools();
  const waiver = useChecks().waiverOf(finding.key);
  const { severityReason, sentence, why, sources } = finding;
  return (
    <div className="mt-6 flex flex-col gap-6 text-base text-ink">
      <p className="font-medium break-words">{sentence}.</p>
      {waiver !== undefined && (
        <p className="break-words whitespace-pre-line">
          Waived{waiver.madeBy === null ? '' : ` by ${waiver.madeBy}`} until {dayInWords(waiver.expiresOn)}:{' '}
          {waiver.reason}
        </p>
      )}
      <p>{why}</p>
      {severityReason !== undefined && <p className="text-ink-2">{severityReason}</p>}
      <p className="text-note text-ink-2">{sourcesLine(sources)}</p>
      <FixButtons finding={finding} />
      {onShowFinding !== undefined && (
        <TextButton onClick={() => onShowFinding(finding.key)}>Show in the list of findings</TextButton>
      )}
    </div>
  );
}

function FixButtons({ finding }: { readonly finding: Finding }) {
  const editable = useEditable();
  const { behind } = useChecks();
  const fixes = useFixes(editable ? finding : undefined);
  const commit = useCommit();
  const id = useId();
  return (
    <>
      {fixes.map((fix, at) => (
        <div key={fix.id} className="mt-2 flex flex-col gap-4">
          <p id={`${id}-${fix.id}`} className="text-note text-ink-2">
            {fix.sentence}
          </p>
          <Button
            kind={at === 0 ? 'primary' : 'secondary'}
            className="h-auto! min-h-30 w-full py-4 whitespace-normal!"
            // The fixes are for the design that was checked; a newer one is being checked this moment.
            disabled={behind}
            aria-describedby={`${id}-${fix.id}`}
            onClick={() => commit(fix.label, fix.patch)}
          >
            {fix.label}
          </Button>
        </div>
      ))}
    </>
  );
}
