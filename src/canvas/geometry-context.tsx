import { createContext, use, useMemo, useState, type ReactNode } from 'react';
import type { SheetGeometry } from '../drawing/geometry.ts';
import type { DrawingFacts } from '../drawing/parts/drawing-facts.ts';
import { drawSheet, drawSheetWhileDragging, sheetOfDesign } from '../drawing/sheets/draw-sheet.ts';
import { sheetFacts } from '../drawing/sheets/sheet-facts.ts';
import { tunnelSegments } from '../engine/flood/tunnel-segments.ts';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { applyPatch } from '../engine/model/merge-patch.ts';
import { indexNetwork } from '../engine/network/index-network.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { patchOnSheet } from '../workspace/operations/on-sheet.ts';
import { useSheetNumber, type SheetNumber } from './use-sheet-number.ts';

interface Drawn {
  /** The design as the sheet shows it: with what is being dragged, or what a fix would do. */
  readonly shown: Design;
  readonly geometry: SheetGeometry;
  /** Which sheet it is of how many. */
  readonly sheet: SheetNumber;
  /** What of the shown design lies on it, with what stands in for other sheets. */
  readonly onSheet: Design;
  /** The geometry of the committed design. */
  readonly settled: SheetGeometry;
  readonly facts: DrawingFacts;
  /** The design whose words and numbers are shown: a drag moves things only. */
  readonly said: Design;
  readonly drag: MergePatch | undefined;
  readonly setDrag: (patch: MergePatch | undefined) => void;
  /** Shows the design as a patch would make it, until it is taken away again. */
  readonly preview: MergePatch | undefined;
  readonly setPreview: (patch: MergePatch | undefined) => void;
}

const GeometryContext = createContext<Drawn | null>(null);

/** Routes the open design for everything that shows or points at the sheet. */
export function GeometryProvider({ children }: { readonly children: ReactNode }) {
  const design = useOpenState((state) => state.document);
  const [drag, setDrag] = useState<MergePatch>();
  const [preview, setPreview] = useState<MergePatch>();
  const over = drag ?? preview;
  const sheet = useSheetNumber();
  const { number } = sheet;
  const shown = useMemo(
    () =>
      over === undefined
        ? design
        : applyPatch(design, drag === undefined ? over : patchOnSheet(design, over, number)),
    [design, over, drag, number],
  );
  const settled = useMemo(() => drawSheet(design, number), [design, number]);
  const geometry = useMemo(
    () => (shown === design ? settled : drawSheetWhileDragging(shown, design, number)),
    [shown, design, settled, number],
  );
  // A drag moves things only: what they say stays.
  const said = drag === undefined ? shown : design;
  const network = indexNetwork(said);
  const facts = useMemo(
    () => sheetFacts(sheetOfDesign(said, number), tunnelSegments(network)),
    [said, network, number],
  );
  const onSheet = sheetOfDesign(shown, number).design;
  const drawn = useMemo(
    () => ({ shown, sheet, onSheet, geometry, settled, facts, said, drag, setDrag, preview, setPreview }),
    [shown, sheet, onSheet, geometry, settled, facts, said, drag, preview],
  );
  return <GeometryContext value={drawn}>{children}</GeometryContext>;
}

export function useDrawn(): Drawn {
  const drawn = use(GeometryContext);
  if (drawn === null) throw new Error('No sheet is drawn here.');
  return drawn;
}
