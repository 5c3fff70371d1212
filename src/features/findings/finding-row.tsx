import { useId } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityMark } from '../../components/severity-mark.tsx';
import { classNames } from '../../lib/class-names.ts';
import type { CommentingTools } from './commenting-tools.ts';
import { FindingDetails } from './finding-details.tsx';
import type { FindingItem } from './finding-item.ts';
import { FindingNumber } from './finding-number.tsx';
import { previewHandlers } from './preview-handlers.ts';
import type { WaivingTools } from './waiving-tools.ts';

interface FindingRowProps {
  readonly finding: FindingItem;
  readonly selected: boolean;
  readonly open: boolean;
  readonly tabStop: boolean;
  readonly canFix: boolean;
  readonly waiving: WaivingTools | undefined;
  readonly commenting: CommentingTools | undefined;
  readonly sheetPath: string | undefined;
  readonly onPress: () => void;
  readonly onApplyFix: (fixId: string) => void;
  readonly onPreviewFix: (fixId: string | null) => void;
}

export function FindingRow({
  finding,
  selected,
  open,
  tabStop,
  canFix,
  waiving,
  commenting,
  sheetPath,
  onPress,
  onApplyFix,
  onPreviewFix,
}: FindingRowProps) {
  const detailsId = useId();
  const firstFix = finding.fixes?.[0];
  const isWaived = finding.waiver !== undefined;
  return (
    <li
      aria-current={selected || undefined}
      className={classNames(
        'border-b border-rule-2 last:border-b-0',
        selected && 'bg-blue-wash shadow-[inset_4px_0_0_var(--blue)]',
      )}
    >
      <div className="flex min-h-29 items-stretch">
        <button
          type="button"
          data-finding={finding.key}
          tabIndex={tabStop ? 0 : -1}
          aria-expanded={open}
          aria-controls={open ? detailsId : undefined}
          onClick={onPress}
          className={classNames(
            'grid min-w-0 flex-1 grid-cols-[22px_84px_minmax(0,1fr)_minmax(110px,0.32fr)_66px_13px] items-center gap-x-12 py-4 pr-10 pl-12 text-left text-base -outline-offset-2',
            'max-md:grid-cols-[24px_86px_minmax(0,1fr)_16px] max-md:py-8',
            !selected && 'hover:bg-hover',
          )}
        >
          <FindingNumber finding={finding} /> <SeverityMark severity={finding.severity} muted={isWaived} />{' '}
          <span
            className={classNames(
              'max-md:order-last max-md:col-span-4',
              isWaived ? 'text-ink-2' : 'font-medium',
            )}
          >
            {finding.sentence}{' '}
            {isWaived && <span className="text-ink-3">(waived until {finding.waiver?.until})</span>}
          </span>{' '}
          <span className="text-ink-2 max-md:order-last max-md:col-span-4">{finding.elements}</span>{' '}
          <span className="whitespace-nowrap text-ink-2">
            {finding.zone === undefined ? null : `at ${finding.zone}`}
          </span>
          <Icon name={open ? 'chevron-up' : 'chevron-down'} size={13} />
        </button>
        {canFix && (
          <div className="flex w-198 shrink-0 items-center py-3 pr-12 max-md:hidden">
            {!isWaived && firstFix !== undefined && (
              <Button
                kind="accent"
                small
                className="h-auto! min-h-24 w-full py-2 whitespace-normal!"
                title={firstFix.sentence}
                onClick={() => onApplyFix(firstFix.id)}
                {...previewHandlers(firstFix, onPreviewFix)}
              >
                {/* Never cut: an address or a number that is half shown is worse than a second line. */}
                <span className="min-w-0 break-words">{firstFix.label}</span>
              </Button>
            )}
          </div>
        )}
      </div>
      {open && (
        <FindingDetails
          id={detailsId}
          finding={finding}
          canFix={canFix}
          waiving={waiving}
          commenting={commenting}
          sheetPath={sheetPath}
          onApplyFix={onApplyFix}
          onPreviewFix={onPreviewFix}
        />
      )}
    </li>
  );
}
