import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { TraceStorm } from '../../engine/trace/trace.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** A storm's cycle as the way round, and how many copies are underway after each round. */
export function StormRounds({ design, storm }: { readonly design: Design; readonly storm: TraceStorm }) {
  const { cycle, copiesByRound, growth } = storm;
  const most = Math.max(...copiesByRound);
  const refs = cycle.map(({ collection, id }): ElementRef => ({ collection, id }));
  return (
    <section
      aria-label="The storm"
      className="flex shrink-0 flex-wrap items-center justify-between gap-x-28 gap-y-4 border-b border-rule-2 bg-raise px-12 py-5"
    >
      <div className="min-w-0">
        <h3 className="text-label text-ink-3">The cycle, {cycle.length} hops</h3>
        <p className="text-base text-ink">
          {refs.map((ref, at) => (
            <span key={`${ref.collection} ${ref.id} ${at}`}>
              {at > 0 && <span className="text-ink-3"> then </span>}
              {nameOf(design, ref)}
            </span>
          ))}
          <span className="text-ink-3"> and round again</span>
        </p>
      </div>
      <table className="text-base">
        <caption className="text-left text-label whitespace-nowrap text-ink-3">
          Copies underway, by round: they {growth === 'multiplies' ? 'multiply' : 'neither grow nor end'}
        </caption>
        <thead className="sr-only">
          <tr>
            {copiesByRound.map((_, round) => (
              <th key={round} scope="col">
                Round {round}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          <tr>
            {copiesByRound.map((copies, round) => (
              <td key={round} className="pr-14 font-semibold text-red">
                <span className="flex h-18 items-end gap-4">
                  {/* Logarithmic: what doubles each round would leave the first rounds without a bar. */}
                  <span
                    aria-hidden="true"
                    className="mb-4 w-9 bg-red"
                    style={{ height: 2 + (Math.log2(copies + 1) / Math.log2(most + 1)) * 11 }}
                  />
                  {copies.toLocaleString('en-GB')}
                </span>
              </td>
            ))}
          </tr>
        </tbody>
      </table>
    </section>
  );
}
