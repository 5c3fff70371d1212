import { useCallback, useMemo } from 'react';
import type { MenuAction } from '../../components/menu.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { sourceText, variedName } from './trace-address.ts';
import { pickedEnd } from './trace-places.ts';
import { questionFields } from './trace-question.ts';

export interface TraceFromHere {
  /** Opens the frame trace with this host or port as its start; nothing happens for what can't be one. */
  readonly traceFromHere: (ref: ElementRef) => void;
  /** The same as an action of an element's menu; none for what can't be a start. */
  readonly actionsOf: (ref: ElementRef) => readonly MenuAction[];
}

/** Lets other parts of the desk start a trace where somebody points. */
export function useTraceFromHere(): TraceFromHere {
  const open = useOpenDesign();
  const { change } = useSearchValues();
  const traceFromHere = useCallback(
    (ref: ElementRef): void => {
      const picked = pickedEnd(open.store.getState().document, ref, 'from');
      if (!picked.ok) return;
      open.select([]);
      const blank = questionFields.flatMap((field) => [
        [field, ''],
        [variedName(field), ''],
      ]);
      change({ ...Object.fromEntries(blank), drawer: 'trace', from: sourceText(picked.source) });
    },
    [open, change],
  );
  return useMemo(
    () => ({
      traceFromHere,
      actionsOf: (ref) =>
        pickedEnd(open.store.getState().document, ref, 'from').ok
          ? [{ label: 'Trace a frame from here', onSelect: () => traceFromHere(ref) }]
          : [],
    }),
    [traceFromHere, open],
  );
}
