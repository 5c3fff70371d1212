import { useEffect, useState } from 'react';
import type { Finding } from '../../engine/rules/finding.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { safeFixes, type SafeFixProgress } from './safe-fixes.ts';

const nothingYet: SafeFixProgress = { fixes: [], left: [], patch: {}, tried: 0 };

/** Safe changes for these findings of the checked design, worked out bit by bit; begins anew when the design changes. */
export function useSafeFixes(findings: readonly Finding[]): SafeFixProgress & { readonly done: boolean } {
  const { document, numbering } = useChecks();
  const [known, setKnown] = useState<{
    readonly of: readonly unknown[];
    readonly progress: SafeFixProgress;
  }>();
  useEffect(() => {
    let handle: ReturnType<typeof setTimeout> | undefined;
    const work = safeFixes(document, findings, numbering);
    const step = (): void => {
      const next = work.next();
      if (next.done === true) return;
      setKnown({ of: [document, findings], progress: next.value });
      handle = setTimeout(step, 0);
    };
    handle = setTimeout(step, 0);
    return () => clearTimeout(handle);
  }, [document, findings, numbering]);
  const isCurrent = known?.of[0] === document && known.of[1] === findings;
  const progress = isCurrent ? known.progress : nothingYet;
  return { ...progress, done: progress.tried === findings.length };
}
