import type { ReactNode } from 'react';
import type { DeskTab } from '../canvas/desk-tab.ts';
import { useDesk } from '../canvas/desk-state.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';

interface SheetSideProps {
  readonly active: DeskTab;
  readonly inspector: ReactNode;
}

/** What stands beside the sheet: what is selected, else what the open tab has to say there. */
export function SheetSide({ active: { label, side }, inspector }: SheetSideProps) {
  const inspecting = useDesk((state) => state.inspecting);
  const anySelected = useOpenState((state) => state.selection.length > 0);
  if (!inspecting) return null;
  if (side === undefined || anySelected) return inspector;
  return (
    <aside
      aria-label={label}
      className="h-full w-304 shrink-0 overflow-x-hidden overflow-y-auto border-l-1.5 border-ink bg-panel"
    >
      {side}
    </aside>
  );
}
