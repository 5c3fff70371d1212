import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { SeverityCounts } from '../../components/severity-mark.tsx';
import type { Counts } from '../../contract/designs.ts';

interface FrozenFactsProps {
  readonly revision: string | undefined;
  readonly counts: Counts;
  readonly waived: number;
}

/** What a revision holds of findings and waivers, in one row of cells. */
export function FrozenFacts({ revision, counts, waived }: FrozenFactsProps) {
  return (
    <CellGrid columns={3}>
      <ReadCell label="Revision">{revision ?? 'A'}</ReadCell>
      <ReadCell label="Open findings">
        <SeverityCounts counts={counts} worded clear="none" />
      </ReadCell>
      <ReadCell label="Waived findings">{waived === 0 ? 'none' : String(waived)}</ReadCell>
    </CellGrid>
  );
}
