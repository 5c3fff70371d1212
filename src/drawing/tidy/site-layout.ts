import type { Point } from '../geometry.ts';
import type { Size } from '../parts/sizes.ts';

/** A site laid out elsewhere, facing right: positions from its frame's top left corner. */
export interface SiteLayout {
  readonly positions: { readonly [device: string]: Point };
  readonly size: Size;
}
