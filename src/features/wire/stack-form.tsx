import type { ReactNode } from 'react';
import { CellGrid } from '../../components/cell.tsx';
import { CheckCell, ChoiceCell, CommitCell, SelectCell } from '../../components/field-cells.tsx';
import { espTransforms } from '../../engine/reference/esp.ts';
import { mixLetterFrameBytes, simpleImix } from '../../engine/reference/frame-mixes.ts';
import { presetOf, stackPresets, textsOfPreset } from './stack-presets.ts';
import {
  textProblem,
  wireFields,
  type ChoiceField,
  type FieldName,
  type FieldProblems,
  type WireTexts,
} from './wire-fields.ts';

interface FormProps {
  readonly texts: WireTexts;
  readonly problems: FieldProblems;
  readonly onChange: (texts: Partial<WireTexts>) => void;
}

interface NamedCellProps extends FormProps {
  readonly name: FieldName;
  readonly span?: number;
}

/** Everything that can be asked, as cells of a title block. */
export function StackForm(form: FormProps) {
  const { texts, onChange } = form;
  return (
    <form
      aria-label="What is sent over what"
      className="flex flex-col gap-18"
      onSubmit={(event) => event.preventDefault()}
    >
      <Group title="Packet and stack">
        <SelectCell
          label="Start from"
          span={2}
          value={presetOf(texts)?.id ?? ''}
          placeholder="your own combination"
          options={stackPresets.map(({ id, label }) => ({ value: id, label }))}
          onChange={(id) => {
            const preset = stackPresets.find((each) => each.id === id);
            if (preset !== undefined) onChange(textsOfPreset(preset));
          }}
        />
        <TextCell {...form} name="packet" unit="B" />
        <ChoiceNamed {...form} name="ip" field={wireFields.ip} />
        <ChoiceNamed {...form} name="tags" field={wireFields.tags} />
        <ChoiceNamed {...form} name="vxlan" field={wireFields.vxlan} />
        <EspCells {...form} />
      </Group>
      <Group title="Path">
        <AccessCells {...form} />
        <TextCell {...form} name="mtu" unit="B" />
        <TextCell {...form} name="link" />
      </Group>
      <Group title="Traffic">
        <ChoiceNamed {...form} name="mix" span={2} field={wireFields.mix} hint={mixHints[texts.mix]} />
        {texts.mix === 'letters' && <TextCell {...form} name="letters" span={2} />}
        <TextCell {...form} name="window" unit="B" />
        <YesNoCell {...form} name="timestamps" />
        <TextCell {...form} name="rtt" unit="ms" />
        <TextCell {...form} name="loss" unit="%" />
      </Group>
    </form>
  );
}

const Group = ({ title, children }: { readonly title: string; readonly children: ReactNode }) => (
  <section aria-label={title}>
    <h2 className="mb-8 text-section font-semibold">{title}</h2>
    <CellGrid columns={2}>{children}</CellGrid>
  </section>
);

const sizesByLetter = Object.entries(mixLetterFrameBytes).map(([letter, bytes]) => `${letter} ${bytes}`);

/** What a mix consists of, said beneath its cell. */
const mixHints: Readonly<Record<string, string>> = {
  imix: `Simple IMIX is ${simpleImix.map(({ ipBytes, weight }) => `${weight} of ${ipBytes} B`).join(', ')}, IP headers included: common practice, no source.`,
  letters: `Mix letters are frames of so many bytes: ${sizesByLetter.join(', ')}; z is as long as the host MTU allows. RFC 6985 section 4.`,
};

function EspCells(form: FormProps) {
  const { texts, problems, onChange } = form;
  const mode = <ChoiceNamed {...form} name="esp" span={2} field={wireFields.esp} />;
  if (texts.esp === 'none') return mode;
  const transform = wireFields.transform.read(texts.transform);
  const needsIntegrity = transform.ok && !espTransforms[transform.value].aead;
  return (
    <>
      {mode}
      <SelectNamed
        {...form}
        name="transform"
        field={wireFields.transform}
        onChange={({ transform: chosen = '' }) =>
          onChange({ transform: chosen, ...integrityFor(chosen, texts) })
        }
      />
      {(needsIntegrity || texts.integrity !== 'none' || problems.integrity !== undefined) && (
        <SelectNamed {...form} name="integrity" field={wireFields.integrity} />
      )}
      <YesNoCell {...form} name="nat" span={texts.esp === 'transport' ? 2 : 1} />
      {texts.esp !== 'transport' && <ChoiceNamed {...form} name="outer" field={wireFields.outer} />}
    </>
  );
}

/** The integrity that goes with a newly chosen transform: kept where it can be. */
function integrityFor(transformText: string, { integrity }: WireTexts): Partial<WireTexts> {
  const transform = wireFields.transform.read(transformText);
  if (!transform.ok) return {};
  if (espTransforms[transform.value].aead) return { integrity: 'none' };
  return integrity === 'none' ? { integrity: 'hmac-sha2-256-128' } : {};
}

function AccessCells(form: FormProps) {
  const { texts, onChange } = form;
  const kind = texts.access === 'none' || texts.access === 'pppoe' ? texts.access : 'bytes';
  return (
    <>
      <SelectCell
        label={wireFields.access.label}
        span={kind === 'none' ? 2 : 1}
        value={kind}
        options={[
          { value: 'none', label: 'None' },
          { value: 'pppoe', label: 'PPPoE' },
          { value: 'bytes', label: 'Bytes' },
        ]}
        onChange={(chosen) => onChange({ access: chosen === 'bytes' ? '4' : chosen })}
      />
      {kind === 'bytes' && <TextCell {...form} name="access" label="Bytes of overhead" unit="B" />}
      {kind !== 'none' && <TextCell {...form} name="payload" unit="B" span={kind === 'bytes' ? 2 : 1} />}
    </>
  );
}

function TextCell({
  name,
  texts,
  problems,
  onChange,
  span,
  unit,
  label = wireFields[name].label,
}: NamedCellProps & { readonly unit?: string; readonly label?: string }) {
  return (
    <CommitCell
      label={label}
      span={span}
      value={texts[name]}
      error={problems[name]}
      validate={(text) => textProblem(name, text)}
      onCommit={(text) => onChange({ [name]: text })}
      after={unit === undefined ? undefined : <span className="text-note text-ink-3">{unit}</span>}
    />
  );
}

interface ChoosingCellProps extends NamedCellProps {
  readonly field: Pick<ChoiceField<unknown, string>, 'options'>;
}

function ChoiceNamed({
  name,
  texts,
  problems,
  onChange,
  span,
  field,
  hint,
}: ChoosingCellProps & { readonly hint?: string }) {
  return (
    <ChoiceCell
      label={wireFields[name].label}
      span={span}
      value={texts[name]}
      options={field.options}
      hint={hint}
      error={problems[name]}
      onChange={(text) => onChange({ [name]: text })}
    />
  );
}

function SelectNamed({ name, texts, problems, onChange, field }: ChoosingCellProps) {
  const known = field.options.some(({ value }) => value === texts[name]);
  return (
    <SelectCell
      label={wireFields[name].label}
      span={2}
      value={known ? texts[name] : ''}
      placeholder={known ? undefined : texts[name]}
      options={field.options}
      error={problems[name]}
      onChange={(text) => onChange({ [name]: text })}
    />
  );
}

function YesNoCell({ name, texts, problems, onChange, span }: NamedCellProps) {
  return (
    <CheckCell
      label={wireFields[name].label}
      span={span}
      checked={texts[name] === 'yes'}
      error={problems[name]}
      onChange={(checked) => onChange({ [name]: checked ? 'yes' : 'no' })}
    />
  );
}
