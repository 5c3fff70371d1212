import type { Design } from '../../engine/model/design.ts';
import type { Point } from '../geometry.ts';
import { bracket, cuff, ferrule, ring, site as siteSizes } from '../parts/sizes.ts';
import { bundlesOf } from '../routing/bundles.ts';
import { byText } from '../routing/rects.ts';
import { sizeOfDevice } from './site-block.ts';
import type { SiteLayout } from './site-layout.ts';
import { combNeedOf, sitePartsOf } from './site-parts.ts';

/** Devices to be laid out with the cables between them, for a general layout program. */
export interface SiteGraph {
  /** The site's id, or any name for a selection. */
  readonly id: string;
  readonly nodes: readonly {
    readonly id: string;
    readonly width: number;
    readonly height: number;
    /** Room kept for its combs: to the right, and above and below. */
    readonly comb: { readonly beside: number; readonly above: number; readonly below: number };
    readonly role: 'host' | 'switch' | 'gateway';
  }[];
  readonly edges: readonly { readonly id: string; readonly from: string; readonly to: string }[];
}

/** As much of an elkjs graph as is needed here; the answer has x and y on its children. */
export interface ElkGraph {
  readonly id: string;
  readonly layoutOptions?: { readonly [option: string]: string };
  readonly children: readonly {
    readonly id: string;
    readonly width: number;
    readonly height: number;
    readonly x?: number;
    readonly y?: number;
    readonly layoutOptions?: { readonly [option: string]: string };
    readonly ports?: readonly {
      readonly id: string;
      readonly layoutOptions: { readonly [option: string]: string };
    }[];
  }[];
  readonly edges: readonly {
    readonly id: string;
    readonly sources: readonly string[];
    readonly targets: readonly string[];
  }[];
}

const graphOf = (design: Design, id: string, devices: readonly string[]): SiteGraph => {
  const bundles = bundlesOf(design);
  const inside = new Set(devices);
  const nodes = [...devices].sort(byText).map((device) => {
    const entry = design.devices[device]!;
    const ports = Object.keys(entry.ports).length;
    const size = sizeOfDevice(entry, {
      upright: entry.kind === 'host' ? 1 : Math.ceil(ports / 2),
      level: entry.kind === 'host' ? 1 : Math.min(ports, 5),
      rings: 1,
    });
    const need = combNeedOf(design, device, bundles, () => 'right');
    const length = need.length.right;
    if (length === undefined)
      return { id: device, ...size, comb: { beside: 0, above: 0, below: 0 }, role: roleOf(entry.kind) };
    const onBracket = entry.kind === 'ha-pair';
    const beside =
      (onBracket ? bracket.reach + ring.offBracket : ring.offPlate) +
      ring.toFerrule +
      need.ferruleWidth.right +
      cuff.fromFerrule -
      8;
    const above = Math.max(onBracket ? 46 : 0, (length + 50 + ferrule.height - size.height) / 2);
    return { id: device, ...size, comb: { beside, above, below: above }, role: roleOf(entry.kind) };
  });
  const edges = Object.entries(design.links)
    .flatMap(([link, entry]) =>
      entry.kind === 'cable' &&
      entry.a.device !== entry.b.device &&
      inside.has(entry.a.device) &&
      inside.has(entry.b.device)
        ? [{ id: link, ends: [entry.a.device, entry.b.device] as const }]
        : [],
    )
    .map(({ id: link, ends }) => {
      // Edges run from hosts to gateways, so that gateways come last, next to their transport.
      const rank = (device: string): number =>
        ['host', 'switch', 'gateway'].indexOf(roleOf(design.devices[device]!.kind));
      const [from, to] = rank(ends[0]) <= rank(ends[1]) ? ends : [ends[1], ends[0]];
      return { id: link, from, to };
    })
    .sort((a, b) => byText(a.id, b.id));
  return { id, nodes, edges };
};

const roleOf = (kind: string): 'host' | 'switch' | 'gateway' =>
  kind === 'host' ? 'host' : kind === 'switch' ? 'switch' : 'gateway';

/** The sites that none of our own layouts fits: several switches or gateways, rings of cables, hosts on several devices. */
export const unusualSites = (design: Design): readonly SiteGraph[] =>
  [...sitePartsOf(design).values()]
    .filter((site) => site.shape === 'unusual')
    .sort((a, b) => byText(a.id, b.id))
    .map((site) =>
      graphOf(
        design,
        site.id,
        [...site.gateways, ...site.switches, ...site.hosts].map(([id]) => id),
      ),
    );

/** Any devices of a design as a graph to be laid out. */
export const selectionGraph = (design: Design, deviceIds: readonly string[]): SiteGraph =>
  graphOf(
    design,
    'selection',
    deviceIds.filter((id) => design.devices[id] !== undefined),
  );

/** A graph as elkjs takes it: layered from hosts towards gateways, the same answer every time. */
export const elkGraphOf = (graph: SiteGraph): ElkGraph => ({
  id: graph.id,
  layoutOptions: {
    'elk.algorithm': 'layered',
    'elk.direction': 'RIGHT',
    'elk.randomSeed': '1',
    'elk.layered.considerModelOrder.strategy': 'NODES_AND_EDGES',
    'elk.layered.spacing.nodeNodeBetweenLayers': '40',
    'elk.spacing.nodeNode': '14',
    'elk.separateConnectedComponents': 'false',
  },
  children: graph.nodes.map((node) => ({
    id: node.id,
    width: node.width + node.comb.beside,
    height: node.height + node.comb.above + node.comb.below,
    layoutOptions: {
      'elk.portConstraints': 'FIXED_ORDER',
      // With several gateways in a row only those that no other device follows can stand last.
      ...(node.role === 'gateway' && !graph.edges.some((edge) => edge.from === node.id)
        ? { 'elk.layered.layering.layerConstraint': 'LAST' }
        : {}),
    },
    ports: graph.edges.flatMap((edge) => [
      ...(edge.from === node.id
        ? [{ id: `${edge.id} from`, layoutOptions: { 'elk.port.side': 'EAST' } }]
        : []),
      ...(edge.to === node.id ? [{ id: `${edge.id} to`, layoutOptions: { 'elk.port.side': 'WEST' } }] : []),
    ]),
  })),
  edges: graph.edges.map((edge) => ({
    id: edge.id,
    sources: [`${edge.id} from`],
    targets: [`${edge.id} to`],
  })),
});

/** What elkjs answered, as a site's layout facing right: positions only, its bends are not used. */
export const positionsFromElk = (graph: SiteGraph, result: Pick<ElkGraph, 'children'>): SiteLayout => {
  const placed = new Map(result.children.map((child) => [child.id, child]));
  const found = graph.nodes.flatMap((node) => {
    const child = placed.get(node.id);
    if (child?.x === undefined || child.y === undefined) return [];
    return [{ node, x: child.x, y: child.y + node.comb.above }];
  });
  if (found.length === 0) return { positions: {}, size: { width: 240, height: 110 } };
  const left = Math.min(...found.map(({ x }) => x));
  const top = Math.min(...found.map(({ node, y }) => y - node.comb.above));
  const lead = siteSizes.toPlainEdge;
  const positions: { [device: string]: Point } = {};
  for (const { node, x, y } of found)
    positions[node.id] = { x: Math.round(x - left + lead), y: Math.round(y - top + siteSizes.nameLine + 6) };
  return {
    positions,
    size: {
      width: Math.max(
        ...found.map(
          ({ node, x }) => x - left + lead + node.width + (node.comb.beside > 0 ? node.comb.beside : lead),
        ),
      ),
      height:
        Math.max(...found.map(({ node, y }) => y - top + node.height + node.comb.below)) +
        siteSizes.nameLine +
        6 +
        siteSizes.below,
    },
  };
};
