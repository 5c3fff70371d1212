import type { Design } from '../../engine/model/design.ts';
import type { Layout } from '../../engine/model/layout.ts';
import { byText } from '../routing/rects.ts';
import type { Arrangement } from './arrangement.ts';
import { facingOf } from './arrangement.ts';
import type { SiteBlock } from './site-block.ts';
import type { Level } from './site-parts.ts';

/** Sites that stand with their back close to the next limb: their rings would turn round to it. */
const backedByLimb = ({ columns }: Arrangement['seating']): ReadonlySet<string> =>
  new Set(
    columns.flatMap((sites, i) => (facingOf(i) === 'left' && columns[i + 1]?.length === 0 ? sites : [])),
  );

/** Their rings, held on the side that looks at the limb in front of them. */
const heldRings = (design: Design, arrangement: Arrangement): Pick<Layout, 'endpoints'> => {
  const backed = backedByLimb(arrangement.seating);
  const held = Object.entries(design.endpoints)
    .filter(([, { device }]) => backed.has(design.devices[device]?.site ?? ''))
    .map(([id]) => [id, { side: 'left' as const }]);
  return held.length === 0 ? {} : { endpoints: Object.fromEntries(held) };
};

/** The layout that an arrangement stands for; what a person locked keeps its place. */
export const layoutOf = (
  design: Design,
  arrangement: Arrangement,
  blockOf: (site: string, facing: Level) => SiteBlock,
  collapsed: ReadonlySet<string>,
  holdsRings = false,
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
    ...(holdsRings ? heldRings(design, arrangement) : {}),
    ...(before.notes === undefined ? {} : { notes: before.notes }),
  };
};
