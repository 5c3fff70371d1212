import { Handle, useConnection, type NodeProps } from '@xyflow/react';
import { memo, useMemo, type ReactNode } from 'react';
import type { Point, Rect } from '../../drawing/geometry.ts';
import { balloonParts } from '../../drawing/parts/balloon-part.ts';
import { bandPart } from '../../drawing/parts/band-part.ts';
import { commentSlips } from '../../drawing/parts/comment-slip.ts';
import { devicePart } from '../../drawing/parts/device-part.ts';
import { legendPart } from '../../drawing/parts/legend-part.ts';
import { pinnedNotePart, standingNotesPart } from '../../drawing/parts/notes-part.ts';
import { hopMarks } from '../../drawing/parts/hop-marks.ts';
import { framePart, paperPart } from '../../drawing/parts/paper-part.ts';
import { ringPart } from '../../drawing/parts/ring-part.ts';
import { site as siteSizes } from '../../drawing/parts/sizes.ts';
import { sitePart } from '../../drawing/parts/site-part.ts';
import { tagParts } from '../../drawing/parts/tag-part.ts';
import { trunkPart } from '../../drawing/parts/trunk-part.ts';
import { titleBlockPart } from '../../drawing/parts/title-block-part.ts';
import type { Shape } from '../../drawing/shape.ts';
import type {
  BandNode,
  DeviceNode,
  FlowNode,
  MarksNode,
  NoteNode,
  RingNode,
  SheetNode,
  SiteNode,
  TrunksNode,
} from '../design-to-flow.ts';
import { bodyHandle, pipHandle } from '../design-to-flow.ts';
import { useDrawing } from '../drawing-context.ts';
import { useDesk } from '../desk-state.ts';
import { refAt } from '../ref-at.ts';
import { FaultMarks } from './fault-marks.tsx';
import { FlagNode } from './flag-node.tsx';
import { NoteEditor } from './note-editor.tsx';
import { Shapes } from '../../components/shapes.tsx';

/** An SVG whose inside is the sheet's world, whatever corner of it the node begins at. */
function World({
  origin,
  silent = true,
  children,
}: {
  readonly origin: Point;
  /** Nothing in it is for a screen reader: the node itself has a name. */
  readonly silent?: boolean;
  readonly children: ReactNode;
}) {
  return (
    <svg className="part" width={1} height={1} aria-hidden={silent || undefined}>
      <g transform={`translate(${-origin.x} ${-origin.y})`}>{children}</g>
    </svg>
  );
}

function Part({ origin, shapes }: { readonly origin: Point; readonly shapes: readonly Shape[] }) {
  return (
    <World origin={origin}>
      <Shapes shapes={shapes} />
    </World>
  );
}

/** A place to start or end a connection; it shows nothing of its own. */
function Grip({
  id,
  handle,
  body = false,
}: {
  readonly id: string;
  readonly handle: Rect;
  readonly body?: boolean;
}) {
  const { editable } = useDrawing();
  const connecting = useConnection((connection) => connection.inProgress);
  return (
    <Handle
      id={id}
      type="source"
      position={'top' as never}
      isConnectable={editable}
      className={body ? 'grip grip-body' : 'grip'}
      style={{
        left: handle.x,
        top: handle.y,
        width: handle.width,
        height: handle.height,
        // A body only takes what is dropped on it: a drag that starts there moves the device.
        pointerEvents: editable && (!body || connecting) ? 'all' : 'none',
      }}
    />
  );
}

const Sheet = memo(function Sheet({ data }: NodeProps<SheetNode>) {
  const { facts, look, geometry } = useDrawing();
  const shapes = useMemo(
    () => [
      paperPart(data.frame),
      framePart(data.frame, look.level),
      standingNotesPart(geometry, facts, look),
      legendPart(data.frame, facts.segments, look.level),
      titleBlockPart(data.frame, facts.titleBlock, look.level),
    ],
    [data.frame, facts, look, geometry],
  );
  return (
    <>
      <div className="sheet-shadow" style={{ width: data.frame.width, height: data.frame.height }} />
      <Part origin={{ x: 0, y: 0 }} shapes={shapes.filter((shape) => shape !== undefined)} />
    </>
  );
});

const Site = memo(function Site({ data }: NodeProps<SiteNode>) {
  const { facts, look } = useDrawing();
  const { site } = data;
  const shapes = useMemo(() => [sitePart(site, facts, look)], [site, facts, look]);
  const { width, height } = site.rect;
  const plate: readonly (readonly [string, Rect])[] = [['plate', { x: 0, y: 0, width, height }]];
  const edges: readonly (readonly [string, Rect])[] = [
    ['name', { x: siteSizes.nameAt - 8, y: -14, width: Math.min(width - 40, 200), height: 28 }],
    ['top', { x: 0, y: -5, width, height: 10 }],
    ['bottom', { x: 0, y: height - 5, width, height: 10 }],
    ['left', { x: -5, y: 0, width: 10, height }],
    ['right', { x: width - 5, y: 0, width: 10, height }],
  ];
  return (
    <>
      <Part origin={site.rect} shapes={shapes} />
      {[...edges, ...(site.collapsed ? plate : [])].map(([name, edge]) => (
        <div
          key={name}
          className="site-edge"
          style={{ left: edge.x, top: edge.y, width: edge.width, height: edge.height }}
        />
      ))}
    </>
  );
});

const Band = memo(function Band({ data, positionAbsoluteX, positionAbsoluteY }: NodeProps<BandNode>) {
  const { facts, look, geometry } = useDrawing();
  const { band } = data;
  const origin = { x: positionAbsoluteX, y: positionAbsoluteY };
  const shapes = useMemo(
    () => [bandPart(band, geometry.sheet, facts, look)],
    [band, geometry.sheet, facts, look],
  );
  const rects = [...band.limbs, ...(band.header === undefined ? [] : [band.header])];
  return (
    <>
      <Part origin={origin} shapes={shapes} />
      {rects.map((rect, i) => (
        <div
          key={i}
          className="band-body"
          style={{ left: rect.x - origin.x, top: rect.y - origin.y, width: rect.width, height: rect.height }}
        />
      ))}
      <Grip
        id={bodyHandle}
        body
        handle={{
          x: rects[0]!.x - origin.x,
          y: rects[0]!.y - origin.y,
          width: rects[0]!.width,
          height: rects[0]!.height,
        }}
      />
    </>
  );
});

const Device = memo(function Device({ data }: NodeProps<DeviceNode>) {
  const { facts, look } = useDrawing();
  const { device } = data;
  const shapes = useMemo(() => [devicePart(device, facts, look)], [device, facts, look]);
  const half = 12;
  return (
    <>
      <Part origin={device.rect} shapes={shapes} />
      <Grip
        id={bodyHandle}
        body
        handle={{ x: 0, y: 0, width: device.rect.width, height: device.rect.height }}
      />
      {device.pips.map((pip) => (
        <Grip
          key={pipHandle(pip)}
          id={pipHandle(pip)}
          handle={{
            x: pip.at.x - device.rect.x - half,
            y: pip.at.y - device.rect.y - half,
            width: 2 * half,
            height: 2 * half,
          }}
        />
      ))}
    </>
  );
});

const Ring = memo(function Ring({ data, positionAbsoluteX, positionAbsoluteY }: NodeProps<RingNode>) {
  const { facts, look } = useDrawing();
  const { ring } = data;
  const shapes = useMemo(() => [ringPart(ring, facts, look)], [ring, facts, look]);
  const rim = Math.round(ring.centre.x - positionAbsoluteX) * 2;
  return (
    <>
      <Part origin={{ x: positionAbsoluteX, y: positionAbsoluteY }} shapes={shapes} />
      <Grip id={bodyHandle} handle={{ x: 0, y: 0, width: rim, height: rim }} />
    </>
  );
});

const Note = memo(function Note({ data }: NodeProps<NoteNode>) {
  const { facts, look, geometry, editable } = useDrawing();
  const isEdited = useDesk((state) => state.editedNote === data.note) && editable;
  const shapes = useMemo(
    () => [pinnedNotePart(data.note, geometry, facts, look)],
    [data.note, geometry, facts, look],
  );
  return (
    <>
      <Part origin={data.rect} shapes={shapes.filter((shape) => shape !== undefined)} />
      {isEdited && <NoteEditor note={data.note} widthPx={data.rect.width} heightPx={data.rect.height} />}
    </>
  );
});

const Trunks = memo(function Trunks(_props: NodeProps<TrunksNode>) {
  const { facts, look, geometry } = useDrawing();
  const shapes = useMemo(
    () => geometry.trunks.map((trunk) => trunkPart(trunk, geometry, facts, look)),
    [geometry, facts, look],
  );
  return <Part origin={{ x: 0, y: 0 }} shapes={shapes} />;
});

function Balloons() {
  const { facts, look, geometry, pickBalloon } = useDrawing();
  const balloons = useMemo(() => balloonParts(geometry, facts, look), [geometry, facts, look]);
  return balloons.map((shape) => (
    // The list of findings is the keyboard's way to the same.

    <g
      key={shape.key}
      aria-hidden="true"
      className="balloon-button"
      onClick={(event) => {
        event.stopPropagation();
        pickBalloon(Number(shape.key?.split('-')[1]));
      }}
    >
      <Shapes shapes={[shape]} />
    </g>
  ));
}

/** Slips of open threads; the drawer's list of them is the keyboard's way to the same. */
function Slips() {
  const { facts, look, geometry, pickFlag } = useDrawing();
  const slips = useMemo(() => commentSlips(geometry, facts, look), [geometry, facts, look]);
  return slips.map((shape) => (
    <g
      key={shape.key}
      aria-hidden="true"
      className="balloon-button"
      onClick={(event) => {
        event.stopPropagation();
        const ref = refAt(event.target as Element);
        if (ref !== undefined) pickFlag(ref);
      }}
    >
      <Shapes shapes={[shape]} />
    </g>
  ));
}

/** Numbers of a trace's hops; the trace's own list says the same. */
function Hops() {
  const { facts, look, geometry } = useDrawing();
  const shapes = useMemo(() => hopMarks(geometry, facts, look), [geometry, facts, look]);
  return (
    <g aria-hidden="true">
      <Shapes shapes={shapes} />
    </g>
  );
}

/** What a result says beside elements; its list says the same to who can't see it. */
function Tags() {
  const { facts, look, geometry } = useDrawing();
  const shapes = useMemo(() => tagParts(geometry, facts, look), [geometry, facts, look]);
  return (
    <g aria-hidden="true">
      <Shapes shapes={shapes} />
    </g>
  );
}

const Marks = memo(function Marks(_props: NodeProps<MarksNode>) {
  return (
    <World origin={{ x: 0, y: 0 }} silent={false}>
      <FaultMarks />
      <Tags />
      <Hops />
      <Balloons />
      <Slips />
    </World>
  );
});

export const nodeTypes = {
  sheet: Sheet,
  site: Site,
  band: Band,
  device: Device,
  onward: FlagNode,
  ring: Ring,
  note: Note,
  trunks: Trunks,
  marks: Marks,
} satisfies Record<FlowNode['type'] & string, unknown>;
