import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { around, byText } from '../routing/rects.ts';
import { standsOf } from '../routing/stands.ts';
import { sheetFrame } from '../routing/sheet-frame.ts';
import type { ElkGraph } from './elk-graph.ts';
import { positionsFromElk, selectionGraph } from './elk-graph.ts';

/**
 * The patch that puts the selected devices where a general layout of them says, their common top left corner staying
 * where it is. `result` is elkjs's answer to `elkGraphOf(selectionGraph(design, deviceIds))`. Locked devices stay.
 */
export const tidySelection = (
  design: Design,
  deviceIds: readonly string[],
  result: Pick<ElkGraph, 'children'>,
): MergePatch => {
  const sheet = sheetFrame(design.layout.sheet ?? 'A3', Object.keys(design.segments).length);
  const stands = standsOf(design, sheet);
  const free = deviceIds.filter((id) => design.layout.devices?.[id]?.locked !== true && stands.has(id));
  const layout = positionsFromElk(selectionGraph(design, free), result);
  const placed = free.filter((id) => layout.positions[id] !== undefined).sort(byText);
  const before = around(placed.map((id) => stands.get(id)!.rect));
  if (before === undefined) return {};
  const left = Math.min(...placed.map((id) => layout.positions[id]!.x));
  const top = Math.min(...placed.map((id) => layout.positions[id]!.y));
  return {
    layout: {
      devices: Object.fromEntries(
        placed.map((id) => {
          const at = layout.positions[id]!;
          return [id, { x: Math.round(before.x + at.x - left), y: Math.round(before.y + at.y - top) }];
        }),
      ),
    },
  };
};
