import type { Design } from '../../engine/model/design.ts';
import { joinPatches, type MergePatch } from '../../engine/model/merge-patch.ts';
import type { Standing } from './move-parts.ts';
import type { Operation } from './operation.ts';
import { refused } from './operation.ts';

/** Whether a site is drawn as one plate. */
export const isCollapsed = (design: Design, site: string): boolean =>
  design.layout.sites?.[site]?.collapsed === true;

/** Whether there is anything in a site to keep back; a collapsed one can always be opened. */
export const canCollapse = (design: Design, site: string): boolean =>
  isCollapsed(design, site) || Object.values(design.devices).some((device) => device.site === site);

/**
 * Draws sites as one plate each, or shows again all that stands in them. Where everything stands is written down, so that
 * it comes out where it went in.
 */
export const setCollapsed = (
  design: Design,
  standing: Standing,
  sites: readonly string[],
  collapsed: boolean,
): Operation => {
  const known = sites.filter((id) => design.sites[id] !== undefined && standing.sites[id] !== undefined);
  const [first] = known;
  if (first === undefined) return refused('That site is no longer there.');
  if (collapsed && !known.every((id) => canCollapse(design, id)))
    return refused('An empty site has nothing to keep back: put a device into it first.');
  const name = design.sites[first]!.name;
  return {
    ok: true,
    label: `${collapsed ? 'Collapse' : 'Open'} ${known.length === 1 ? name : `${known.length} sites`}`,
    patch: joinPatches(
      design,
      known.map((id) => ({
        layout: {
          sites: {
            [id]: {
              ...(design.layout.sites?.[id] ?? standing.sites[id]!),
              collapsed: collapsed ? true : null,
            },
          },
          ...(collapsed
            ? {
                devices: Object.fromEntries(
                  Object.entries(design.devices)
                    .filter(([device, entry]) => entry.site === id && standing.devices[device] !== undefined)
                    .map(([device]) => [device, standing.devices[device]!]),
                ),
              }
            : {}),
        },
      })),
    ),
  };
};

/** Opens a site that something is put into: what vanished at once would be looked for. */
export const openedFor = (design: Design, site: string): MergePatch =>
  isCollapsed(design, site) ? { layout: { sites: { [site]: { collapsed: null } } } } : {};
