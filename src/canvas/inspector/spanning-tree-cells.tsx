import { patchAt } from '../../engine/model/merge-patch.ts';
import { SelectField, TextField } from './fields.tsx';
import type { FieldPath } from './field-marks.ts';
import { useAt, useCommit } from './use-field.ts';
import { wholeNumber } from '../../lib/written-value.ts';

const priority = wholeNumber();

/** Whether a switch or a bridge runs a spanning tree, and with which priority. */
export function SpanningTreeCells({ path, of }: { readonly path: FieldPath; readonly of: string }) {
  const mode = useAt<'on' | 'off'>([...path, 'mode']);
  const commit = useCommit();
  return (
    <>
      <SelectField
        label="Spanning tree"
        path={[...path, 'mode']}
        span={mode === 'on' ? 1 : 2}
        choices={[
          { value: 'on', label: 'on' },
          { value: 'off', label: 'off' },
        ]}
        onChoose={(next) =>
          commit(
            `Spanning tree of ${of}`,
            // A priority means nothing without a tree.
            patchAt(
              path,
              next === undefined ? null : next === 'on' ? { mode: next } : { mode: next, priority: null },
            ),
          )
        }
      />
      {mode === 'on' && (
        <TextField
          label="Bridge priority"
          path={[...path, 'priority']}
          writing={priority}
          emptyWord="default"
        />
      )}
    </>
  );
}
