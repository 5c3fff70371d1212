import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { ResultGroup } from './worked-results.ts';

/** Results in read-only cells, each with its working beneath. */
export function ResultCells({ groups }: { readonly groups: readonly ResultGroup[] }) {
  return groups.map(({ title, results }) => (
    <section key={title} aria-label={title}>
      <h2 className="mb-8 text-section font-semibold">{title}</h2>
      <CellGrid columns="repeat(auto-fill, minmax(min(100%, 380px), 1fr))">
        {results.map(({ label, value, working, source, mark }) => (
          <ReadCell key={label} label={label} marked={mark}>
            <span className="text-title">{value}</span>
            <span className="mt-2 block text-note font-normal text-ink-2">{working}</span>
            <span className="block text-label font-normal text-ink-3">{source}</span>
          </ReadCell>
        ))}
      </CellGrid>
    </section>
  ));
}
