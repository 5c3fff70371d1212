import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { ReactFlowProvider } from '@xyflow/react';
import { useState } from 'react';
import { MemoryRouter } from 'react-router-dom';
import { GeometryProvider } from '../../../src/canvas/geometry-context.tsx';
import { Inspector } from '../../../src/canvas/inspector/inspector.tsx';
import { JoinDialog } from '../../../src/canvas/join-dialog.tsx';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { TooltipProvider } from '../../../src/components/tooltip.tsx';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { Outline } from '../../../src/features/outline/outline.tsx';
import { createOutlineView } from '../../../src/features/outline/outline-view.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { openInMemory } from '../../canvas/inspector/render-inspector.tsx';

function Screen() {
  const [view] = useState(createOutlineView);
  return (
    <>
      <Outline view={view} />
      <Inspector />
      <JoinDialog />
    </>
  );
}

/** The outline of an open design, with the inspector beside it. */
export const renderOutline = (
  document: Design,
  { editable = true }: { readonly editable?: boolean } = {},
) => {
  const design = openInMemory(document, editable);
  render(
    <MemoryRouter>
      <TooltipProvider>
        <OpenDesignProvider open={() => design}>
          <ChecksProvider>
            <ReactFlowProvider>
              <GeometryProvider>
                <Screen />
              </GeometryProvider>
            </ReactFlowProvider>
          </ChecksProvider>
        </OpenDesignProvider>
        <ToastRegion />
      </TooltipProvider>
    </MemoryRouter>,
  );
  const tree = screen.getByRole('tree', { name: 'Outline' });
  return {
    design,
    user: userEvent.setup(),
    document: (): Design => design.store.getState().document,
    selection: (): readonly ElementRef[] => design.store.getState().selection,
    /** The row whose words begin so. */
    row: (words: string): HTMLElement =>
      within(tree).getByRole('treeitem', {
        name: (name) => name === words || name.startsWith(`${words},`),
      }),
    rows: (): readonly HTMLElement[] => within(tree).getAllByRole('treeitem'),
  };
};
