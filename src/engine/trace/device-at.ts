import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { DesignFacts } from '../network/network.ts';
import { entryOf } from '../network/network.ts';

/** The device that an end of a hop is on: its own port, or the one that its loopback endpoint belongs to. */
export const deviceAt = (design: DesignFacts, end: ElementRef): Id =>
  end.collection === 'endpoints' ? entryOf(design.endpoints, end.id).device : end.id;
