import { useEffect, useRef, useState, type KeyboardEvent, type ReactNode } from 'react';
import type { FindingItem } from './finding-item.ts';
import { FindingRow } from './finding-row.tsx';
import type { CommentingTools } from './commenting-tools.ts';
import type { WaivingTools } from './waiving-tools.ts';

interface FindingsListProps {
  /** In the order and with the numbers of the sheet's balloons. */
  readonly findings: readonly FindingItem[];
  readonly selectedKey: string | null;
  readonly onSelect: (key: string) => void;
  /** The reader may change the design; without, fixes are told and not offered. */
  readonly canFix: boolean;
  readonly onApplyFix: (findingKey: string, fixId: string) => void;
  /** While a fix is pointed at or focused; null when it no longer is. */
  readonly onPreviewFix?: (preview: { readonly findingKey: string; readonly fixId: string } | null) => void;
  /** Given to readers who may waive. */
  readonly waiving?: WaivingTools;
  /** Given to readers who may comment. */
  readonly commenting?: CommentingTools | undefined;
  /** Where a finding is seen on the sheet, for lists that stand elsewhere. */
  readonly sheetPathOf?: (key: string) => string;
  /** Names the list where there are several. */
  readonly label?: string;
  /** Said while there is nothing wrong, such as how many checks ran. */
  readonly empty: ReactNode;
}

/**
 * What is wrong with a design, a row each. Arrow keys go from row to row and select, Enter opens a row's details, Tab
 * leads to its fixes.
 */
export function FindingsList({
  findings,
  selectedKey,
  onSelect,
  canFix,
  onApplyFix,
  onPreviewFix,
  waiving,
  commenting,
  sheetPathOf,
  label = 'Findings',
  empty,
}: FindingsListProps) {
  const list = useRef<HTMLUListElement>(null);
  const [openKey, setOpenKey] = useState<string | null>(null);
  useEffect(() => {
    // Who comes by a link to a finding has not chosen it here, and it may stand far down.
    list.current?.querySelector('[aria-current]')?.scrollIntoView({ block: 'nearest' });
  }, []);
  if (findings.length === 0) return <div className="px-14 py-16 text-base text-ink-2">{empty}</div>;

  const selectedAt = findings.findIndex(({ key }) => key === selectedKey);
  // The one row that Tab stops at.
  const stopAt = Math.max(selectedAt, 0);
  const goTo = (at: number): void => {
    const finding = findings[at];
    if (finding === undefined) return;
    onSelect(finding.key);
    list.current?.querySelectorAll<HTMLElement>('[data-finding]')[at]?.focus();
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    const row = event.target instanceof Element ? event.target.closest('[data-finding]') : null;
    if (row === null) return;
    const at = findings.findIndex(({ key }) => key === row.getAttribute('data-finding'));
    const steps: Readonly<Record<string, number>> = {
      ArrowDown: Math.min(at + 1, findings.length - 1),
      ArrowUp: Math.max(at - 1, 0),
      Home: 0,
      End: findings.length - 1,
    };
    const next = steps[event.key];
    if (next === undefined) return;
    event.preventDefault();
    goTo(next);
  };
  const press = (key: string): void => {
    setOpenKey(openKey === key ? null : key);
    if (key !== selectedKey) onSelect(key);
  };
  return (
    // The rows' buttons take the keys; the list only hears of them.
    // eslint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
    <ul ref={list} aria-label={label} onKeyDown={onKeyDown}>
      {findings.map((finding, at) => (
        <FindingRow
          key={finding.key}
          finding={finding}
          selected={finding.key === selectedKey}
          open={finding.key === openKey}
          tabStop={at === stopAt}
          canFix={canFix}
          waiving={waiving}
          commenting={commenting}
          sheetPath={sheetPathOf?.(finding.key)}
          onPress={() => press(finding.key)}
          onApplyFix={(fixId) => onApplyFix(finding.key, fixId)}
          onPreviewFix={(fixId) => onPreviewFix?.(fixId === null ? null : { findingKey: finding.key, fixId })}
        />
      ))}
    </ul>
  );
}
