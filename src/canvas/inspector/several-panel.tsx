import { Button } from '../../components/button.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { Icon } from '../../components/icon.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { canLock, isLocked, setLocked } from '../../workspace/operations/move-parts.ts';
import { kindOf } from '../../workspace/operations/name-of.ts';
import { removeElements } from '../../workspace/operations/remove-parts.ts';
import { ElementList } from './element-link.tsx';
import { usePerform, useStanding } from './panel-head.tsx';
import { Section } from './section.tsx';
import { useEditable } from './use-field.ts';

/** Several elements at once: how many of each kind, and what can be done with all of them. */
export function SeveralPanel({ of: refs }: { readonly of: readonly ElementRef[] }) {
  const design = useOpenState((state) => state.document);
  const editable = useEditable();
  const standing = useStanding()(design);
  const run = usePerform();
  const counts = new Map<string, number>();
  for (const ref of refs) counts.set(kindOf(design, ref), (counts.get(kindOf(design, ref)) ?? 0) + 1);
  const lockable = refs.filter((ref) => canLock(design, standing, ref));
  const allLocked = lockable.length > 0 && lockable.every((ref) => isLocked(design, ref));
  return (
    <>
      <header>
        <p className="text-note text-ink-2">Selected</p>
        <h2 className="text-title text-ink">{refs.length} elements</h2>
      </header>
      <CellGrid columns={2}>
        {[...counts].map(([kind, count]) => (
          <ReadCell key={kind} label={kind}>
            {count}
          </ReadCell>
        ))}
      </CellGrid>
      {editable && (
        <div className="flex flex-wrap gap-8">
          {lockable.length > 0 && (
            <Button
              icon={<Icon name={allLocked ? 'unlock' : 'lock'} />}
              onClick={() => run(setLocked(design, standing, lockable, !allLocked))}
            >
              {allLocked ? 'Free their places' : 'Lock their places'}
            </Button>
          )}
          <Button kind="danger" onClick={() => run(removeElements(design, refs))}>
            Remove {refs.length} elements
          </Button>
        </div>
      )}
      <Section title="One by one">
        <ElementList of={refs} empty="" detail={(ref) => kindOf(design, ref)} />
      </Section>
    </>
  );
}
