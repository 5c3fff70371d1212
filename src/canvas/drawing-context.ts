import { createContext, use } from 'react';
import type { SheetGeometry } from '../drawing/geometry.ts';
import type { DrawingFacts } from '../drawing/parts/drawing-facts.ts';
import type { Look } from '../drawing/parts/look.ts';
import type { ElementRef } from '../engine/model/design.ts';

/** What all nodes and edges of one sheet draw from. */
export interface Drawing {
  readonly geometry: SheetGeometry;
  readonly facts: DrawingFacts;
  readonly look: Look;
  readonly editable: boolean;
  readonly acceptGhost: (id: string) => void;
  readonly pickBalloon: (number: number) => void;
  /** A slip of threads was pressed. */
  readonly pickFlag: (ref: ElementRef) => void;
}

export const DrawingContext = createContext<Drawing | null>(null);

export function useDrawing(): Drawing {
  const drawing = use(DrawingContext);
  if (drawing === null) throw new Error('Nothing is drawn here.');
  return drawing;
}
