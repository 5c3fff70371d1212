import { useEffect, useMemo, useRef } from 'react';
import type { ElementRef } from '../../engine/model/design.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import type { OutlineViewStore } from './outline-view.ts';

// A held key comes every 30 ms or so: the sheet and the inspector follow once it rests.
const restMs = 50;

export interface SelectionAhead {
  /** Shows a selection in the rows now, and everywhere else once the keys rest. */
  readonly select: (refs: readonly ElementRef[]) => void;
  /** Selects everywhere what the rows show as selected: before anything is done to it. */
  readonly catchUp: () => void;
  /** Whether the rows show a selection of the sheet already. */
  readonly isKnown: (selection: readonly ElementRef[]) => boolean;
  /** Takes a selection that was made elsewhere in place of what is ahead. */
  readonly takeOver: (selection: readonly ElementRef[]) => void;
}

/** Lets the outline's rows be selected ahead of the sheet, whose redrawing of a large design would hold up the keys. */
export const useSelectionAhead = (view: OutlineViewStore): SelectionAhead => {
  const open = useOpenDesign();
  const resting = useRef<ReturnType<typeof setTimeout>>(undefined);
  /** The selection that the rows show already. */
  const known = useRef<readonly ElementRef[]>([]);
  const tools = useMemo((): SelectionAhead => {
    const catchUp = (): void => {
      clearTimeout(resting.current);
      const { ahead } = view.getState();
      if (ahead === undefined) return;
      known.current = ahead;
      open.select(ahead);
      view.setState({ ahead: undefined });
    };
    return {
      select: (refs) => {
        clearTimeout(resting.current);
        view.setState({ ahead: refs });
        resting.current = setTimeout(catchUp, restMs);
      },
      catchUp,
      isKnown: (selection) => selection === known.current,
      takeOver: (selection) => {
        clearTimeout(resting.current);
        known.current = selection;
        view.setState({ ahead: undefined });
      },
    };
  }, [open, view]);
  useEffect(() => tools.catchUp, [tools]);
  return tools;
};
