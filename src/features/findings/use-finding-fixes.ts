import { useEffect, useState } from 'react';
import type { Finding, Fix } from '../../engine/rules/finding.ts';
import { fixesFor } from '../../engine/rules/fixes-for.ts';
import { useChecks } from '../../workspace/checks-context.tsx';

/**
 * The tried cures of all findings, or of these, worked out one finding at a time while the browser has nothing better to
 * do: each costs a run of the checks. A finding that is not in the map has not been looked at yet. `only` has to stay the
 * same list while it says the same.
 */
export function useFindingFixes(only?: readonly Finding[]): ReadonlyMap<string, readonly Fix[]> {
  const { findings: all, document, numbering } = useChecks();
  const findings = only ?? all;
  const [known, setKnown] = useState<{
    readonly of: object;
    readonly fixes: ReadonlyMap<string, readonly Fix[]>;
  }>({ of: document, fixes: new Map() });
  useEffect(() => {
    let stopped = false;
    let handle: ReturnType<typeof setTimeout> | undefined;
    const fixes = new Map<string, readonly Fix[]>();
    const step = (at: number): void => {
      const finding = findings[at];
      if (stopped || finding === undefined) return;
      fixes.set(finding.key, fixesFor(document, finding, numbering));
      setKnown({ of: document, fixes: new Map(fixes) });
      handle = setTimeout(() => step(at + 1), 0);
    };
    handle = setTimeout(() => step(0), 0);
    return () => {
      stopped = true;
      clearTimeout(handle);
    };
  }, [findings, document, numbering]);
  return known.of === document ? known.fixes : new Map();
}
