import { useCallback } from 'react';
import type { MenuGroup } from '../../components/menu.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { standingOf } from '../flow-changes-to-patch.ts';
import { useDrawn } from '../geometry-context.tsx';
import { elementMenu } from './element-menu.ts';
import { useExtraActions } from './extra-actions.ts';
import { useElementActions } from './use-element-actions.ts';

/** The menu of an element for what stands beside the sheet: all that its menu on the sheet holds. */
export const useElementMenu = (): ((ref: ElementRef) => readonly MenuGroup[]) => {
  const open = useOpenDesign();
  const { settled } = useDrawn();
  const actions = useElementActions();
  const extra = useExtraActions();
  return useCallback(
    (ref) => {
      const { document, selection, editable } = open.store.getState();
      return elementMenu(
        { ref },
        { design: document, standing: standingOf(settled), selection, editable, extra },
        actions,
      );
    },
    [open, settled, actions, extra],
  );
};
