import { createContext, use, useMemo, useState, type ReactNode } from 'react';
import type { SheetGeometry } from '../drawing/geometry.ts';
import { drawingFacts } from '../drawing/parts/drawing-facts.ts';
import type { DrawingFacts } from '../drawing/parts/drawing-facts.ts';
import { route, routeWhileDragging } from '../drawing/routing/route.ts';
import { tunnelSegments } from '../engine/flood/tunnel-segments.ts';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { applyPatch } from '../engine/model/merge-patch.ts';
import { indexNetwork } from '../engine/network/index-network.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';

interface Drawn {
  /** The design as the sheet shows it: with what is being dragged, or what a fix would do. */
  readonly shown: Design;
  readonly geometry: SheetGeometry;
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
  const shown = useMemo(() => (over === undefined ? design : applyPatch(design, over)), [design, over]);
  const settled = useMemo(() => route(design), [design]);
  const geometry = useMemo(
    () => (shown === design ? settled : routeWhileDragging(shown, design)),
    [shown, design, settled],
  );
  // A drag moves things only: what they say stays.
  const said = drag === undefined ? shown : design;
  const network = indexNetwork(said);
  const facts = useMemo(() => drawingFacts(said, tunnelSegments(network)), [said, network]);
  const drawn = useMemo(
    () => ({ shown, geometry, settled, facts, said, drag, setDrag, preview, setPreview }),
    [shown, geometry, settled, facts, said, drag, preview],
  );
  return <GeometryContext value={drawn}>{children}</GeometryContext>;
}

export function useDrawn(): Drawn {
  const drawn = use(GeometryContext);
  if (drawn === null) throw new Error('No sheet is drawn here.');
  return drawn;
}
