import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import type { Design } from '../../engine/model/design.ts';
import type { NetworkOverlap, NumberClash } from '../../engine/numbering/number-clashes.ts';
import { clashSubject, holderWords } from './clash-words.ts';

// The tables below name each beside its number, too.
const shownAtFirst = 4;

const joined = (names: readonly string[]): string =>
  names.length < 2 ? (names[0] ?? '') : `${names.slice(0, -1).join(', ')} and ${names.at(-1)!}`;

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
  const [all, setAll] = useState(false);
  const lines = [
    ...clashes.map((clash) => ({
      subject: clashSubject(design, clash),
      words: `held by ${joined(clash.holders.map((holder) => holderWords(design, holder)))}`,
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
        {(all ? lines : lines.slice(0, shownAtFirst)).map(({ subject, words }) => (
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
      {lines.length > shownAtFirst && (
        <div className="border-t border-rule px-6 py-4">
          <Button kind="quiet" small aria-expanded={all} onClick={() => setAll(!all)}>
            {all ? 'Show fewer' : `Show ${lines.length - shownAtFirst} more`}
          </Button>
        </div>
      )}
    </section>
  );
}
