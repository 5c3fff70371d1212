import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { ReactFlow, ReactFlowProvider, type Edge, type Node } from '@xyflow/react';
import '@xyflow/react/dist/base.css';
import { useEffect } from 'react';
import { createRoot } from 'react-dom/client';
import { MemoryRouter } from 'react-router-dom';
import '../../../src/styles/main.css';
import '../../../src/canvas/canvas.css';
import { GeometryProvider, useDrawn } from '../../../src/canvas/geometry-context.tsx';
import { designToFlow } from '../../../src/canvas/design-to-flow.ts';
import { SheetCanvas } from '../../../src/canvas/sheet-canvas.tsx';
import { noDecorations } from '../../../src/drawing/decorations.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { openDesign } from '../../../src/workspace/open-design.ts';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { watchFrames } from './bench-window.ts';

watchFrames();
const bare = new URLSearchParams(location.search).get('mode') === 'bare';
const design = window.benchDesign;
const nothing = (): void => undefined;

const open = () =>
  openDesign({
    document: design,
    sequence: 0,
    editable: true,
    // Nobody is there to save to: edits of the bench wait and are forgotten with the page.
    server: {
      save: () => Promise.resolve({ kind: 'unreachable' }),
      patchesAfter: () => Promise.resolve({ kind: 'unreachable' }),
    },
    storage: { load: () => [], add: nothing, remove: nothing },
    newEditId: () => crypto.randomUUID(),
    now: Date.now,
  });

const tell = (parts: NonNullable<Window['benchParts']>): void => {
  window.benchParts = parts;
};

/** The canvas library alone, with as many plain nodes and edges at the same places and of the same sizes. */
function Bare() {
  const { geometry, facts } = useDrawn();
  const flow = designToFlow({
    design,
    geometry,
    facts,
    selected: new Set(),
    editable: true,
    isLocked: () => false,
  });
  const nodes = flow.nodes.map(({ id, position, width, height }): Node => ({
    id,
    position,
    ...(width === undefined ? {} : { width }),
    ...(height === undefined ? {} : { height }),
    data: { label: id },
  }));
  const known = new Set(nodes.map(({ id }) => id));
  const edges = flow.edges
    .filter(({ source, target }) => known.has(source) && known.has(target))
    .map(({ id, source, target }): Edge => ({ id, source, target }));
  useEffect(() => tell({ nodes: nodes.length, edges: edges.length }));
  return (
    <ReactFlow defaultNodes={nodes} defaultEdges={edges} minZoom={0.01} onlyRenderVisibleElements fitView />
  );
}

function Sheet() {
  const { geometry, facts } = useDrawn();
  const { nodes, edges } = designToFlow({
    design,
    geometry,
    facts,
    selected: new Set(),
    editable: true,
    isLocked: () => false,
  });
  useEffect(() => tell({ nodes: nodes.length, edges: edges.length }));
  return <SheetCanvas decorations={noDecorations} onAcceptGhost={nothing} onPickBalloon={nothing} />;
}

createRoot(document.getElementById('root')!).render(
  <QueryClientProvider client={new QueryClient()}>
    <MemoryRouter>
      <OpenDesignProvider open={open}>
        <ChecksProvider>
          <ReactFlowProvider>
            <GeometryProvider>{bare ? <Bare /> : <Sheet />}</GeometryProvider>
          </ReactFlowProvider>
        </ChecksProvider>
      </OpenDesignProvider>
    </MemoryRouter>
  </QueryClientProvider>,
);
