import { createContext, use, useDeferredValue, useMemo, type ReactNode } from 'react';
import type { Waiver } from '../contract/waivers.ts';
import type { Design } from '../engine/model/design.ts';
import type { NumberingContext } from '../engine/numbering/numbering-context.ts';
import { noNumberingContext } from '../engine/numbering/numbering-context.ts';
import type { Finding, Fix } from '../engine/rules/finding.ts';
import { fixesFor } from '../engine/rules/fixes-for.ts';
import { runRules } from '../engine/rules/run-rules.ts';
import { applyWaivers, type Waived } from '../engine/rules/waived.ts';
import { useOpenState } from './open-design-context.tsx';

export interface Checks {
  /** All of them, the waived too, most severe first; a finding's number is its place from 1. */
  readonly findings: readonly Finding[];
  /** Those that no waiver covers: what counts. */
  readonly openFindings: readonly Finding[];
  readonly waived: Waived<Waiver>;
  /** The waiver that covers a finding today. */
  readonly waiverOf: (findingKey: string) => Waiver | undefined;
  /** The document that they are about. */
  readonly document: Design;
  /** Pools and other designs' numbers: for whatever runs the checks or gives numbers, the same object throughout. */
  readonly numbering: NumberingContext;
  /** True while a newer document waits to be checked. */
  readonly behind: boolean;
}

const ChecksContext = createContext<Checks | null>(null);
const Numbering = createContext(noNumberingContext);

interface ChecksProviderProps {
  readonly numbering?: NumberingContext;
  readonly waivers?: readonly Waiver[];
  /** Such as 2027-03-31, by UTC: the day that waivers are held against. */
  readonly today?: string;
  readonly children: ReactNode;
}

const noWaivers: readonly Waiver[] = [];

/** Runs the checks on the open design after every change, without holding up what the person is doing. */
export function ChecksProvider({
  numbering = noNumberingContext,
  waivers = noWaivers,
  today = '',
  children,
}: ChecksProviderProps) {
  const current = useOpenState((state) => state.document);
  const checked = useDeferredValue(current);
  const findings = useMemo(() => runRules(checked, numbering), [checked, numbering]);
  const waived = useMemo(() => applyWaivers(findings, waivers, today), [findings, waivers, today]);
  const checks = useMemo((): Checks => {
    const waiverByKey = new Map(waived.covered.map(({ finding, waiver }) => [finding.key, waiver]));
    return {
      findings,
      openFindings: waived.open,
      waived,
      waiverOf: (key) => waiverByKey.get(key),
      document: checked,
      numbering,
      behind: checked !== current,
    };
  }, [findings, waived, checked, current, numbering]);
  return (
    <Numbering value={numbering}>
      <ChecksContext value={checks}>{children}</ChecksContext>
    </Numbering>
  );
}

/** The checks as they were frozen with a revision: what they say stays, whatever they would say today. */
export function FrozenChecksProvider({
  findings,
  waivers,
  children,
}: {
  readonly findings: readonly Finding[];
  /** Those that covered a finding then. */
  readonly waivers: readonly Waiver[];
  readonly children: ReactNode;
}) {
  const document = useOpenState((state) => state.document);
  const checks = useMemo((): Checks => {
    // No day is past for what held when it was frozen.
    const waived = applyWaivers(findings, waivers, '');
    const waiverByKey = new Map(waived.covered.map(({ finding, waiver }) => [finding.key, waiver]));
    return {
      findings,
      openFindings: waived.open,
      waived,
      waiverOf: (key) => waiverByKey.get(key),
      document,
      numbering: noNumberingContext,
      behind: false,
    };
  }, [findings, waivers, document]);
  return <ChecksContext value={checks}>{children}</ChecksContext>;
}

export function useChecks(): Checks {
  const checks = use(ChecksContext);
  if (checks === null) throw new Error('No checks run here.');
  return checks;
}

/** Pools and other designs' numbers, for who gives new ones: unlike the checks the same until the server says otherwise. */
export const useNumbering = (): NumberingContext => use(Numbering);

/** The tried cures of one finding; each costs a run of all rules, so ask only for what is shown. */
export function useFixes(finding: Finding | undefined): readonly Fix[] {
  const { document, numbering } = useChecks();
  return useMemo(
    () => (finding === undefined ? [] : fixesFor(document, finding, numbering)),
    [document, finding, numbering],
  );
}
