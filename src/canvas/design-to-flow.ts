import type { Edge, Node, NodeHandle } from '@xyflow/react';
import { Position } from '@xyflow/react';
import { elementKey } from '../drawing/decorations.ts';
import type {
  BandGeometry,
  CableGeometry,
  DeviceGeometry,
  FlagGeometry,
  JacketGeometry,
  LaneGeometry,
  PipGeometry,
  Point,
  Rect,
  RingGeometry,
  SheetFrame,
  SheetGeometry,
  SiteGeometry,
} from '../drawing/geometry.ts';
import type { DrawingFacts } from '../drawing/parts/drawing-facts.ts';
import { pip as pipSize } from '../drawing/parts/sizes.ts';
import { fadedOpacity, type VisibilityOf } from '../drawing/view-layers.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import type { Side } from '../engine/model/layout.ts';
import { kindOf, nameOf } from '../workspace/operations/name-of.ts';

/** What a node of each kind draws; origins are the node's top left corner in world pixels. */
interface Common {
  readonly [key: string]: unknown;
  readonly ref?: ElementRef;
}
export type SheetNode = Node<Common & { readonly frame: SheetFrame }, 'sheet'>;
export type SiteNode = Node<Common & { readonly site: SiteGeometry }, 'site'>;
export type BandNode = Node<Common & { readonly band: BandGeometry }, 'band'>;
export type DeviceNode = Node<Common & { readonly device: DeviceGeometry }, 'device'>;
/** A flag that leads on to another sheet. */
export type OnwardNode = Node<Common & { readonly flag: FlagGeometry }, 'onward'>;
export type RingNode = Node<Common & { readonly ring: RingGeometry }, 'ring'>;
export type NoteNode = Node<Common & { readonly note: string; readonly rect: Rect }, 'note'>;
/** The trunks of manifolds, drawn under the jackets that leave them. */
export type TrunksNode = Node<Common, 'trunks'>;
export type MarksNode = Node<Common, 'marks'>;
export type FlowNode =
  SheetNode | SiteNode | BandNode | DeviceNode | OnwardNode | RingNode | NoteNode | TrunksNode | MarksNode;

export type CableEdge = Edge<Common & { readonly cable: CableGeometry }, 'cable'>;
export type JacketEdge = Edge<Common & { readonly jacket: JacketGeometry }, 'jacket'>;
/** One tunnel inside its jacket: nothing of its own to see, but something to point at, focus and select. */
export type CordEdge = Edge<Common & { readonly lane: LaneGeometry }, 'cord'>;
export type FlowEdge = CableEdge | JacketEdge | CordEdge;

/** Order from the back, as on the printed sheet. */
const depth = {
  sheet: 0,
  site: 1,
  band: 2,
  cable: 3,
  jacket: 4,
  cord: 5,
  device: 6,
  ring: 7,
  note: 8,
  marks: 9,
} as const;

const positions: { readonly [side in Side]: Position } = {
  left: Position.Left,
  right: Position.Right,
  top: Position.Top,
  bottom: Position.Bottom,
};

/** A handle's id for a pip, and back. */
export const pipHandle = (pip: Pick<PipGeometry, 'port' | 'member'>): string =>
  `port:${pip.port}${pip.member === undefined ? '' : `@${pip.member}`}`;
export const readPipHandle = (
  handle: string,
): { readonly port: string; readonly member?: 1 | 2 } | undefined => {
  const match = /^port:(.+?)(?:@([12]))?$/.exec(handle);
  return match === null
    ? undefined
    : { port: match[1]!, ...(match[2] === undefined ? {} : { member: Number(match[2]) as 1 | 2 }) };
};
/** The handle that stands for a whole device, ring or band. */
export const bodyHandle = 'body';

const handleAt = (id: string, at: Point, origin: Point, side: Side, size: number): NodeHandle => ({
  id,
  type: 'source',
  position: positions[side],
  x: at.x - origin.x - size / 2,
  y: at.y - origin.y - size / 2,
  width: size,
  height: size,
});

const bodyOf = (rect: Rect, origin: Point): NodeHandle => ({
  id: bodyHandle,
  type: 'source',
  position: Position.Top,
  x: rect.x - origin.x,
  y: rect.y - origin.y,
  width: rect.width,
  height: rect.height,
});

const boundsOf = (rects: readonly Rect[]): Rect => {
  const x = Math.min(...rects.map((rect) => rect.x));
  const y = Math.min(...rects.map((rect) => rect.y));
  return {
    x,
    y,
    width: Math.max(...rects.map((rect) => rect.x + rect.width)) - x,
    height: Math.max(...rects.map((rect) => rect.y + rect.height)) - y,
  };
};

const box = (rect: Rect) => ({ position: { x: rect.x, y: rect.y }, width: rect.width, height: rect.height });

/** What the sheet looks like to the canvas library, from the design and its geometry. */
export interface FlowInput {
  readonly design: Design;
  readonly geometry: SheetGeometry;
  readonly facts: DrawingFacts;
  readonly selected: ReadonlySet<string>;
  readonly editable: boolean;
  readonly isLocked: (ref: ElementRef) => boolean;
  /** Absent where nothing is ground only. */
  readonly visibilityOf?: VisibilityOf | undefined;
}

export const designToFlow = (
  input: FlowInput,
): { readonly nodes: FlowNode[]; readonly edges: FlowEdge[] } => ({
  nodes: nodesOf(input),
  edges: edgesOf(input),
});

const labelOf = (design: Design, ref: ElementRef): string => `${kindOf(design, ref)} ${nameOf(design, ref)}`;

const nodesOf = (input: FlowInput): FlowNode[] => {
  const { design, geometry, selected, editable, isLocked, visibilityOf } = input;
  const isGround = (ref: ElementRef): boolean => visibilityOf?.(ref) === 'faded';
  const groundStyle = (ref: ElementRef) => (isGround(ref) ? { opacity: fadedOpacity } : {});
  const part = (ref: ElementRef) => ({
    id: elementKey(ref),
    selected: selected.has(elementKey(ref)),
    draggable: editable && !isLocked(ref),
    ariaLabel: labelOf(design, ref),
  });
  const { sheet } = geometry;
  const whole = { x: 0, y: 0, width: sheet.width, height: sheet.height };
  const nodes: FlowNode[] = [
    {
      id: 'sheet',
      type: 'sheet',
      ...box(whole),
      data: { frame: sheet },
      // The paper is ground: a marquee may start on it, a click on it deselects.
      style: { pointerEvents: 'none' },
      zIndex: depth.sheet,
      ...still,
    },
  ];
  for (const site of geometry.sites) {
    const ref: ElementRef = { collection: 'sites', id: site.id };
    // The frame's inside belongs to the sheet: a marquee may start there. A collapsed one is a plate to be held.
    nodes.push({
      ...part(ref),
      type: 'site',
      ...box(site.rect),
      data: { ref, site },
      zIndex: depth.site,
      style: { pointerEvents: 'none' },
    });
  }
  for (const band of geometry.bands) {
    const ref: ElementRef = { collection: 'transports', id: band.id };
    const bounds = boundsOf([...band.limbs, ...(band.header === undefined ? [] : [band.header])]);
    nodes.push({
      ...part(ref),
      type: 'band',
      ...box(bounds),
      handles: [bodyOf(bounds, bounds)],
      data: { ref, band },
      zIndex: depth.band,
      style: { pointerEvents: 'none', ...groundStyle(ref) },
    });
  }
  for (const device of geometry.devices) {
    const ref: ElementRef = { collection: 'devices', id: device.id };
    nodes.push({
      ...part(ref),
      type: 'device',
      ...box(device.rect),
      handles: [
        bodyOf(device.rect, device.rect),
        ...device.pips.map((pip) => handleAt(pipHandle(pip), pip.at, device.rect, pip.side, pipSize.hitArea)),
      ],
      data: { ref, device },
      zIndex: depth.device,
      style: groundStyle(ref),
    });
  }
  for (const flag of geometry.flags ?? []) {
    const ref: ElementRef = { collection: 'devices', id: flag.id };
    nodes.push({
      id: elementKey(ref),
      type: 'onward',
      ...box(flag.rect),
      handles: [bodyOf(flag.rect, flag.rect)],
      ...(flag.device === undefined ? { data: { flag } } : { data: { ref, flag } }),
      selected: flag.device !== undefined && selected.has(elementKey(ref)),
      ariaLabel: `Go to ${[flag.head.toLowerCase(), ...flag.lines].join(', ')}`,
      draggable: false,
      connectable: false,
      deletable: false,
      zIndex: depth.device,
    });
  }
  for (const ring of geometry.rings) {
    const ref: ElementRef = { collection: 'endpoints', id: ring.endpoint };
    const bounds = { x: ring.centre.x - 14, y: ring.centre.y - 14, width: 28, height: 28 };
    nodes.push({
      ...part(ref),
      type: 'ring',
      ...box(bounds),
      handles: [bodyOf(bounds, bounds)],
      data: { ref, ring },
      zIndex: depth.ring,
    });
  }
  for (const note of geometry.notes) {
    if (note.standing) continue;
    const ref: ElementRef = { collection: 'notes', id: note.id };
    nodes.push({
      ...part(ref),
      type: 'note',
      ...box(note.rect),
      data: { ref, note: note.id, rect: note.rect },
      zIndex: depth.note,
      style: groundStyle(ref),
    });
  }
  const overlay = { ...box(whole), data: {}, style: { pointerEvents: 'none' as const }, ...still };
  if (geometry.trunks.length > 0)
    nodes.push({ id: 'trunks', type: 'trunks', zIndex: depth.jacket, ...overlay });
  nodes.push({ id: 'marks', type: 'marks', zIndex: depth.marks, ...overlay });
  return nodes;
};

const still = {
  draggable: false,
  selectable: false,
  focusable: false,
  connectable: false,
  deletable: false,
} as const;

const edgesOf = ({ design, geometry, selected }: FlowInput): FlowEdge[] => {
  const part = (ref: ElementRef) => ({
    id: elementKey(ref),
    selected: selected.has(elementKey(ref)),
    ariaLabel: labelOf(design, ref),
  });
  const edges: FlowEdge[] = [];
  const drawn = new Set([...geometry.devices, ...(geometry.flags ?? [])].map(({ id }) => id));
  for (const cable of geometry.cables) {
    const id = cable.links[0]!;
    const link = design.links[id];
    if (link === undefined) continue;
    const ref: ElementRef = { collection: 'links', id };
    // Both members of a pair land the same link, each by a line of its own.
    const line = edges.filter(
      (edge) => edge.data?.ref?.collection === 'links' && edge.data.ref.id === id,
    ).length;
    const from = link.kind === 'cable' ? link.a.device : link.device;
    const to =
      link.kind === 'cable'
        ? elementKey({ collection: 'devices', id: link.b.device })
        : elementKey({ collection: 'transports', id: link.transport });
    if (!drawn.has(from)) continue;
    edges.push({
      ...part(ref),
      id: line === 0 ? elementKey(ref) : `${elementKey(ref)}#${line}`,
      type: 'cable',
      source: elementKey({ collection: 'devices', id: from }),
      sourceHandle: bodyHandle,
      target: to,
      targetHandle: bodyHandle,
      data: { ref, cable },
      zIndex: depth.cable,
    });
  }
  for (const jacket of geometry.jackets) {
    const ref: ElementRef = {
      collection: jacket.kind === 'jacket' ? 'associations' : 'tunnels',
      id: jacket.id,
    };
    const first = design.tunnels[jacket.lanes[0]?.tunnel ?? ''];
    if (first === undefined) continue;
    const ends = {
      source: elementKey({ collection: 'endpoints', id: first.a.endpoint }),
      sourceHandle: bodyHandle,
      target: elementKey({ collection: 'endpoints', id: first.b.endpoint }),
      targetHandle: bodyHandle,
    };
    edges.push({
      ...part(ref),
      id: `${elementKey(ref)}#${jacket.part ?? 0}`,
      type: 'jacket',
      ...ends,
      data: { ref, jacket },
      zIndex: depth.jacket,
    });
    if (jacket.kind === 'bare') continue;
    for (const lane of jacket.lanes) {
      const cord: ElementRef = { collection: 'tunnels', id: lane.tunnel };
      edges.push({ ...part(cord), type: 'cord', ...ends, data: { ref: cord, lane }, zIndex: depth.cord });
    }
  }
  return edges;
};
