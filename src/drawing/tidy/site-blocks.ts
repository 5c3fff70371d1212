import type { Design } from '../../engine/model/design.ts';
import { bundlesOf } from '../routing/bundles.ts';
import { closedSite, type Spacing } from '../parts/sizes.ts';
import type { SiteBlock } from './site-block.ts';
import { columnsBlock, mirrored, rowBlock, sizeOfDevice, stackBlock } from './site-block.ts';
import type { SiteGraphFacts } from './site-graph.ts';
import type { SiteLayout } from './site-layout.ts';
import type { CombNeed, Level, SiteParts } from './site-parts.ts';
import { combNeedOf, sitePartsOf } from './site-parts.ts';

const collapseOver = 24;

/** What is left to see of a collapsed site: the gateways that cords end on. */
const closedParts = (design: Design, site: SiteParts): SiteParts => {
  const ringed = new Set(Object.values(design.endpoints).map(({ device }) => device));
  const gateways = site.gateways.filter(([id]) => ringed.has(id));
  const [first] = gateways;
  const shape =
    gateways.length !== 1 || first === undefined ? 'unusual' : first[1].kind === 'ha-pair' ? 'row' : 'stack';
  return { ...site, shape, gateways, switches: [], hosts: [] };
};

/** A collapsed site, with the places that what it keeps back takes when it is opened. */
const closedBlock = (
  open: SiteBlock,
  parts: SiteParts,
  build: (parts: SiteParts) => SiteBlock,
): SiteBlock => {
  const [anchor] = parts.gateways;
  if (anchor === undefined) return { positions: open.positions, size: closedSite };
  const closed = build(parts);
  const here = closed.positions.get(anchor[0])!;
  const there = open.positions.get(anchor[0])!;
  return {
    positions: new Map([
      ...[...open.positions].map(
        ([id, { x, y }]) => [id, { x: x - there.x + here.x, y: y - there.y + here.y }] as const,
      ),
      ...closed.positions,
    ]),
    size: closed.size,
  };
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
      .filter(
        (site) =>
          (collapses && site.shape === 'stack' && site.hosts.length + site.switches.length > 0) ||
          design.layout.sites?.[site.id]?.collapsed === true,
      )
      .map((site) => site.id),
  );
  const known = new Map<string, SiteBlock>();
  const build = (site: SiteParts, facing: Level, given?: SiteLayout): SiteBlock => {
    // A further transport's band lies right of everything; whoever stands on its far side looks left at it.
    const sideOf = (transport: string | undefined): Level =>
      transport === undefined || transport === facts.main || isHome(facts, site.id, transport)
        ? facing
        : 'right';
    const needOf = (device: string): CombNeed => combNeedOf(design, device, bundles, sideOf);
    if (site.shape === 'stack') return stackBlock(site, needOf(site.gateways[0]![0]));
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
      const of = parts.get(site)!;
      const open = build(of, facing, siteLayouts[site]);
      const block = collapsed.has(site)
        ? closedBlock(open, closedParts(design, of), (closed) => build(closed, facing))
        : open;
      known.set(key, block);
      return block;
    },
  };
};

const isHome = (facts: SiteGraphFacts, site: string, transport: string): boolean =>
  facts.main !== undefined &&
  !(facts.landedOn.get(site)?.has(facts.main) ?? false) &&
  (facts.landedOn.get(site)?.has(transport) ?? false);
