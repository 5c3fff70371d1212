import { ReadCell } from '../../components/cell.tsx';
import { CheckBox } from '../../components/check-box.tsx';
import { TextButton } from './element-link.tsx';
import type { FieldPath } from './field-marks.ts';
import { Unknown } from './fields.tsx';
import { useField } from './use-field.ts';

interface CheckListProps<Value extends string> {
  readonly label: string;
  readonly path: FieldPath;
  readonly choices: readonly { readonly value: Value; readonly label: string }[];
  /** What an empty list says, as against one that nobody has stated. */
  readonly noneWords: string;
}

/** Any number of several. Nothing stated and stated to be none are two things. */
export function CheckList<Value extends string>({ label, path, choices, noneWords }: CheckListProps<Value>) {
  const { value, marked, editable, commit } = useField<readonly Value[]>(path);
  const chosen = choices.filter((choice) => value?.includes(choice.value));
  if (!editable)
    return (
      <ReadCell label={label} marked={marked}>
        {value === undefined ? (
          <Unknown />
        ) : chosen.length === 0 ? (
          noneWords
        ) : (
          chosen.map((choice) => choice.label).join(', ')
        )}
      </ReadCell>
    );
  return (
    <fieldset
      className={marked === undefined ? undefined : 'outline-2 outline-degr'}
      title={marked?.sentence}
    >
      <legend className="mb-4 text-label text-ink-3">{label}</legend>
      <div className="grid grid-cols-2 gap-x-8 gap-y-2">
        {choices.map((choice) => (
          <CheckBox
            key={choice.value}
            className="min-h-24"
            checked={value?.includes(choice.value) === true}
            onChange={(event) =>
              commit(
                label,
                choices
                  .map((each) => each.value)
                  .filter((each) =>
                    each === choice.value ? event.target.checked : value?.includes(each) === true,
                  ),
              )
            }
          >
            {choice.label}
          </CheckBox>
        ))}
      </div>
      <p className="mt-4 flex gap-8 text-note text-ink-2">
        {value === undefined ? 'Not stated.' : chosen.length === 0 ? `Stated: ${noneWords}.` : null}
        {value === undefined ? (
          <TextButton onClick={() => commit(label, [])}>State: {noneWords}</TextButton>
        ) : (
          <TextButton onClick={() => commit(label, undefined)}>Make it unknown</TextButton>
        )}
      </p>
    </fieldset>
  );
}
