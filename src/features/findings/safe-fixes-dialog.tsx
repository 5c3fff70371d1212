import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CheckBox } from '../../components/check-box.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Finding } from '../../engine/rules/finding.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { FindingNumber } from './finding-number.tsx';
import { useSafeFixes } from './use-safe-fixes.ts';

interface SafeFixesDialogProps {
  /** Open ones; stays the same list while the dialog is open. */
  readonly findings: readonly Finding[];
  readonly onClose: () => void;
}

const counted = (count: number, word: string): string => `${count} ${word}${count === 1 ? '' : 's'}`;

/** Shows what each safe change will do, and makes them all in one step. */
export function SafeFixesDialog({ findings: given, onClose }: SafeFixesDialogProps) {
  const open = useOpenDesign();
  const { findings: all, behind } = useChecks();
  const [offered, setOffered] = useState(given);
  const { fixes, left, patch, tried, done } = useSafeFixes(offered);
  const skipped = given.filter((finding) => !offered.includes(finding));
  const numberOf = (finding: Finding): number => all.findIndex(({ key }) => key === finding.key) + 1;
  const apply = (): void => {
    const label = fixes.length === 1 ? '1 safe fix' : `${fixes.length} safe fixes`;
    const committed = open.commit(label, patch);
    if (committed.ok)
      showToast({
        tone: 'done',
        text: `${label} applied in one step.`,
        action: { label: 'Undo', onSelect: () => open.undo() },
      });
    else
      showToast({
        tone: 'failed',
        text: committed.problems.map((problem) => `${problem.path}: ${problem.expected}`).join('; '),
      });
    onClose();
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={apply}
      title="Apply safe fixes"
      description="Each was tried on this design: its finding goes, and no other comes, of any severity. All of them make one step that can be undone."
      widthPx={680}
      footer={
        <>
          <p role="status" className="mr-auto self-center text-base text-ink-2">
            {done
              ? left.length > 0 && `${counted(left.length, 'finding')} need a decision of yours.`
              : `Trying fixes: ${tried} of ${counted(offered.length, 'finding')}`}
          </p>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" disabled={!done || behind || fixes.length === 0}>
            {fixes.length === 1 ? 'Apply 1 fix' : `Apply ${fixes.length} fixes`}
          </Button>
        </>
      }
    >
      {done && fixes.length === 0 && skipped.length === 0 && (
        <p className="text-base text-ink-2">
          None of these findings has a fix that is sure to do no harm elsewhere. Open a finding to see what
          would cure it, and decide there.
        </p>
      )}
      <ul aria-label="What will be done" className="flex flex-col">
        {fixes.map(({ finding, fix, alsoCures }) => (
          <li key={finding.key} className="flex items-start gap-10 border-b border-rule-2 py-8 text-base">
            <CheckBox
              bare
              checked
              aria-label={`Apply the fix for finding ${numberOf(finding)}`}
              onChange={() => setOffered(offered.filter((each) => each !== finding))}
            />
            <FindingNumber finding={{ number: numberOf(finding), severity: finding.severity }} />
            <div className="min-w-0 flex-1">
              <p className="font-medium break-words">{fix.sentence}</p>
              <p className="break-words text-ink-2">
                Cures: {finding.sentence}
                {alsoCures.length > 0 && ` (and ${counted(alsoCures.length, 'other finding')})`}
              </p>
            </div>
          </li>
        ))}
        {skipped.map((finding) => (
          <li key={finding.key} className="flex items-start gap-10 border-b border-rule-2 py-8 text-base">
            <CheckBox
              bare
              checked={false}
              aria-label={`Apply the fix for finding ${numberOf(finding)}`}
              onChange={() => setOffered(given.filter((each) => each === finding || offered.includes(each)))}
            />
            <FindingNumber finding={{ number: numberOf(finding), severity: finding.severity }} />
            <p className="min-w-0 flex-1 break-words text-ink-2">Stays: {finding.sentence}</p>
          </li>
        ))}
      </ul>
    </Dialog>
  );
}
