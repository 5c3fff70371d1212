import type { NodeChange, NodePositionChange, XYPosition } from '@xyflow/react';
import type { Point, Rect, SheetGeometry } from '../drawing/geometry.ts';
import { around } from '../drawing/routing/rects.ts';
import type { Collection, Design, ElementRef } from '../engine/model/design.ts';
import type { Side } from '../engine/model/layout.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { applyPatch, joinPatches } from '../engine/model/merge-patch.ts';
import type { Standing } from '../workspace/operations/move-parts.ts';
import { rehome } from '../workspace/operations/move-parts.ts';
import { snapMove, type Snapped } from '../workspace/operations/snap-move.ts';
import { boxesOf } from './boxes-of.ts';
import type { FlowNode } from './design-to-flow.ts';

const inside = (rect: Rect, at: Point): boolean =>
  at.x >= rect.x && at.x <= rect.x + rect.width && at.y >= rect.y && at.y <= rect.y + rect.height;

/** Where everything stands on the sheet as drawn, also what nobody placed yet. */
export const standingOf = (geometry: SheetGeometry): Standing => ({
  devices: Object.fromEntries(
    geometry.devices.map((device) => [
      device.id,
      { x: device.plates[0]!.rect.x, y: device.plates[0]!.rect.y },
    ]),
  ),
  sites: Object.fromEntries(geometry.sites.map((site) => [site.id, site.rect])),
  notes: Object.fromEntries(
    geometry.notes.filter((note) => !note.standing).map((note) => [note.id, note.at]),
  ),
});

export type MovedNode = Pick<NodePositionChange, 'id' | 'position'>;

/** The changes that move nodes, and whether the pointer still holds them. */
export const movesIn = (
  changes: readonly NodeChange<FlowNode>[],
): { readonly moved: readonly MovedNode[]; readonly dragging: boolean } => {
  const positions = changes.filter((change): change is NodePositionChange => change.type === 'position');
  return {
    moved: positions.filter((change) => change.position !== undefined),
    dragging: positions.some((change) => change.dragging === true),
  };
};

/** The side of its device that a ring held at `at` is nearest to. */
export const nearestSide = (plate: Rect, at: XYPosition): Side => {
  const dx = (at.x - (plate.x + plate.width / 2)) / plate.width;
  const dy = (at.y - (plate.y + plate.height / 2)) / plate.height;
  if (Math.abs(dx) >= Math.abs(dy)) return dx < 0 ? 'left' : 'right';
  return dy < 0 ? 'top' : 'bottom';
};

const dockReachPx = 70;

/**
 * The side that a ring docks on when it is let go at `at`; undefined when that is too far from its device, or the side
 * it is on already.
 */
export const dockingSide = (geometry: SheetGeometry, endpoint: string, at: Point): Side | undefined => {
  const ring = geometry.rings.find((candidate) => candidate.endpoint === endpoint);
  const plate = geometry.devices.find((device) => device.id === ring?.device)?.rect;
  if (ring === undefined || plate === undefined) return undefined;
  const room = {
    x: plate.x - dockReachPx,
    y: plate.y - dockReachPx,
    width: plate.width + 2 * dockReachPx,
    height: plate.height + 2 * dockReachPx,
  };
  if (!inside(room, at)) return undefined;
  const side = nearestSide(plate, at);
  return side === ring.side ? undefined : side;
};

export interface Drag {
  readonly refs: readonly ElementRef[];
  readonly dx: number;
  readonly dy: number;
}

/** What a drag moves and how far: all its nodes move by the same distance, which is read off the first. */
export const dragOf = (nodes: readonly FlowNode[], moved: readonly MovedNode[]): Drag | undefined => {
  const known = moved.flatMap((change) => {
    const node = nodes.find((candidate) => candidate.id === change.id);
    return node?.data.ref === undefined || change.position === undefined
      ? []
      : [{ node, ref: node.data.ref, to: change.position }];
  });
  const first = known[0];
  if (first === undefined) return undefined;
  return {
    refs: known.map(({ ref }) => ref),
    dx: Math.round(first.to.x - first.node.position.x),
    dy: Math.round(first.to.y - first.node.position.y),
  };
};

/**
 * A drag drawn to where it lines up: sites with sites, devices and notes with devices and notes. A band has only the grid,
 * and what has no place of its own goes as far as it is pulled.
 */
export const snapDrag = (
  design: Design,
  geometry: SheetGeometry,
  { refs, dx, dy }: Drag,
  reachPx: number,
): Snapped => {
  const moving = around(boxesOf(geometry, refs).map(({ rect }) => rect));
  if (moving === undefined) return { dx, dy, guides: [] };
  const held = (collection: Collection): ReadonlySet<string> =>
    new Set(refs.filter((ref) => ref.collection === collection).map(({ id }) => id));
  const [sites, devices, notes] = [held('sites'), held('devices'), held('notes')];
  const others = (collection: Collection, ids: readonly string[]): readonly Rect[] =>
    boxesOf(
      geometry,
      ids.map((id) => ({ collection, id })),
    ).map(({ rect }) => rect);
  const still =
    sites.size > 0
      ? others(
          'sites',
          geometry.sites.map(({ id }) => id).filter((id) => !sites.has(id)),
        )
      : devices.size + notes.size > 0
        ? [
            ...others(
              'devices',
              geometry.devices.map(({ id }) => id).filter((id) => !devices.has(id)),
            ),
            ...others(
              'notes',
              geometry.notes
                .filter(
                  ({ id }) =>
                    // One that is pinned to what moves goes along.
                    !notes.has(id) && !devices.has(design.notes[id]?.target?.id ?? ''),
                )
                .map(({ id }) => id),
            ),
          ]
        : [];
  return snapMove(moving, still, dx, dy, reachPx);
};

/** The site whose frame holds a point; of several the one in front. */
export const siteAt = (geometry: SheetGeometry, at: Point): string | undefined =>
  [...geometry.sites].reverse().find((site) => inside(site.rect, at))?.id;

/** The gateway or other device whose plate holds a point, with some room around it. */
export const deviceAt = (geometry: SheetGeometry, at: Point, roomPx = 0): string | undefined =>
  [...geometry.devices].reverse().find((device) =>
    inside(
      {
        x: device.rect.x - roomPx,
        y: device.rect.y - roomPx,
        width: device.rect.width + 2 * roomPx,
        height: device.rect.height + 2 * roomPx,
      },
      at,
    ),
  )?.id;

/**
 * The patch of a drop: the move, and for each dropped device the site whose frame it now stands in, judged by the
 * frames as they were before the drag, since a frame grows with what is pulled out of it.
 */
export const dropToPatch = (
  design: Design,
  before: SheetGeometry,
  move: MergePatch,
  dropped: readonly ElementRef[],
): MergePatch => {
  const after = applyPatch(design, move);
  const patches = dropped
    .filter((ref) => ref.collection === 'devices')
    .flatMap((ref) => {
      const at = after.layout.devices?.[ref.id];
      const size = before.devices.find((device) => device.id === ref.id)?.rect;
      if (at === undefined || size === undefined) return [];
      const site = siteAt(before, { x: at.x + size.width / 2, y: at.y + size.height / 2 });
      return site === undefined ? [] : [rehome(design, ref.id, site)];
    });
  return joinPatches(design, [move, ...patches]);
};
