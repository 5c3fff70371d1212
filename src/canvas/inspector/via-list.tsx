import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SelectCell } from '../../components/field-cells.tsx';
import { patchAt, type MergePatch } from '../../engine/model/merge-patch.ts';
import { inRankOrder, rankAtEnd, rankBetween } from '../../engine/model/rank.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenState } from '../../workspace/open-design-context.tsx';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { ElementLink } from './element-link.tsx';
import { markAt, type FieldPath } from './field-marks.ts';
import { useAt, useCommit, useEditable } from './use-field.ts';

interface Step {
  readonly rank: string;
  readonly landing: string;
}
type Via = { readonly [id: string]: Step };

/** The patch that moves an entry of a ranked map one place up. */
export const moveUpPatch = (
  path: FieldPath,
  map: { readonly [id: string]: { readonly rank: string } },
  id: string,
): MergePatch => {
  const order = inRankOrder(map);
  const at = order.findIndex(([other]) => other === id);
  return patchAt([...path, id, 'rank'], rankBetween(order[at - 2]?.[1].rank, order[at - 1]?.[1].rank));
};

/** The landings that an end tries, in order. Empty means any landing of its device. */
export function ViaList({
  path,
  device,
  place,
}: {
  readonly path: FieldPath;
  readonly device: string;
  readonly place: string;
}) {
  const via = useAt<Via>(path);
  const document = useOpenState((state) => state.document);
  const editable = useEditable();
  const commit = useCommit();
  const { findings } = useChecks();
  const steps = inRankOrder(via);
  const free = Object.entries(document.links).filter(
    ([id, link]) =>
      link.kind === 'landing' && link.device === device && !steps.some(([, step]) => step.landing === id),
  );
  const label = `Way out at ${place}`;
  return (
    <div role="group" aria-label={label} className="flex flex-col">
      <p className="text-note text-ink-2">{place}</p>
      {steps.length === 0 && <p className="text-note text-ink-3">any landing of its device</p>}
      <ol>
        {steps.map(([id, { landing }], at) => (
          <li key={id} className="flex min-h-26 items-center gap-6 border-b border-rule">
            <span className="text-note text-ink-3">{at + 1}</span>
            <span className="min-w-0 flex-1">
              <ElementLink to={{ collection: 'links', id: landing }} />
            </span>
            {editable && at > 0 && (
              <Button
                kind="quiet"
                small
                iconOnly
                aria-label={`Try ${nameOf(document, { collection: 'links', id: landing })} earlier`}
                icon={<Icon name="chevron-up" size={14} />}
                onClick={() => commit(label, moveUpPatch(path, via ?? {}, id))}
              />
            )}
            {editable && (
              <Button
                kind="quiet"
                small
                iconOnly
                aria-label={`Leave ${nameOf(document, { collection: 'links', id: landing })} out`}
                icon={<Icon name="cross" size={14} />}
                onClick={() => commit(label, patchAt([...path, id], null))}
              />
            )}
          </li>
        ))}
      </ol>
      {editable && free.length > 0 && (
        <SelectCell
          label="Add a landing"
          place={place}
          value=""
          placeholder="choose"
          marked={markAt(findings, path)}
          options={free.map(([id]) => ({ value: id, label: nameOf(document, { collection: 'links', id }) }))}
          onChange={(landing) =>
            commit(label, patchAt([...path, newEntryId('via')], { rank: rankAtEnd(via), landing }))
          }
        />
      )}
    </div>
  );
}
