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
  /** The design as the sheet shows it: with what is being dragged where the pointer holds it. */
  readonly shown: Design;
  readonly geometry: SheetGeometry;
  /** The geometry of the committed design. */
  readonly settled: SheetGeometry;
  readonly facts: DrawingFacts;
  readonly drag: MergePatch | undefined;
  readonly setDrag: (patch: MergePatch | undefined) => void;
}

const GeometryContext = createContext<Drawn | null>(null);

/** Routes the open design for everything that shows or points at the sheet. */
export function GeometryProvider({ children }: { readonly children: ReactNode }) {
  const design = useOpenState((state) => state.document);
  const [drag, setDrag] = useState<MergePatch>();
  const shown = useMemo(() => (drag === undefined ? design : applyPatch(design, drag)), [design, drag]);
  const settled = useMemo(() => route(design), [design]);
  const geometry = useMemo(
    () => (shown === design ? settled : routeWhileDragging(shown)),
    [shown, design, settled],
  );
  const network = indexNetwork(design);
  const facts = useMemo(() => drawingFacts(design, tunnelSegments(network)), [design, network]);
  const drawn = useMemo(
    () => ({ shown, geometry, settled, facts, drag, setDrag }),
    [shown, geometry, settled, facts, drag],
  );
  return <GeometryContext value={drawn}>{children}</GeometryContext>;
}

export function useDrawn(): Drawn {
  const drawn = use(GeometryContext);
  if (drawn === null) throw new Error('No sheet is drawn here.');
  return drawn;
}
