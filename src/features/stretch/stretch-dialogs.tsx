import { lazy, Suspense } from 'react';
import { setFitted } from '../../canvas/desk-state.ts';
import { stretchForm } from '../../lib/stretch-address.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';

const StretchDialog = lazy(async () => ({ default: (await import('./stretch-dialog.tsx')).StretchDialog }));
const StretchToDialog = lazy(async () => ({
  default: (await import('./stretch-to-dialog.tsx')).StretchToDialog,
}));

/** The assistant where the address asks for it (`?stretch=`), on whichever page of the design. */
export function StretchDialogs() {
  const { valueOf, change } = useSearchValues();
  const editable = useOpenState((state) => state.editable);
  const asked = valueOf('stretch');
  const segment = useOpenState((state) => Object.hasOwn(state.document.segments, asked));
  if (!editable || asked === '' || (asked !== stretchForm && !segment)) return null;
  const close = (): void => change({ stretch: '' });
  return (
    <Suspense>
      {asked === stretchForm ? (
        // A new plan may need a larger sheet, which is then to be seen whole.
        <StretchDialog onClose={close} onDone={() => setFitted(true)} />
      ) : (
        <StretchToDialog key={asked} segment={asked} onClose={close} />
      )}
    </Suspense>
  );
}
