import type { Design, ElementRef } from '../engine/model/design.ts';
import { isGateway } from '../engine/model/devices.ts';
import type { Decorations } from './decorations.ts';
import type { CombGroup, RingGeometry, SheetGeometry } from './geometry.ts';
import { comb as combSize, ferrule } from './parts/sizes.ts';

// Which parts of a sheet are looked at. For canvas and exports alike:
//
//   const visibilityOf = partVisibility(design, tunnelSegments(network), { layers: ['overlay'], segments: ['seg-a'] });
//   visibilityOf({ collection: 'tunnels', id })   // 'shown' | 'faded' | 'hidden'
//   visibleGeometry(geometry, visibilityOf)       // the same drawing without its hidden parts; nothing moves
//   visibleDecorations(decorations, visibilityOf) // without marks on what isn't shown
//
// Faded parts stay as ground in `fadedOpacity`, so that every view of a sheet has its plates in the same places. Lines and
// rings of other layers are hidden: cables in the overlay, cords in the cabling.

export const viewLayers = ['cabling', 'underlay', 'overlay'] as const;
export type ViewLayer = (typeof viewLayers)[number];
export type Visibility = 'shown' | 'faded' | 'hidden';

/** What of a sheet is looked at: layers (none named: all), and of the overlay only what carries one of some segments. */
export interface ViewChoice {
  readonly layers: readonly ViewLayer[];
  /** Ids; absent: all segments, and tunnels that carry none. */
  readonly segments?: readonly string[];
}
export const wholeSheet: ViewChoice = { layers: viewLayers };

/** Opacity of what is ground in a view. */
export const fadedOpacity = 0.45;

export type VisibilityOf = (ref: ElementRef) => Visibility;
type ViewedDesign = Pick<Design, 'devices' | 'links' | 'tunnels' | 'notes'>;

/**
 * How each element is shown in a view. Sites and gateways belong to every layer; hosts and switches to the cabling, and are
 * ground elsewhere; transports to the underlay; landings to both; endpoints, associations and tunnels to the overlay. With
 * segments chosen a host that is declared to be in another is ground. A note is shown as what it speaks of.
 */
export const partVisibility = (
  design: ViewedDesign,
  tunnelSegments: ReadonlyMap<string, readonly string[]>,
  view: ViewChoice,
): VisibilityOf => {
  const layers = new Set<ViewLayer>(view.layers.length === 0 ? viewLayers : view.layers);
  const overlay = layers.has('overlay');
  const chosen = view.segments === undefined ? undefined : new Set(view.segments);
  const tunnels = new Set<string>();
  const associations = new Set<string>();
  const endpoints = new Set<string>();
  for (const [id, tunnel] of Object.entries(design.tunnels)) {
    if (chosen !== undefined && !(tunnelSegments.get(id) ?? []).some((segment) => chosen.has(segment)))
      continue;
    tunnels.add(id);
    if (tunnel.association !== undefined) associations.add(tunnel.association);
    endpoints.add(tunnel.a.endpoint).add(tunnel.b.endpoint);
  }
  const carried = (ids: ReadonlySet<string>, id: string): Visibility =>
    overlay && (chosen === undefined || ids.has(id)) ? 'shown' : 'hidden';
  const deviceVisibility = (id: string): Visibility => {
    const device = design.devices[id];
    if (device === undefined || isGateway(device)) return 'shown';
    if (!layers.has('cabling')) {
      // Without the cabling hosts are where a segment ends: those of the chosen ones stand out from the ground.
      return device.kind === 'host' && chosen !== undefined && chosen.has(device.segment ?? '')
        ? 'shown'
        : 'faded';
    }
    return device.kind === 'host' &&
      chosen !== undefined &&
      device.segment !== undefined &&
      !chosen.has(device.segment)
      ? 'faded'
      : 'shown';
  };
  const visibilityOf = ({ collection, id }: ElementRef): Visibility => {
    switch (collection) {
      case 'devices':
        return deviceVisibility(id);
      case 'links': {
        const landing = design.links[id]?.kind === 'landing';
        return layers.has('cabling') || (landing && layers.has('underlay')) ? 'shown' : 'hidden';
      }
      case 'transports':
        return layers.has('underlay') ? 'shown' : 'faded';
      case 'tunnels':
        return carried(tunnels, id);
      case 'associations':
        return carried(associations, id);
      case 'endpoints':
        return carried(endpoints, id);
      case 'forwarders':
        return overlay ? 'shown' : 'hidden';
      case 'segments':
        return chosen === undefined || chosen.has(id) ? 'shown' : 'hidden';
      case 'notes': {
        const target = design.notes[id]?.target;
        return target === undefined ? 'shown' : visibilityOf(target);
      }
      default:
        return 'shown';
    }
  };
  return visibilityOf;
};

/** The comb's spine from the ring to the outermost ferrules that are left. */
const spineOf = (ring: RingGeometry, groups: readonly CombGroup[]): RingGeometry['comb'] => {
  const { comb, centre } = ring;
  if (comb === undefined) return undefined;
  const level = ring.side === 'top' || ring.side === 'bottom';
  const own = level ? centre.x : centre.y;
  // A flag stands on its lane with the middle of its cap.
  const places = groups.flatMap(({ ferrules }) =>
    ferrules.map(({ rect }) => (level ? rect.x + ferrule.cap / 2 : rect.y + rect.height / 2)),
  );
  const [least, most] = [Math.min(...places), Math.max(...places)];
  const from = least < own ? least - combSize.overhang : own;
  const to = most > own ? most + combSize.overhang : own;
  const { x, y } = comb.spine[0];
  return {
    arm: comb.arm,
    spine: [level ? { x: from, y } : { x, y: from }, level ? { x: to, y } : { x, y: to }],
  };
};

const visibleRing = (ring: RingGeometry, isVisible: (ref: ElementRef) => boolean): RingGeometry => {
  const groups = ring.groups.flatMap((group) => {
    const ferrules = group.ferrules.filter(({ tunnel }) => isVisible({ collection: 'tunnels', id: tunnel }));
    return ferrules.length === 0 ? [] : [{ ...group, ferrules }];
  });
  const count = (of: readonly CombGroup[]): number =>
    of.reduce((sum, { ferrules }) => sum + ferrules.length, 0);
  if (count(groups) === count(ring.groups)) return ring;
  const { comb: _comb, manifold, ...rest } = ring;
  const comb = count(groups) === 0 ? undefined : spineOf(ring, groups);
  return {
    ...rest,
    groups,
    ...(comb === undefined ? {} : { comb }),
    ...(manifold === undefined ? {} : { manifold: { ...manifold, tunnels: count(groups) } }),
  };
};

/** A drawing without its hidden parts; everything else stays where routing put it. */
export const visibleGeometry = (geometry: SheetGeometry, visibilityOf: VisibilityOf): SheetGeometry => {
  const isVisible = (ref: ElementRef): boolean => visibilityOf(ref) !== 'hidden';
  const tunnelVisible = ({ tunnel }: { readonly tunnel: string }): boolean =>
    isVisible({ collection: 'tunnels', id: tunnel });
  const jackets = geometry.jackets.flatMap((jacket) => {
    const lanes = jacket.lanes.filter(tunnelVisible);
    return lanes.length === 0 ? [] : [lanes.length === jacket.lanes.length ? jacket : { ...jacket, lanes }];
  });
  const left = new Set(jackets.map(({ id }) => id));
  return {
    ...geometry,
    cables: geometry.cables.filter(({ links }) => links.some((id) => isVisible({ collection: 'links', id }))),
    rings: geometry.rings
      .filter(({ endpoint }) => isVisible({ collection: 'endpoints', id: endpoint }))
      .map((ring) => visibleRing(ring, isVisible)),
    jackets: jackets.map((jacket) => {
      const crossings = jacket.crossings.filter(({ over }) => left.has(over));
      return crossings.length === jacket.crossings.length ? jacket : { ...jacket, crossings };
    }),
    trunks: geometry.trunks.flatMap((trunk) => {
      const pieces = trunk.pieces
        .map((piece) => ({ ...piece, jackets: piece.jackets.filter((id) => left.has(id)) }))
        .filter((piece) => piece.jackets.length > 0);
      return pieces.length === 0 ? [] : [{ ...trunk, pieces }];
    }),
    notes: geometry.notes.filter(({ id }) => isVisible({ collection: 'notes', id })),
  };
};

/** Decorations without what stands on hidden or faded elements: a view shows its own faults. */
export const visibleDecorations = (decorations: Decorations, visibilityOf: VisibilityOf): Decorations => {
  const isShown = (ref: ElementRef): boolean => visibilityOf(ref) === 'shown';
  const tunnelShown = ({ tunnel }: { readonly tunnel: string }): boolean =>
    isShown({ collection: 'tunnels', id: tunnel });
  return {
    ...decorations,
    cuts: decorations.cuts.filter(tunnelShown),
    loops: decorations.loops.filter(({ steps }) =>
      steps.some(({ collection, id }) => isShown({ collection, id })),
    ),
    ghosts: decorations.ghosts.filter(({ from, to }) =>
      [from, to].every(({ device }) => isShown({ collection: 'devices', id: device })),
    ),
    overhangs: decorations.overhangs.filter(tunnelShown),
    balloons: decorations.balloons.filter(({ at }) => isShown(at)),
    ...(decorations.flags === undefined ? {} : { flags: decorations.flags.filter(({ at }) => isShown(at)) }),
  };
};
