import type { Design } from '../../engine/model/design.ts';
import type { Layout } from '../../engine/model/layout.ts';
import { byText } from '../routing/rects.ts';
import type { Arrangement } from './arrangement.ts';
import { facingOf } from './arrangement.ts';
import type { SiteBlock } from './site-block.ts';
import type { Level } from './site-parts.ts';

/** The layout that an arrangement stands for; what a person locked keeps its place. */
export const layoutOf = (
  design: Design,
  arrangement: Arrangement,
  blockOf: (site: string, facing: Level) => SiteBlock,
  collapsed: ReadonlySet<string>,
): Layout => {
  const facing = new Map<string, Level>();
  arrangement.seating.columns.forEach((sites, i) => sites.forEach((site) => facing.set(site, facingOf(i))));
  arrangement.seating.further.forEach((sites) => sites.forEach((site) => facing.set(site, 'left')));
  const before = design.layout;
  const sites: NonNullable<Layout['sites']> = {};
  const devices: NonNullable<Layout['devices']> = {};
  for (const [id, rect] of [...arrangement.sites].sort(([a], [b]) => byText(a, b))) {
    const was = before.sites?.[id];
    const block = blockOf(id, facing.get(id)!);
    if (was?.locked === true) sites[id] = was;
    else sites[id] = { ...rect, ...(collapsed.has(id) ? { collapsed: true } : {}) };
    for (const [device, at] of block.positions) {
      const own = before.devices?.[device];
      devices[device] =
        own?.locked === true || was?.locked === true
          ? (own ?? { x: rect.x + at.x, y: rect.y + at.y })
          : { x: Math.round((rect.x + at.x) * 2) / 2, y: Math.round((rect.y + at.y) * 2) / 2 };
    }
  }
  const transports: NonNullable<Layout['transports']> = {};
  for (const [id, { limbs, header }] of arrangement.bands) {
    const was = before.transports?.[id];
    transports[id] =
      was?.locked === true
        ? { ...was, limbs: was.limbs.map((limb) => ({ ...limb })) }
        : {
            limbs: limbs.map((limb) => ({ ...limb })),
            ...(header === undefined ? {} : { header: { ...header } }),
          };
  }
  return {
    sheet: arrangement.size,
    sites,
    devices,
    transports,
    ...(before.notes === undefined ? {} : { notes: before.notes }),
  };
};
