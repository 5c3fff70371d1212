import { lazy } from 'react';
import { useParams } from 'react-router-dom';

// Canvas and layout code come with the first design that is opened, not before.
const SheetDesk = lazy(async () => ({ default: (await import('./sheet-desk.tsx')).SheetDesk }));

/** /designs/:designId: the drawing. Another design is another desk, so nothing of the last one stays. */
export function SheetPage() {
  const { designId = '' } = useParams();
  return <SheetDesk key={designId} designId={designId} />;
}
