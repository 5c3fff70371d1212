import { useCallback, useMemo, useState } from 'react';
import { Link } from 'react-router-dom';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { Button } from '../../components/button.tsx';
import { copyCsv } from '../../components/copy-csv.ts';
import { EmptyState } from '../../components/empty-state.tsx';
import { SearchField } from '../../components/search-field.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { severities, severityWords, SeverityShape } from '../../components/severity-mark.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Finding, Fix } from '../../engine/rules/finding.ts';
import { rules } from '../../engine/rules/index.ts';
import { countBySeverity } from '../../engine/rules/run-rules.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { designPath } from '../../lib/workspace-path.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { ChecksFilter } from './checks-filter.tsx';
import { filterFindings, filterFrom } from './filter-findings.ts';
import { findingItem } from './finding-words.ts';
import { findingsCsv } from './findings-csv.ts';
import { FindingsList } from './findings-list.tsx';
import { groupFindings, groupings, type FindingGroup, type Grouping } from './group-findings.ts';
import { LapsedWaivers } from './lapsed-waivers.tsx';
import { SafeFixesDialog } from './safe-fixes-dialog.tsx';
import { useFindingFixes } from './use-finding-fixes.ts';
import { useWaiving } from './use-waiving.tsx';

// Each row shown has its fixes worked out, which costs runs of all checks.
const rowsAtOnce = 50;

const titles = new Map(rules.map(({ id, title }) => [id, title]));
const titleOfRule = (rule: string): string => titles.get(rule) ?? rule;
const noFilter = { severity: '', rule: '', site: '', segment: '', waivers: '', q: '' };

interface ChecksDeskProps {
  /** Begins a thread about a finding, for readers who may comment. */
  readonly onComment?: ((findingKey: string) => void) | undefined;
  /** Sends a cure to who edits the design, for readers who can't apply it themselves. */
  readonly onSuggestFix?: ((findingKey: string, fix: Fix) => void) | undefined;
}

/** All findings of the open design: filtered, grouped, explained, cured, waived and talked about. */
export function ChecksDesk({ onComment, onSuggestFix }: ChecksDeskProps) {
  const { findings, openFindings, waived, waiverOf, document } = useChecks();
  const { settled } = useDrawn();
  const { designId } = useDesignPlace();
  const editable = useOpenState((state) => state.editable);
  const open = useOpenDesign();
  const { valueOf, change } = useSearchValues();
  const waiving = useWaiving();
  const [selectedKey, setSelectedKey] = useState<string | null>(null);
  const [fixing, setFixing] = useState<readonly Finding[]>();
  const [pages, setPages] = useState(1);

  const filter = filterFrom(valueOf);
  const grouping: Grouping = groupings.find((each) => each === valueOf('group')) ?? 'severity';
  const found = filterFindings(findings, filter, document, (key) => waiverOf(key) !== undefined);
  const groups = groupFindings(found, grouping, document, titleOfRule);
  const shownGroups = firstRows(groups, pages * rowsAtOnce);
  const shown = shownGroups.flatMap((group) => group.findings);
  const shownKeys = shown.map(({ key }) => key).join('\n');
  // The same list as long as it says the same: fixes are worked out for it.
  // eslint-disable-next-line react-hooks/exhaustive-deps
  const shownFindings = useMemo(() => shown, [findings, shownKeys]);
  const fixes = useFindingFixes(shownFindings);
  const numbers = useMemo(() => new Map(findings.map(({ key }, index) => [key, index + 1])), [findings]);
  const itemOf = (finding: Finding) =>
    findingItem(
      finding,
      numbers.get(finding.key) ?? 0,
      document,
      settled,
      fixes.get(finding.key),
      waiverOf(finding.key),
    );
  const apply = useCallback(
    (findingKey: string, fixId: string) => {
      const fix = fixes.get(findingKey)?.find(({ id }) => id === fixId);
      if (fix === undefined) return;
      const done = open.commit(fix.label, fix.patch);
      if (done.ok)
        showToast({
          tone: 'done',
          text: fix.sentence,
          action: { label: 'Undo', onSelect: () => open.undo() },
        });
      else
        showToast({
          tone: 'failed',
          text: done.problems.map((problem) => `${problem.path}: ${problem.expected}`).join('; '),
        });
    },
    [fixes, open],
  );
  const commenting = onComment && {
    onComment,
    onSuggest:
      onSuggestFix &&
      ((key: string, fixId: string): void => {
        const fix = fixes.get(key)?.find(({ id }) => id === fixId);
        if (fix !== undefined) onSuggestFix(key, fix);
      }),
  };
  const counts = countBySeverity(findings);
  const foundOpen = found.filter(({ key }) => waiverOf(key) === undefined);
  const rulesAsked = rules.filter(
    ({ id }) => id === filter.rule || findings.some((finding) => finding.rule === id),
  );

  return (
    <>
      <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 py-12">
        <h1 className="text-page font-semibold">Checks</h1>
        <SegmentedChoice
          label="Findings by severity"
          value={filter.severity === '' ? 'all' : filter.severity}
          options={[
            { value: 'all', label: `All ${findings.length}` },
            ...severities.map((each) => ({ value: each, label: `${severityWords[each]} ${counts[each]}` })),
          ]}
          onChange={(value) => change({ severity: value === 'all' ? '' : value })}
        />
        <SearchField
          label="Word, element or standard"
          value={filter.words}
          onChange={(q) => change({ q })}
          className="w-240 max-sm:w-full"
        />
        <div className="ml-auto flex flex-wrap gap-8 max-sm:ml-0">
          <Button
            disabled={found.length === 0}
            onClick={() =>
              void copyCsv(`${document.meta.title} findings`, findingsCsv(found.map(itemOf)), found.length)
            }
          >
            Copy CSV
          </Button>
          {editable && (
            <Button kind="primary" disabled={foundOpen.length === 0} onClick={() => setFixing(foundOpen)}>
              Safe fixes…
            </Button>
          )}
        </div>
      </div>
      {findings.length > 0 && (
        <ChecksFilter
          filter={filter}
          grouping={grouping}
          change={change}
          design={document}
          rules={rulesAsked}
        />
      )}
      <p role="status" className="mb-10 text-base text-ink-2">
        {statusWords(found.length, findings.length, waived.covered.length, openFindings.length)}
      </p>
      {shownGroups.map((group) => (
        <section
          key={group.key}
          aria-label={group.title}
          className="mb-16 border border-rule-strong bg-field"
        >
          <GroupHead
            group={group}
            grouping={grouping}
            total={groups.find(({ key }) => key === group.key)?.findings.length ?? 0}
          />
          <FindingsList
            label={group.title}
            findings={group.findings.map(itemOf)}
            selectedKey={selectedKey}
            onSelect={setSelectedKey}
            canFix={editable}
            onApplyFix={apply}
            waiving={waiving.tools}
            commenting={commenting}
            sheetPathOf={(key) => `${designPath(designId)}?finding=${encodeURIComponent(key)}`}
            empty={null}
          />
        </section>
      ))}
      {shown.length < found.length && (
        <div className="mb-16 flex flex-wrap items-center gap-12 text-base text-ink-2">
          <Button onClick={() => setPages(pages + 1)}>
            Show the next {Math.min(rowsAtOnce, found.length - shown.length)}
          </Button>
          {shown.length} of {found.length} shown
        </div>
      )}
      {found.length === 0 && findings.length > 0 && (
        <EmptyState
          title="No finding fits"
          action={<Button onClick={() => change(noFilter)}>Show all {findings.length}</Button>}
        >
          Findings are there, but none that fits all of what is asked.
        </EmptyState>
      )}
      {findings.length === 0 && <NothingFound isEmpty={Object.keys(document.devices).length === 0} />}
      <LapsedWaivers lapsed={waived.lapsed} waiving={waiving.tools} />
      {waiving.dialog}
      {fixing !== undefined && <SafeFixesDialog findings={fixing} onClose={() => setFixing(undefined)} />}
    </>
  );
}

/** As many rows as are wanted, from the first group on. */
function firstRows(groups: readonly FindingGroup[], rows: number): readonly FindingGroup[] {
  let left = rows;
  return groups.flatMap((group) => {
    const findings = group.findings.slice(0, Math.max(left, 0));
    left -= findings.length;
    return findings.length === 0 ? [] : [{ ...group, findings }];
  });
}

function statusWords(found: number, all: number, waived: number, open: number): string {
  if (all === 0) return '';
  const waivedWords = waived === 0 ? '' : `, ${waived} waived`;
  const whole = `${open} open${waivedWords}`;
  return found === all ? `${whole}.` : `${found} shown of ${all}: ${whole}.`;
}

function GroupHead({
  group,
  grouping,
  total,
}: {
  readonly group: FindingGroup;
  readonly grouping: Grouping;
  readonly total: number;
}) {
  const severity = severities.find((each) => each === group.key);
  return (
    <header className="flex min-h-30 flex-wrap items-center gap-x-10 border-b border-rule-strong bg-raise px-12 py-4">
      {grouping === 'severity' && severity !== undefined && <SeverityShape severity={severity} />}
      <h2 className="text-section font-semibold">{group.title}</h2>
      {grouping === 'element' && <span className="text-base text-ink-2">{group.detail}</span>}
      {grouping === 'rule' && (
        <Link to={`/checks#${group.key}`} className="text-base text-ink-2 hover:underline">
          {group.detail}
        </Link>
      )}
      <span className="ml-auto text-base text-ink-2">{total}</span>
    </header>
  );
}

/** What stands here while there is nothing wrong. */
function NothingFound({ isEmpty }: { readonly isEmpty: boolean }) {
  const reference = (
    <Link to="/checks" className="text-blue hover:underline">
      all {rules.length} checks
    </Link>
  );
  return isEmpty ? (
    <EmptyState title="There is nothing to check yet">
      Draw sites, devices and tunnels on the sheet. With every change {reference} run, and what they find
      stands here: what is wrong, why it matters, what would be seen on site, and what would cure it.
    </EmptyState>
  ) : (
    <EmptyState title={`All ${rules.length} checks pass`}>
      Nothing is wrong that {reference} know of. They run again with every change. What they can’t know, such
      as cabling as built, the acceptance tests will show.
    </EmptyState>
  );
}
