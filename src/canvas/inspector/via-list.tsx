import { SelectCell } from '../../components/field-cells.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { rankAtEnd } from '../../engine/model/rank.ts';
import { newEntryId, useOpenState } from '../../workspace/open-design-context.tsx';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { ElementLink } from './element-link.tsx';
import type { FieldPath } from './field-marks.ts';
import { OrderedList } from './ordered-list.tsx';
import { useAt, useCommit, useEditable } from './use-field.ts';

interface Step {
  readonly rank: string;
  readonly landing: string;
}

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
  const via = useAt<{ readonly [id: string]: Step }>(path);
  const document = useOpenState((state) => state.document);
  const editable = useEditable();
  const commit = useCommit();
  const taken = new Set(Object.values(via ?? {}).map(({ landing }) => landing));
  const free = Object.entries(document.links).filter(
    ([id, link]) => link.kind === 'landing' && link.device === device && !taken.has(id),
  );
  return (
    <div className="flex flex-col gap-4">
      <h4 className="text-note text-ink-2">{place}</h4>
      <OrderedList<Step>
        path={path}
        noun="way out"
        nouns="ways out"
        of={place}
        empty="any landing of its device"
        titleOf={({ landing }) => <ElementLink to={{ collection: 'links', id: landing }} />}
      />
      {editable && free.length > 0 && (
        <CellGrid>
          <SelectCell
            label="Add a landing"
            place={place}
            value=""
            placeholder="choose"
            options={free.map(([id]) => ({
              value: id,
              label: nameOf(document, { collection: 'links', id }),
            }))}
            onChange={(landing) =>
              commit(
                `Way out at ${place}`,
                patchAt([...path, newEntryId('via')], { rank: rankAtEnd(via), landing }),
              )
            }
          />
        </CellGrid>
      )}
    </div>
  );
}
