import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import type { SheetGeometry } from '../geometry.ts';
import { byText } from '../routing/rects.ts';
import { spacings } from '../parts/sizes.ts';
import { siteBlocks } from './site-blocks.ts';
import { siteGraphFacts } from './site-graph.ts';
import type { SiteLayout } from './site-layout.ts';
import type { Level } from './site-parts.ts';

/** Which way most of a site's rings look now; to the right where it has none. */
const facingNow = (design: Design, geometry: SheetGeometry, site: string): Level => {
  const own = geometry.rings.filter(({ device }) => design.devices[device]?.site === site);
  const left = own.filter(({ side }) => side === 'left').length;
  const right = own.filter(({ side }) => side === 'right').length;
  return left > right ? 'left' : 'right';
};

/**
 * The patch that lays one site out as tidying the sheet would, its frame's top left corner staying where it is. A site that
 * none of the drawing's own layouts fits takes `given`, the answer of a general one. Locked devices stay.
 */
export const tidySite = (
  design: Design,
  geometry: SheetGeometry,
  site: string,
  given?: SiteLayout,
): MergePatch => {
  const frame = geometry.sites.find(({ id }) => id === site)?.rect;
  if (frame === undefined || design.layout.sites?.[site]?.locked === true) return {};
  const { blockOf } = siteBlocks(
    design,
    siteGraphFacts(design),
    given === undefined ? {} : { [site]: given },
    spacings.roomy,
  );
  const block = blockOf(site, facingNow(design, geometry, site));
  const devices = [...block.positions]
    .filter(([id]) => design.layout.devices?.[id]?.locked !== true)
    .sort(([a], [b]) => byText(a, b))
    .map(([id, { x, y }]) => [id, { x: Math.round(frame.x + x), y: Math.round(frame.y + y) }]);
  return {
    layout: {
      sites: { [site]: { x: frame.x, y: frame.y, width: block.size.width, height: block.size.height } },
      devices: Object.fromEntries(devices) as never,
    },
  };
};
