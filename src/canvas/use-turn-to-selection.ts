import { useEffect, useRef } from 'react';
import { anchorOf } from '../drawing/routing/anchors.ts';
import { sheetsOf } from '../drawing/sheets/sheet-numbers.ts';
import type { ElementRef } from '../engine/model/design.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { useDrawn } from './geometry-context.tsx';
import type { View } from './use-view.ts';

/** Turns to the sheet of what is selected, wherever it was selected, and brings it into view there. */
export const useTurnToSelection = (view: View): void => {
  const open = useOpenDesign();
  const first = useOpenState((state) => state.selection[0]);
  const { sheet, settled } = useDrawn();
  const latest = useRef({ sheet, view });
  const sought = useRef<ElementRef>(undefined);
  useEffect(() => {
    latest.current = { sheet, view };
  });
  useEffect(() => {
    if (first === undefined) return;
    const [on, ...others] = sheetsOf(open.store.getState().document, first);
    const { number, turnTo } = latest.current.sheet;
    if (on === undefined || [on, ...others].includes(number)) return;
    sought.current = first;
    turnTo(on);
  }, [first, open]);
  useEffect(() => {
    const ref = sought.current;
    if (ref === undefined) return;
    const { document } = open.store.getState();
    if (!sheetsOf(document, ref).includes(sheet.number)) return;
    sought.current = undefined;
    const at = anchorOf(settled, ref, document);
    if (at !== undefined) latest.current.view.showPoint(at);
  }, [sheet.number, settled, open]);
};
