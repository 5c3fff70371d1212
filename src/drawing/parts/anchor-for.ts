import type { ElementRef } from '../../engine/model/design.ts';
import type { Point, SheetGeometry } from '../geometry.ts';
import { anchorOf } from '../routing/anchors.ts';
import type { DrawingFacts } from './drawing-facts.ts';

/** Where an element is pointed at: a forwarder at its device, a device of a collapsed site at the site. */
export const anchorFor = (
  geometry: SheetGeometry,
  ref: ElementRef,
  facts: DrawingFacts,
): Point | undefined => {
  if (ref.collection === 'forwarders') {
    const device = facts.forwarders[ref.id];
    return device === undefined
      ? undefined
      : anchorFor(geometry, { collection: 'devices', id: device }, facts);
  }
  const anchor = anchorOf(geometry, ref);
  if (anchor !== undefined || ref.collection !== 'devices') return anchor;
  const site = facts.devices[ref.id]?.site;
  return site === undefined ? undefined : anchorOf(geometry, { collection: 'sites', id: site });
};
