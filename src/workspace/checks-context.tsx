import { createContext, use, useDeferredValue, useMemo, type ReactNode } from 'react';
import type { Design } from '../engine/model/design.ts';
import type { Finding, Fix } from '../engine/rules/finding.ts';
import { fixesFor } from '../engine/rules/fixes-for.ts';
import { runRules } from '../engine/rules/run-rules.ts';
import { useOpenState } from './open-design-context.tsx';

export interface Checks {
  /** Most severe first; a finding's number is its place from 1. */
  readonly findings: readonly Finding[];
  /** The document that they are about. */
  readonly document: Design;
  /** True while a newer document waits to be checked. */
  readonly behind: boolean;
}

const ChecksContext = createContext<Checks | null>(null);

/** Runs the checks on the open design after every change, without holding up what the person is doing. */
export function ChecksProvider({ children }: { readonly children: ReactNode }) {
  const current = useOpenState((state) => state.document);
  const checked = useDeferredValue(current);
  const findings = useMemo(() => runRules(checked), [checked]);
  const checks = useMemo(
    () => ({ findings, document: checked, behind: checked !== current }),
    [findings, checked, current],
  );
  return <ChecksContext value={checks}>{children}</ChecksContext>;
}

export function useChecks(): Checks {
  const checks = use(ChecksContext);
  if (checks === null) throw new Error('No checks run here.');
  return checks;
}

/** The tried cures of one finding; each costs a run of all rules, so ask only for what is shown. */
export function useFixes(finding: Finding | undefined): readonly Fix[] {
  const { document } = useChecks();
  return useMemo(() => (finding === undefined ? [] : fixesFor(document, finding)), [document, finding]);
}
