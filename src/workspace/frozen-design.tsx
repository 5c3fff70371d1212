import type { ReactNode } from 'react';
import type { Design } from '../engine/model/design.ts';
import { draftServer } from './draft-server.ts';
import type { EditStorage } from './edit-storage.ts';
import { openDesign } from './open-design.ts';
import { OpenDesignProvider } from './open-design-context.tsx';

const noStorage: EditStorage = { load: () => [], add: () => undefined, remove: () => undefined };

/** Shows a document that nobody changes to everything inside, as an open design that can be looked at alone. */
export function FrozenDesign({
  document,
  sequence,
  children,
}: {
  readonly document: Design;
  readonly sequence: number;
  readonly children: ReactNode;
}) {
  return (
    <OpenDesignProvider
      open={() =>
        openDesign({
          document,
          sequence,
          editable: false,
          server: draftServer,
          storage: noStorage,
          newEditId: () => crypto.randomUUID(),
          now: Date.now,
        })
      }
    >
      {children}
    </OpenDesignProvider>
  );
}
