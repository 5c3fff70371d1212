import { useEffect } from 'react';
import { commandFor } from '../../canvas/commands/shortcuts.ts';
import { showToast } from '../../components/toast.tsx';
import { takesKeys } from '../../lib/takes-keys.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';

/** Undo and redo by key on every page of a design, while nobody types. */
export function useTravelKeys(): void {
  const open = useOpenDesign();
  useEffect(() => {
    const travel = (way: 'undo' | 'redo'): void => {
      const label = open[way]();
      if (label !== undefined)
        showToast({ tone: 'done', text: `${way === 'undo' ? 'Undone' : 'Done again'}: ${label}` });
    };
    const onKeyDown = (event: KeyboardEvent): void => {
      if (takesKeys(event.target) || event.defaultPrevented) return;
      const way = commandFor(event);
      if ((way !== 'undo' && way !== 'redo') || !open.store.getState().editable) return;
      event.preventDefault();
      travel(way);
    };
    document.addEventListener('keydown', onKeyDown);
    return () => document.removeEventListener('keydown', onKeyDown);
  }, [open]);
}
