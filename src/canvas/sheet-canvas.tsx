import {
  ConnectionMode,
  ReactFlow,
  SelectionMode,
  useReactFlow,
  type Connection,
  type EdgeChange,
  type FinalConnectionState,
  type NodeChange,
} from '@xyflow/react';
import { useCallback, useMemo, useState, type DragEvent, type KeyboardEvent, type MouseEvent } from 'react';
import { showToast } from '../components/toast.tsx';
import type { Decorations, Tone } from '../drawing/decorations.ts';
import { elementKey } from '../drawing/decorations.ts';
import { sheetOfDesign } from '../drawing/sheets/draw-sheet.ts';
import { levelOf, type Level } from '../drawing/parts/level-of-detail.ts';
import type { ElementRef } from '../engine/model/design.ts';
import { useNumbering } from '../workspace/checks-context.tsx';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { isCollapsed } from '../workspace/operations/collapse-sites.ts';
import { dockEndpoint, isLocked } from '../workspace/operations/move-parts.ts';
import { useElementActions } from './actions/use-element-actions.ts';
import { connectEnds, endOf, whyNotConnect, type ConnectEnd } from './connect-ends.ts';
import { designToFlow, type FlowEdge, type FlowNode } from './design-to-flow.ts';
import { askToJoin, editNote, openMenu, setFitted, startPlacing, useDesk } from './desk-state.ts';
import { DrawingContext, type Drawing } from './drawing-context.ts';
import { edgeTypes } from './edges/part-edges.tsx';
import { dockingSide } from './flow-changes-to-patch.ts';
import { useDrawn } from './geometry-context.tsx';
import { nodeTypes } from './nodes/part-nodes.tsx';
import { pinNoteBeside } from './place-note.ts';
import { endAt, isJoining, placePart, type TrayPart } from './place-part.ts';
import { PullLine } from './pull-line.tsx';
import { readPartDrag } from './parts-tray/part-drag.ts';
import { portNear } from './port-near.ts';
import { elementAt, refAt } from './ref-at.ts';
import { CrowdedNotice, EmptySheetHint, SheetHint, ViewNotice } from './sheet-hints.tsx';
import { SheetTurner } from './sheet-turner.tsx';
import { SnapGuides } from './snap-guides.tsx';
import { useKeptFit } from './use-kept-fit.ts';
import { useMoving } from './use-moving.ts';
import { useTurnToSelection } from './use-turn-to-selection.ts';
import { useViewed } from './use-viewed.ts';
import { useView, zoomLimits } from './use-view.ts';

interface SheetCanvasProps {
  /** What features want shown on top of the drawing. */
  readonly decorations: Decorations;
  /** Takes every press on a part, by pointer or key, instead of selecting it. */
  readonly onPick?: ((ref: ElementRef) => void) | undefined;
  readonly onAcceptGhost: (id: string) => void;
  /** A balloon was pressed; its number is the finding's. */
  readonly onPickBalloon: (number: number) => void;
  /** The slip of an element's threads was pressed. */
  readonly onPickFlag?: (ref: ElementRef) => void;
}

// Below this many parts drawing them all is cheaper than deciding which are in view.
const cullFrom = 400;

const useLevel = (zoom: number): Level => {
  const [level, setLevel] = useState(() => levelOf(zoom));
  const next = levelOf(zoom, level);
  if (next !== level) setLevel(next);
  return next;
};

/** What is selected stands out; a site that keeps it back stands out for it. */
const tonesWith = (
  decorations: Decorations,
  selection: readonly ElementRef[],
  siteOf: (ref: ElementRef) => string | undefined,
): Decorations => {
  if (selection.length === 0) return decorations;
  const tones: { [key: string]: readonly Tone[] } = { ...decorations.tones };
  for (const ref of selection) {
    const site = siteOf(ref);
    const key = elementKey(site === undefined ? ref : { collection: 'sites', id: site });
    tones[key] = [...(tones[key] ?? []), 'selected'];
  }
  return { ...decorations, tones };
};

/** The sheet: everything of the design that is drawn, to be looked at, selected, moved and connected. */
export function SheetCanvas({
  decorations,
  onPick,
  onAcceptGhost,
  onPickBalloon,
  onPickFlag,
}: SheetCanvasProps) {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const design = useOpenState((state) => state.document);
  const editable = useOpenState((state) => state.editable);
  const selection = useOpenState((state) => state.selection);
  const { settled, facts, drag, onSheet, sheet } = useDrawn();
  const { geometry, decorations: marks, visibilityOf } = useViewed(decorations);
  const flow = useReactFlow<FlowNode, FlowEdge>();
  const view = useView();
  const level = useLevel(view.zoom);
  const tool = useDesk((state) => state.tool);
  const placing = useDesk((state) => state.placing);
  const firstEnd = useDesk((state) => state.firstEnd);

  const look = useMemo(
    () => ({
      level,
      decorations: tonesWith(marks, selection, ({ collection, id }) => {
        const isHidden = collection === 'devices' && !settled.devices.some((device) => device.id === id);
        return isHidden ? design.devices[id]?.site : undefined;
      }),
    }),
    [level, marks, selection, settled, design],
  );
  const drawing = useMemo<Drawing>(
    () => ({
      geometry,
      facts,
      look,
      editable,
      acceptGhost: onAcceptGhost,
      pickBalloon: onPickBalloon,
      pickFlag: (ref) => onPickFlag?.(ref),
    }),
    [geometry, facts, look, editable, onAcceptGhost, onPickBalloon, onPickFlag],
  );
  const selected = useMemo(
    () => new Set(selection.map(({ collection, id }) => elementKey({ collection, id }))),
    [selection],
  );
  const { nodes, edges } = useMemo(
    () =>
      designToFlow({
        design: onSheet,
        geometry,
        facts,
        selected,
        editable,
        isLocked: (ref) => isLocked(onSheet, ref),
        visibilityOf,
      }),
    [onSheet, geometry, facts, selected, editable, visibilityOf],
  );
  // Moves are measured from where things stood when the drag began.
  const settledNodes = useMemo(
    () =>
      drag === undefined
        ? nodes
        : designToFlow({
            design: sheetOfDesign(design, sheet.number).design,
            geometry: settled,
            facts,
            selected,
            editable,
            isLocked: (ref) => isLocked(design, ref),
          }).nodes,
    [drag, nodes, design, sheet.number, settled, facts, selected, editable],
  );

  const say = useCallback((why: string): void => void showToast({ tone: 'failed', text: why }), []);

  const moving = useMoving(settledNodes, view.zoom);
  const onNodesChange = (changes: NodeChange<FlowNode>[]): void => {
    const picks = changes.filter((change) => change.type === 'select');
    if (picks.length > 0) changeSelection(picks);
    moving.onChanges(changes);
  };

  // ---- selecting ----------------------------------------------------------------------------------------------
  const changeSelection = (
    picks: readonly { readonly type: 'select'; readonly id: string; readonly selected: boolean }[],
  ): void => {
    if (onPick !== undefined) return;
    const refs = new Map(
      open.store
        .getState()
        .selection.map((ref) => [elementKey({ collection: ref.collection, id: ref.id }), ref]),
    );
    for (const pick of picks) {
      const part = [...nodes, ...edges].find((one) => one.id === pick.id);
      // A flag for many leads to their sheet; one for a single device leads to it by selecting it.
      if (part?.type === 'onward' && pick.selected && part.data.flag.device === undefined)
        sheet.turnTo(part.data.flag.sheet);
      const ref = part?.data?.ref;
      if (ref === undefined) continue;
      const key = elementKey(ref);
      if (!pick.selected) refs.delete(key);
      else if (!refs.has(key)) refs.set(key, ref);
    }
    open.select([...refs.values()]);
  };
  const onEdgesChange = (changes: EdgeChange<FlowEdge>[]): void => {
    const picks = changes.filter((change) => change.type === 'select');
    if (picks.length > 0) changeSelection(picks);
  };
  /** A pip, a ferrule or a cord under the pointer is meant more than the node that it belongs to. */
  const onPartClick = (event: MouseEvent, part: FlowNode | FlowEdge): void => {
    const ref = refAt(event.target as Element);
    if (onPick !== undefined) {
      const whole = ref ?? part.data?.ref;
      const at = flow.screenToFlowPosition({ x: event.clientX, y: event.clientY });
      if (whole !== undefined) onPick(portNear(geometry, whole, at));
      return;
    }
    if (ref !== undefined && !event.shiftKey && !event.metaKey && !event.ctrlKey) open.select([ref]);
  };

  // ---- connecting ---------------------------------------------------------------------------------------------
  const connect = (a: ConnectEnd, b: ConnectEnd): void => {
    const result = connectEnds(design, a, b, newEntryId);
    if ('ask' in result)
      return askToJoin({
        kind: 'tunnel',
        a: { kind: 'endpoint', id: result.a },
        b: { kind: 'endpoint', id: result.b },
      });
    const done = perform(open, result);
    if (!done.ok) say(done.why);
  };
  const endsOf = (connection: Pick<Connection, 'source' | 'sourceHandle' | 'target' | 'targetHandle'>) =>
    [
      endOf(connection.source, connection.sourceHandle),
      endOf(connection.target, connection.targetHandle),
    ] as const;
  const isValidConnection = (connection: Connection | FlowEdge): boolean => {
    const [a, b] = endsOf(connection as Connection);
    return a !== undefined && b !== undefined && whyNotConnect(design, a, b) === undefined;
  };
  const onConnect = (connection: Connection): void => {
    const [a, b] = endsOf(connection);
    if (a !== undefined && b !== undefined) connect(a, b);
  };
  const onConnectEnd = (event: globalThis.MouseEvent | TouchEvent, state: FinalConnectionState): void => {
    if (state.isValid === true || state.fromNode === null) return;
    const a = endOf(state.fromNode.id, state.fromHandle?.id);
    if (a?.kind === 'endpoint' && dockAt(a.id, event)) return;
    const b = state.toNode === null ? undefined : endOf(state.toNode.id, state.toHandle?.id);
    if (a === undefined || b === undefined || JSON.stringify(a) === JSON.stringify(b)) return;
    const why = whyNotConnect(design, a, b);
    if (why !== undefined) say(why);
  };
  /** A ring that is let go beside its own device docks on that side of it. */
  const dockAt = (endpoint: string, event: globalThis.MouseEvent | TouchEvent): boolean => {
    const at = 'changedTouches' in event ? event.changedTouches[0] : event;
    if (at === undefined) return false;
    const side = dockingSide(settled, endpoint, flow.screenToFlowPosition({ x: at.clientX, y: at.clientY }));
    if (side === undefined) return false;
    const done = perform(open, dockEndpoint(design, endpoint, side));
    if (!done.ok) say(done.why);
    return true;
  };

  // ---- placing from the tray ----------------------------------------------------------------------------------
  const put = (part: TrayPart, at: { readonly x: number; readonly y: number }, on: EventTarget): void => {
    if (isJoining(part)) {
      const end = endAt(settled, at);
      if (end === undefined)
        return say(
          part === 'tunnel'
            ? 'Pick a ring, then the ring at the other end.'
            : 'Pick a device, then the one at the other end.',
        );
      if (firstEnd === undefined) return useDesk.setState({ firstEnd: end });
      if (part === 'cable') {
        connect(firstEnd, end);
        startPlacing(undefined);
      } else askToJoin({ kind: part, a: firstEnd, b: end });
      return;
    }
    // A note that is put down on something is pinned to it.
    const about = part === 'note' && on instanceof Element ? elementAt(on) : undefined;
    const pinned = about === undefined ? undefined : pinNoteBeside(design, settled, about, newEntryId);
    const done = perform(
      open,
      pinned?.ok === true ? pinned : placePart(design, settled, part, at, newEntryId, numbering),
    );
    if (!done.ok) return say(done.why);
    startPlacing(undefined);
    if (part === 'note') editNote(open.store.getState().selection[0]?.id, true);
  };
  const onClickCapture = (event: MouseEvent): void => {
    if (placing === undefined || !editable) return;
    event.stopPropagation();
    put(placing, flow.screenToFlowPosition({ x: event.clientX, y: event.clientY }), event.target);
  };
  const onDrop = (event: DragEvent): void => {
    const part = readPartDrag(event.dataTransfer);
    if (part === undefined || !editable) return;
    event.preventDefault();
    put(part, flow.screenToFlowPosition({ x: event.clientX, y: event.clientY }), event.target);
  };
  // ---- menus and double presses -------------------------------------------------------------------------------
  const actions = useElementActions();
  const onContextMenu = (event: MouseEvent): void => {
    event.preventDefault();
    // The menu key comes as a key as well, and knows better where to open it; a long press comes only so.
    const { pointerType } = event.nativeEvent as PointerEvent;
    if ((event.button !== 2 && pointerType !== 'touch') || placing !== undefined) return;
    const ref = elementAt(event.target as Element);
    // The menu first: while it is open the sheet stays where it is, whatever the selection opens beside it.
    openMenu({
      at: { x: event.clientX, y: event.clientY },
      of: 'all',
      ...(ref === undefined ? {} : { ref }),
    });
    if (ref !== undefined && !selection.some((one) => elementKey(one) === elementKey(ref)))
      open.select([ref]);
  };
  /** Opens what there is to open: a site, a note's words, the inspector. */
  const onDoubleClick = (event: MouseEvent): void => {
    const ref = elementAt(event.target as Element);
    if (ref === undefined || onPick !== undefined || placing !== undefined) return;
    const site = ref.collection === 'devices' ? design.devices[ref.id]?.site : ref.id;
    const isSite = ref.collection === 'sites' || (site !== undefined && isCollapsed(design, site));
    if (editable && site !== undefined && isSite) actions.setCollapsed([site], !isCollapsed(design, site));
    else if (editable && ref.collection === 'notes') actions.rename({ ref });
    else actions.inspect({ ref });
  };

  const onKeyDown = (event: KeyboardEvent): void => {
    if (onPick !== undefined && (event.key === 'Enter' || event.key === ' ')) {
      const focused = (event.target as Element).closest('.react-flow__node, .react-flow__edge');
      const id = focused?.getAttribute('data-id');
      const ref = [...nodes, ...edges].find((part) => part.id === id)?.data?.ref;
      if (ref !== undefined) onPick(ref);
    }
    if (event.key === 'Escape' && placing !== undefined) startPlacing(undefined);
  };

  useKeptFit(geometry.sheet, view);
  useTurnToSelection(view);

  return (
    <DrawingContext value={drawing}>
      {/* The parts inside take focus and keys themselves; this only catches what passes through. */}
      {/* eslint-disable-next-line jsx-a11y/no-static-element-interactions */}
      <div
        className="sheet-canvas"
        data-placing={placing}
        data-tool={tool}
        onClickCapture={onClickCapture}
        onDragOver={(event) => {
          if (editable && event.dataTransfer.types.includes('application/x-longpatch-part'))
            event.preventDefault();
        }}
        onDrop={onDrop}
        onKeyDown={onKeyDown}
        onContextMenu={onContextMenu}
        onPointerMoveCapture={moving.onPointerMove}
      >
        <ReactFlow<FlowNode, FlowEdge>
          nodes={nodes}
          edges={edges}
          nodeTypes={nodeTypes}
          edgeTypes={edgeTypes}
          onNodesChange={onNodesChange}
          onEdgesChange={onEdgesChange}
          onNodeClick={onPartClick}
          onEdgeClick={onPartClick}
          onMoveStart={(event) => {
            // Without an event the move is a fit of our own.
            if (event !== null) setFitted(false);
          }}
          onNodeDoubleClick={onDoubleClick}
          onEdgeDoubleClick={onDoubleClick}
          onPaneClick={() => open.select([])}
          onConnect={onConnect}
          onConnectEnd={onConnectEnd}
          isValidConnection={isValidConnection}
          connectionMode={ConnectionMode.Loose}
          connectionRadius={16}
          connectOnClick={false}
          connectionLineComponent={PullLine}
          nodesConnectable={editable}
          selectionOnDrag={tool === 'select'}
          panOnDrag={tool === 'pan' ? [0, 1] : [1]}
          selectionMode={SelectionMode.Full}
          panOnScroll
          zoomOnDoubleClick={false}
          minZoom={zoomLimits.least}
          maxZoom={zoomLimits.most}
          multiSelectionKeyCode={['Meta', 'Control', 'Shift']}
          selectionKeyCode={null}
          deleteKeyCode={null}
          elevateNodesOnSelect={false}
          elevateEdgesOnSelect={false}
          onlyRenderVisibleElements={nodes.length + edges.length > cullFrom}
          proOptions={{ hideAttribution: true }}
          aria-label={`Sheet of ${design.meta.title}`}
        >
          <SnapGuides guides={moving.guides} />
        </ReactFlow>
        <CrowdedNotice />
        <EmptySheetHint />
        <SheetHint />
        <ViewNotice />
        <SheetTurner />
      </div>
    </DrawingContext>
  );
}
