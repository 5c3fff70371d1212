import type { Design } from '../../engine/model/design.ts';
import { bundlesOf } from '../routing/bundles.ts';
import type { Spacing } from '../parts/sizes.ts';
import type { SiteBlock } from './site-block.ts';
import { columnsBlock, mirrored, rowBlock, sizeOfDevice, stackBlock } from './site-block.ts';
import type { SiteGraphFacts } from './site-graph.ts';
import type { SiteLayout } from './site-layout.ts';
import type { CombNeed, Level, SiteParts } from './site-parts.ts';
import { combNeedOf, sitePartsOf } from './site-parts.ts';

const collapseOver = 24;

/** A collapsed site: its gateway alone, with the places that the others take when it is opened. */
const collapsedBlock = (site: SiteParts, gateway: string, need: CombNeed): SiteBlock => {
  const closed = stackBlock(site, need, true);
  const open = stackBlock(site, need);
  const here = closed.positions.get(gateway)!;
  const there = open.positions.get(gateway)!;
  const positions = new Map(
    [...open.positions].map(([id, { x, y }]) => [id, { x: x - there.x + here.x, y: y - there.y + here.y }]),
  );
  return { positions, size: closed.size };
};

/** Blocks of all sites for either facing; each is built once. */
export const siteBlocks = (
  design: Design,
  facts: SiteGraphFacts,
  siteLayouts: { readonly [site: string]: SiteLayout },
  spacing: Spacing,
): {
  readonly blockOf: (site: string, facing: Level) => SiteBlock;
  readonly collapsed: ReadonlySet<string>;
} => {
  const parts = sitePartsOf(design);
  const bundles = bundlesOf(design);
  const collapses = parts.size > collapseOver;
  const collapsed = new Set(
    [...parts.values()]
      .filter((site) =>
        collapses
          ? site.shape === 'stack' && site.hosts.length + site.switches.length > 0
          : design.layout.sites?.[site.id]?.collapsed === true && site.shape === 'stack',
      )
      .map((site) => site.id),
  );
  const known = new Map<string, SiteBlock>();
  const build = (id: string, facing: Level): SiteBlock => {
    const site = parts.get(id)!;
    // A further transport's band lies right of everything; whoever stands on its far side looks left at it.
    const sideOf = (transport: string | undefined): Level =>
      transport === undefined || transport === facts.main || isHome(facts, id, transport) ? facing : 'right';
    const needOf = (device: string): CombNeed => combNeedOf(design, device, bundles, sideOf);
    const given = siteLayouts[id];
    if (site.shape === 'stack') {
      const [gateway] = site.gateways[0]!;
      const need = needOf(gateway);
      return collapsed.has(id) ? collapsedBlock(site, gateway, need) : stackBlock(site, need);
    }
    if (site.shape === 'row') {
      const need = needOf(site.gateways[0]![0]);
      // All rings of a pair dock on its one bracket.
      const widest = Math.max(need.ferruleWidth.left, need.ferruleWidth.right);
      return rowBlock(site, { ...need, ferruleWidth: { left: widest, right: widest } }, facing, spacing.row);
    }
    if (given === undefined) return columnsBlock(site, needOf, facing);
    const block: SiteBlock = { positions: new Map(Object.entries(given.positions)), size: given.size };
    return facing === 'right'
      ? block
      : mirrored(block, (device) => sizeOfDevice(design.devices[device]!).width);
  };
  return {
    collapsed,
    blockOf: (site, facing) => {
      const key = `${facing} ${site}`;
      const before = known.get(key);
      if (before !== undefined) return before;
      const block = build(site, facing);
      known.set(key, block);
      return block;
    },
  };
};

const isHome = (facts: SiteGraphFacts, site: string, transport: string): boolean =>
  facts.main !== undefined &&
  !(facts.landedOn.get(site)?.has(facts.main) ?? false) &&
  (facts.landedOn.get(site)?.has(transport) ?? false);
