import type { BarDestination } from '../../components/bar.tsx';
import { designPath } from '../../lib/workspace-path.ts';

/** The pages of a design, in the order of its bar. */
export const designPages = (designId: string): readonly BarDestination[] => {
  const path = designPath(designId);
  return [
    { to: path, label: 'Sheet', end: true },
    { to: `${path}/segments`, label: 'Segments' },
    { to: `${path}/numbering`, label: 'Numbering' },
    { to: `${path}/checks`, label: 'Checks' },
    { to: `${path}/review`, label: 'Review' },
    { to: `${path}/history`, label: 'History' },
  ];
};
