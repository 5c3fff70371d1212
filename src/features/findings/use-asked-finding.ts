import { useEffect, useRef } from 'react';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';

/** Selects the element of the finding that an address asks for, once; '' asks for none. */
export function useAskedFinding(key: string): void {
  const open = useOpenDesign();
  const { findings } = useChecks();
  const shown = useRef('');
  useEffect(() => {
    const finding = findings.find((candidate) => candidate.key === key);
    if (finding === undefined || shown.current === key) return;
    shown.current = key;
    open.select(finding.elements.slice(0, 1));
  }, [key, findings, open]);
}
