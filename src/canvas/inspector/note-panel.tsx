import { CellGrid } from '../../components/cell.tsx';
import type { Collection, ElementRef } from '../../engine/model/design.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import { notable } from '../../workspace/operations/place-parts.ts';
import { ElementList } from './element-link.tsx';
import { LongTextField, SelectField } from './fields.tsx';
import { PanelHead } from './panel-head.tsx';
import { useField } from './use-field.ts';

type Target = { readonly collection: Collection; readonly id: string };

/** A note: its text, whether it stands at the head of the sheet, and what it is pinned to. */
export function NotePanel({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const note = design.notes[id];
  const { commit } = useField<Target>(['notes', id, 'target']);
  const { commit: setStanding } = useField<boolean>(['notes', id, 'standing']);
  if (note === undefined) return null;
  const targets: readonly ElementRef[] = notable.flatMap((collection) =>
    Object.keys(design[collection]).map((each) => ({ collection, id: each })),
  );
  return (
    <>
      <PanelHead of={{ collection: 'notes', id }} />
      <CellGrid>
        <LongTextField label="Text" path={['notes', id, 'text']} required />
        <SelectField<boolean>
          label="Where it stands"
          path={['notes', id, 'standing']}
          required
          read={(stored) => stored === true}
          choices={[
            { value: false, label: 'where it was put' },
            { value: true, label: 'numbered, at the head of the sheet' },
          ]}
          onChoose={(standing) => setStanding('Place', standing === true ? true : undefined)}
        />
        <SelectField<string>
          label="Pinned to"
          path={['notes', id, 'target']}
          emptyWord="nothing"
          choices={targets.map((ref) => ({
            value: `${ref.collection}/${ref.id}`,
            label: `${nameOf(design, ref)} (${kindOf(design, ref).toLowerCase()})`,
          }))}
          read={(stored) =>
            stored === undefined ? undefined : `${(stored as Target).collection}/${(stored as Target).id}`
          }
          onChoose={(key) => {
            const target = targets.find((ref) => `${ref.collection}/${ref.id}` === key);
            commit(
              'Pin',
              target === undefined ? undefined : { collection: target.collection, id: target.id },
            );
          }}
        />
      </CellGrid>
      {note.target !== undefined && <ElementList of={[note.target]} empty="" />}
    </>
  );
}
