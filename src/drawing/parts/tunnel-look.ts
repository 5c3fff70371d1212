import type { TunnelFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';

/** Whether all that a tunnel carries is hidden from view. One that carries nothing is never hidden. */
export const tunnelHidden = (tunnel: TunnelFacts, look: Look): boolean =>
  tunnel.segments.length > 0 &&
  tunnel.segments.every((segment) => look.decorations.hiddenSegments.includes(segment.id));
