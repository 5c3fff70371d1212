import { useParams } from 'react-router-dom';
import { DesignDesk } from './design-desk.tsx';

/** /designs/:designId and all under it. Another design is another desk, so nothing of the last one stays. */
export function DesignPage() {
  const { designId = '' } = useParams();
  return <DesignDesk key={designId} designId={designId} />;
}
