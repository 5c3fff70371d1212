import { render } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { Inspector, type InspectorProps } from '../../../src/canvas/inspector/inspector.tsx';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { TooltipProvider } from '../../../src/components/tooltip.tsx';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { openDesign, type OpenDesign } from '../../../src/workspace/open-design.ts';

let edits = 0;

/** An open design whose server takes everything and keeps nothing. */
export const openInMemory = (document: Design, editable = true): OpenDesign =>
  openDesign({
    document,
    sequence: 0,
    editable,
    server: {
      save: async (baseSequence) => ({
        sequence: baseSequence,
        patches: [],
        counts: { blocking: 0, degrading: 0, advisory: 0 },
      }),
      patchesAfter: async (sequence) => ({ sequence, patches: [] }),
    },
    storage: { load: () => [], add: () => undefined, remove: () => undefined },
    newEditId: () => `edit-${(edits += 1)}`,
    now: () => 0,
  });

interface Options extends InspectorProps {
  readonly selection?: readonly ElementRef[];
  readonly editable?: boolean;
}

/** The inspector of an open design with something selected. */
export const renderInspector = (
  document: Design,
  { selection = [], editable = true, ...tools }: Options = {},
) => {
  const design = openInMemory(document, editable);
  design.select(selection);
  render(
    <TooltipProvider>
      <OpenDesignProvider open={() => design}>
        <ChecksProvider>
          <Inspector {...tools} />
        </ChecksProvider>
      </OpenDesignProvider>
      <ToastRegion />
    </TooltipProvider>,
  );
  return {
    design,
    user: userEvent.setup(),
    document: (): Design => design.store.getState().document,
    steps: (): number => design.store.getState().history.done.length,
  };
};
