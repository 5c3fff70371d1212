import { useMemo } from 'react';
import type { Decorations } from '../drawing/decorations.ts';
import type { SheetGeometry } from '../drawing/geometry.ts';
import {
  partVisibility,
  visibleDecorations,
  visibleGeometry,
  type VisibilityOf,
} from '../drawing/view-layers.ts';
import { tunnelSegments } from '../engine/flood/tunnel-segments.ts';
import type { Design } from '../engine/model/design.ts';
import { indexNetwork } from '../engine/network/index-network.ts';
import { useDrawn } from './geometry-context.tsx';
import { useViewChoice } from './use-view-choice.ts';

export interface Viewed {
  readonly geometry: SheetGeometry;
  readonly decorations: Decorations;
  /** Whether an element is ground in this view; undefined where the whole sheet is looked at. */
  readonly visibilityOf: VisibilityOf | undefined;
}

const hiddenOf = (design: Design, chosen: readonly string[] | undefined): readonly string[] =>
  chosen === undefined ? [] : Object.keys(design.segments).filter((id) => !chosen.includes(id));

/**
 * The sheet as the view in the address has it. Cords of segments that are left out stay as a shadow, so that one keeps one's
 * bearings; lines of layers that are off go.
 */
export function useViewed(decorations: Decorations): Viewed {
  const { geometry, said } = useDrawn();
  const { choice, isWhole } = useViewChoice();
  const views = useMemo(() => {
    if (isWhole) return undefined;
    const carried = tunnelSegments(indexNetwork(said));
    return {
      all: partVisibility(said, carried, choice),
      layers: partVisibility(said, carried, { layers: choice.layers }),
    };
  }, [said, choice, isWhole]);
  const viewed = useMemo(
    () => (views === undefined ? geometry : visibleGeometry(geometry, views.layers)),
    [geometry, views],
  );
  const marks = useMemo(
    () =>
      views === undefined
        ? decorations
        : {
            ...visibleDecorations(decorations, views.all),
            hiddenSegments: hiddenOf(said, choice.segments),
          },
    [decorations, views, said, choice],
  );
  return { geometry: viewed, decorations: marks, visibilityOf: views?.all };
}
