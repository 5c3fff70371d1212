import { render } from '@testing-library/react';
import { MemoryRouter } from 'react-router-dom';
import userEvent from '@testing-library/user-event';
import { Inspector, type InspectorProps } from '../../../src/canvas/inspector/inspector.tsx';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { TooltipProvider } from '../../../src/components/tooltip.tsx';
import type { LoggedPatch } from '../../../src/contract/designs.ts';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { openDesign, type OpenDesign, type OpenDesignServer } from '../../../src/workspace/open-design.ts';

let edits = 0;

/** A server that logs what it is sent and gives it back, as the real one does. */
const loggingServer = (): OpenDesignServer => {
  const log: LoggedPatch[] = [];
  return {
    save: async (baseSequence, sent) => {
      for (const { editId, patch } of sent)
        log.push({
          sequence: log.length + 1,
          editId,
          by: null,
          at: '2026-03-18T14:32:00.000Z',
          patch,
          repair: false,
        });
      return {
        sequence: log.length,
        patches: log.slice(baseSequence),
        counts: { blocking: 0, degrading: 0, advisory: 0 },
      };
    },
    patchesAfter: async (sequence) => ({ sequence: log.length, patches: log.slice(sequence) }),
  };
};

/** A design that is open, saved to a server in memory. */
export const openInMemory = (document: Design, editable: boolean): OpenDesign =>
  openDesign({
    document,
    sequence: 0,
    editable,
    server: loggingServer(),
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
    <MemoryRouter>
      <TooltipProvider>
        <OpenDesignProvider open={() => design}>
          <ChecksProvider>
            <Inspector {...tools} />
          </ChecksProvider>
        </OpenDesignProvider>
        <ToastRegion />
      </TooltipProvider>
    </MemoryRouter>,
  );
  return {
    design,
    user: userEvent.setup(),
    document: (): Design => design.store.getState().document,
    steps: (): number => design.store.getState().history.done.length,
  };
};
