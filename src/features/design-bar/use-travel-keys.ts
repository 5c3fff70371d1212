import { useEffect } from 'react';
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
      if (takesKeys(event.target) || event.defaultPrevented || !(event.ctrlKey || event.metaKey)) return;
      const key = event.key.toLowerCase();
      const way = key === 'y' || (key === 'z' && event.shiftKey) ? 'redo' : key === 'z' ? 'undo' : undefined;
      if (way === undefined || !open.store.getState().editable) return;
      event.preventDefault();
      travel(way);
    };
    document.addEventListener('keydown', onKeyDown);
    return () => document.removeEventListener('keydown', onKeyDown);
  }, [open]);
}
