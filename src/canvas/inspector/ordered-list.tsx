import type { ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { patchAt, type MergePatch } from '../../engine/model/merge-patch.ts';
import { inRankOrder, rankAtEnd, rankBetween } from '../../engine/model/rank.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { newEntryId } from '../../workspace/open-design-context.tsx';
import { AddButton } from './add-button.tsx';
import { markAt, type FieldPath } from './field-marks.ts';
import { useAt, useCommit, useEditable } from './use-field.ts';

interface Ranked {
  readonly rank: string;
}
type RankedMap<E extends Ranked> = { readonly [id: string]: E };

/** The patch that moves an entry of a ranked map one place up. */
export const moveUpPatch = (path: FieldPath, map: RankedMap<Ranked>, id: string): MergePatch => {
  const order = inRankOrder(map);
  const at = order.findIndex(([other]) => other === id);
  return patchAt([...path, id, 'rank'], rankBetween(order[at - 2]?.[1].rank, order[at - 1]?.[1].rank));
};

interface OrderedListProps<E extends Ranked> {
  /** Path of the ranked map. */
  readonly path: FieldPath;
  /** What one entry is called: 'IKE proposal'. */
  readonly noun: string;
  /** More than one of them, where an s does not do. */
  readonly nouns?: string;
  /** Whose list it is, for labels and undo steps. */
  readonly of: string;
  /** Said while there is none. */
  readonly empty: string;
  readonly titleOf: (entry: E, id: string) => ReactNode;
  readonly children?: (entry: E, id: string, path: FieldPath) => ReactNode;
  /** The values of a new entry, apart from its place. */
  readonly fresh?: readonly { readonly label: string; readonly entry: () => Omit<E, 'rank'> | undefined }[];
}

/** Entries whose order counts: each with its number, a step up and a way out; new ones come last. */
export function OrderedList<E extends Ranked>({
  path,
  noun,
  nouns = `${noun}s`,
  of,
  empty,
  titleOf,
  children,
  fresh = [],
}: OrderedListProps<E>) {
  const map = useAt<RankedMap<E>>(path);
  const editable = useEditable();
  const commit = useCommit();
  const { openFindings } = useChecks();
  const marked = markAt(openFindings, path);
  const label = `${noun} of ${of}`;
  const entries = inRankOrder(map);
  return (
    <div role="group" aria-label={`${nouns} of ${of}`} className="flex flex-col gap-6">
      {marked !== undefined && (
        <p className="flex items-start gap-6 text-note text-ink">
          <span className="mt-2">
            <SeverityShape severity={marked.severity} size={12} />
          </span>
          {marked.sentence}.
        </p>
      )}
      {entries.length === 0 && <p className="text-note text-ink-3">{empty}</p>}
      {entries.length > 0 && (
        <ol className="flex flex-col gap-8">
          {entries.map(([id, entry], at) => (
            <li key={id}>
              <div className="flex min-h-24 items-center gap-6">
                <span className="text-note text-ink-3">{at + 1}</span>
                <span className="min-w-0 flex-1 text-base font-medium break-words">{titleOf(entry, id)}</span>
                {editable && at > 0 && (
                  <Button
                    kind="quiet"
                    small
                    iconOnly
                    aria-label={`Move ${noun} ${at + 1} up`}
                    icon={<Icon name="chevron-up" size={14} />}
                    onClick={() => commit(label, moveUpPatch(path, map ?? {}, id))}
                  />
                )}
                {editable && (
                  <Button
                    kind="quiet"
                    small
                    iconOnly
                    aria-label={`Remove ${noun} ${at + 1}`}
                    icon={<Icon name="cross" size={14} />}
                    onClick={() => commit(label, patchAt([...path, id], null))}
                  />
                )}
              </div>
              {children?.(entry, id, [...path, id])}
            </li>
          ))}
        </ol>
      )}
      {editable && fresh.length > 0 && (
        <div className="flex flex-wrap gap-6">
          {fresh.map((kind) => (
            <AddButton
              key={kind.label}
              subject={`of ${of}`}
              onClick={() => {
                const entry = kind.entry();
                if (entry !== undefined)
                  commit(label, patchAt([...path, newEntryId('x')], { ...entry, rank: rankAtEnd(map) }));
              }}
            >
              {kind.label}
            </AddButton>
          ))}
        </div>
      )}
    </div>
  );
}
