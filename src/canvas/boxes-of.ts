import type { Rect, SheetGeometry } from '../drawing/geometry.ts';
import { around } from '../drawing/routing/rects.ts';
import type { ElementRef } from '../engine/model/design.ts';
import type { Box } from '../workspace/operations/align-parts.ts';

const rectOf = (geometry: SheetGeometry, { collection, id }: ElementRef): Rect | undefined => {
  switch (collection) {
    case 'devices': {
      const device = geometry.devices.find((candidate) => candidate.id === id);
      return device === undefined ? undefined : around(device.plates.map((plate) => plate.rect));
    }
    case 'sites':
      return geometry.sites.find((site) => site.id === id)?.rect;
    case 'notes':
      return geometry.notes.find((note) => note.id === id && !note.standing)?.rect;
    case 'transports':
      return geometry.bands.find((band) => band.id === id)?.limbs[0];
    default:
      return undefined;
  }
};

/** The ground of those elements that stand somewhere by themselves; each once, ports left out. */
export const boxesOf = (geometry: SheetGeometry, refs: readonly ElementRef[]): readonly Box[] => {
  const seen = new Set<string>();
  return refs.flatMap((ref): readonly Box[] => {
    const key = `${ref.collection}/${ref.id}`;
    const rect = ref.port === undefined && !seen.has(key) ? rectOf(geometry, ref) : undefined;
    if (rect === undefined) return [];
    seen.add(key);
    return [{ ref: { collection: ref.collection, id: ref.id }, rect }];
  });
};
