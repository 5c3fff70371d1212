import { SeverityShape } from '../../components/severity-mark.tsx';
import type { Design } from '../../engine/model/design.ts';
import type { NetworkOverlap, NumberClash } from '../../engine/numbering/number-clashes.ts';
import { clashSubject, holderWords } from './clash-words.ts';

// More than anybody reads at once; the tables below name each beside its number.
const mostShown = 12;

/** Numbers that more than one holds and networks that overlap, in this design and across the workspace. */
export function ClashesList({
  design,
  clashes,
  overlaps,
}: {
  readonly design: Design;
  readonly clashes: readonly NumberClash[];
  readonly overlaps: readonly NetworkOverlap[];
}) {
  const lines = [
    ...clashes.map((clash) => ({
      subject: clashSubject(design, clash),
      words: `held by ${clash.holders.map((holder) => holderWords(design, holder)).join(' and ')}`,
    })),
    ...overlaps.map(({ a, b }) => ({
      subject: a.network,
      words: `of ${holderWords(design, a.holder)} overlaps ${b.network} of ${holderWords(design, b.holder)}`,
    })),
  ];
  if (lines.length === 0) return null;
  return (
    <section aria-labelledby="clashes" className="border border-rule-strong bg-field">
      <h2 id="clashes" className="border-b border-rule-2 px-13 py-8 text-section font-semibold">
        {lines.length === 1 ? '1 clash' : `${lines.length} clashes`}
      </h2>
      <ul>
        {lines.slice(0, mostShown).map(({ subject, words }) => (
          <li
            key={`${subject} ${words}`}
            className="flex items-start gap-10 border-b border-rule px-13 py-6 text-base last:border-b-0"
          >
            <span className="mt-2">
              <SeverityShape severity="degrading" />
            </span>
            <span className="min-w-0">
              <span className="font-semibold">{subject}</span> {words}
            </span>
          </li>
        ))}
      </ul>
      {lines.length > mostShown && (
        <p className="px-13 py-8 text-note text-ink-2">
          And {lines.length - mostShown} more: sort the tables by “Also held by”.
        </p>
      )}
    </section>
  );
}
