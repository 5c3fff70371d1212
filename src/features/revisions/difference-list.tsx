import { classNames } from '../../lib/class-names.ts';
import { changeSigns } from '../../drawing/changes-to-decorations.ts';
import type { Change, ChangeGroup } from '../../engine/diff/change.ts';
import { makerOf, type MadePatch } from '../../engine/diff/change-makers.ts';
import { dateAndTime } from '../../lib/format-time.ts';

interface DifferenceListProps {
  readonly changes: readonly Change[];
  readonly patches: readonly MadePatch[];
  readonly chosen: Change | undefined;
  readonly onChoose: (change: Change) => void;
}

const groupsOf = (changes: readonly Change[]): readonly (readonly [ChangeGroup, readonly Change[]])[] => {
  const groups = new Map<string, [ChangeGroup, Change[]]>();
  for (const change of changes) {
    const known = groups.get(change.group.key);
    if (known === undefined) groups.set(change.group.key, [change.group, [change]]);
    else known[1].push(change);
  }
  return [...groups.values()];
};

const kindWords = { added: 'Added', removed: 'Removed', changed: 'Changed' } as const;

/** What differs as sentences, by site and segment, with who did it; a press shows it on the sheet. */
export function DifferenceList({ changes, patches, chosen, onChoose }: DifferenceListProps) {
  return (
    <div className="flex flex-col gap-16">
      {groupsOf(changes).map(([group, members]) => (
        <section key={group.key} aria-label={group.name}>
          <h2 className="flex items-baseline justify-between gap-8 border-b border-ink pb-4 text-section font-semibold">
            {group.name}
            <span className="text-note font-medium text-ink-2">{members.length}</span>
          </h2>
          <ul>
            {members.map((change, index) => {
              const maker = makerOf(change, patches);
              const isChosen = change === chosen;
              return (
                <li key={index} className="border-b border-rule-2">
                  <button
                    type="button"
                    aria-pressed={isChosen}
                    onClick={() => onChoose(change)}
                    className={classNames(
                      'flex w-full items-start gap-8 px-4 py-6 text-left text-base -outline-offset-2 hover:bg-hover',
                      isChosen && 'bg-blue-wash',
                    )}
                  >
                    <ChangeSign kind={change.kind} />
                    <span className="min-w-0 flex-1 break-words">
                      {change.sentence}
                      {maker !== undefined && (
                        <span className="block text-note text-ink-2">
                          {maker.by ?? 'Somebody'}, {dateAndTime(new Date(maker.at))}
                        </span>
                      )}
                    </span>
                  </button>
                </li>
              );
            })}
          </ul>
        </section>
      ))}
    </div>
  );
}

function ChangeSign({ kind }: { readonly kind: Change['kind'] }) {
  return (
    <span
      className={classNames(
        'mt-1 flex size-17 shrink-0 items-center justify-center border text-note leading-none font-semibold',
        kind === 'changed' ? 'border-ink bg-plate text-ink' : 'border-strip bg-strip text-strip-ink',
      )}
    >
      <span aria-hidden="true">{changeSigns[kind]}</span>
      <span className="sr-only">{kindWords[kind]}: </span>
    </span>
  );
}

const samples = {
  added: { strokeWidth: 2 },
  changed: { strokeWidth: 2.6, strokeDasharray: '2 5', strokeLinecap: 'round' },
  removed: { strokeWidth: 2, strokeDasharray: '7 5' },
} as const;

/** What the signs and outlines on the sheet stand for, with how many there are of each. */
export function DifferenceLegend({ changes }: { readonly changes: readonly Change[] }) {
  return (
    <ul aria-label="Legend" className="flex flex-wrap gap-x-16 gap-y-6 text-base">
      {(['added', 'removed', 'changed'] as const).map((kind) => (
        <li key={kind} className="flex items-center gap-6">
          <svg width="30" height="18" aria-hidden="true">
            <rect x="2" y="2" width="26" height="14" fill="none" stroke="var(--ink)" {...samples[kind]} />
            {kind === 'removed' && (
              <path d="M5 14L15 4M12 14L22 4M19 14L26 7" stroke="var(--ink-3)" strokeWidth="1.2" />
            )}
          </svg>
          <ChangeSign kind={kind} />
          <span>
            {kindWords[kind]} {changes.filter((change) => change.kind === kind).length}
          </span>
        </li>
      ))}
    </ul>
  );
}
