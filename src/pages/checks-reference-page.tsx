import { useEffect, useMemo } from 'react';
import { useLocation } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { SearchField } from '../components/search-field.tsx';
import { SegmentedChoice } from '../components/segmented-choice.tsx';
import { severities, severityWords } from '../components/severity-mark.tsx';
import { ruleReference } from '../engine/rules/rule-reference.ts';
import { MainBar } from '../features/account/main-bar.tsx';
import { filterRules, isSeverity } from '../features/rules-reference/filter-rules.ts';
import { RulesList } from '../features/rules-reference/rules-list.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';

/** /checks?severity=…&q=…#rule: every check of the engine, what it is for and on what it rests. */
export function ChecksReferencePage() {
  usePageTitle('Reference of checks');
  const { valueOf, change } = useSearchValues();
  const { hash } = useLocation();
  const rules = useMemo(() => ruleReference(), []);
  const asked = valueOf('severity');
  const severity = isSeverity(asked) ? asked : null;
  const words = valueOf('q');
  const shown = filterRules(rules, { severity, words });
  useEffect(() => {
    // The browser looked for the target before the list was there.
    if (hash !== '') document.getElementById(hash.slice(1))?.scrollIntoView({ block: 'start' });
  }, [hash]);
  return (
    <>
      <MainBar />
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-10 py-12">
          <h1 className="text-page font-semibold">Reference of checks</h1>
          <SegmentedChoice
            label="Checks by severity"
            value={severity ?? 'all'}
            options={[
              { value: 'all', label: `All ${rules.length}` },
              ...severities.map((each) => ({
                value: each,
                label: `${severityWords[each]} ${rules.filter((rule) => rule.severity === each).length}`,
              })),
            ]}
            onChange={(value) => change({ severity: value === 'all' ? '' : value })}
          />
          <SearchField
            label="Word, standard or check"
            value={words}
            onChange={(q) => change({ q })}
            className="ml-auto w-276 max-sm:w-full"
          />
        </div>
        <p className="mb-14 max-w-720 text-base text-ink-2">
          These run on a design as it is edited. Blocking: it does not work, or endangers the network.
          Degrading: it works worse than it could. Advisory: a risk, or a fact that is missing.
        </p>
        {shown.length > 0 ? (
          <RulesList rules={shown} />
        ) : (
          <EmptyState
            title="No check speaks of this"
            action={<Button onClick={() => change({ severity: '', q: '' })}>Show all checks</Button>}
          >
            Try another word, or a standard such as RFC 7348.
          </EmptyState>
        )}
      </main>
    </>
  );
}
