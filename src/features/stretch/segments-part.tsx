import type { ReactNode } from 'react';
import { CellGrid, FieldError, PlainCell } from '../../components/cell.tsx';
import { CheckBox } from '../../components/check-box.tsx';
import { ChoiceCell, CommitCell, NumberCell } from '../../components/field-cells.tsx';
import { protocols as allProtocols } from '../../engine/model/intent.ts';
import type { SegmentPlan } from '../../engine/stretch/stretch-form.ts';
import { MOST_SEGMENTS } from '../../engine/stretch/stretch-form.ts';
import { protocolWords } from '../../engine/model/protocol-words.ts';
import { nextSegment } from './first-form.ts';
import { AddButton, FormPart, type FormPartProps, RemoveButton, replaced, withField } from './form-part.tsx';
import { problemAt } from './problem-words.ts';

/** What is stretched: each segment with its VLAN, what it must carry, and where it is. */
export function SegmentsPart({ form, problems, onChange }: FormPartProps) {
  const { segments } = form;
  return (
    <FormPart
      title="Segments"
      beside={
        <AddButton
          disabled={segments.length >= MOST_SEGMENTS}
          onClick={() => onChange({ ...form, segments: [...segments, nextSegment(form)] })}
        >
          Add a segment
        </AddButton>
      }
    >
      {segments.map((segment, i) => (
        <SegmentRow
          key={segment.key}
          {...{ form, problems, segment }}
          at={`segments.${i}`}
          onSet={(entry) => onChange({ ...form, segments: replaced(segments, i, entry) })}
          onRemove={
            segments.length > 1
              ? () => onChange({ ...form, segments: segments.filter(({ key }) => key !== segment.key) })
              : undefined
          }
        />
      ))}
    </FormPart>
  );
}

const etherTypeText = (etherTypes: readonly number[] | undefined): string =>
  (etherTypes ?? []).map((each) => `0x${each.toString(16)}`).join(', ');

const etherTypesOf = (text: string): readonly number[] =>
  text
    .split(/[\s,]+/)
    .filter((each) => each !== '')
    .map((each) => Number.parseInt(each.replace(/^0x/i, ''), 16));

const etherTypeProblem = (text: string): string | undefined => {
  const wrong = text.split(/[\s,]+/).find((each) => each !== '' && !/^(0x)?[0-9a-f]{1,4}$/i.test(each));
  return wrong === undefined
    ? undefined
    : `EtherTypes: ${wrong} is none. Write them in hexadecimal, such as 0x88b5.`;
};

function SegmentRow({
  form,
  problems,
  segment,
  at,
  onSet,
  onRemove,
}: Pick<FormPartProps, 'form' | 'problems'> & {
  readonly segment: SegmentPlan;
  readonly at: string;
  readonly onSet: (segment: SegmentPlan) => void;
  readonly onRemove: (() => void) | undefined;
}) {
  const { name, vlan, subnet, mtu, protocols, mustBeFiltered } = segment;
  const set = <K extends keyof SegmentPlan>(field: K, value: SegmentPlan[K] | undefined): void =>
    onSet(withField(segment, field, value));
  const summary = protocols.map((each) => protocolWords[each]).join(', ');
  const needsEtherTypes =
    segment.etherTypes !== undefined || problems.some(({ field }) => field === `${at}.etherTypes`);
  return (
    <div role="group" aria-label={name}>
      <CellGrid columns="minmax(0,1.5fr) minmax(0,0.7fr) minmax(0,1.2fr) minmax(0,0.7fr) 38px">
        <CommitCell
          label="Segment"
          value={name}
          error={problemAt(problems, `${at}.name`, 'Segment')}
          onCommit={(text) => onSet({ ...segment, name: text })}
        />
        <NumberCell
          label="VLAN"
          subject={name}
          value={vlan}
          min={1}
          max={4094}
          placeholder="free one"
          error={problemAt(problems, `${at}.vlan`, 'VLAN')}
          onCommit={(value) => set('vlan', value)}
        />
        <CommitCell
          label="Subnet"
          subject={name}
          value={subnet ?? ''}
          placeholder="not known yet"
          error={problemAt(problems, `${at}.subnet`, 'Subnet')}
          onCommit={(text) => set('subnet', text === '' ? undefined : text)}
        />
        <NumberCell
          label="MTU"
          subject={name}
          value={mtu}
          min={68}
          max={65_535}
          placeholder="what fits"
          error={problemAt(problems, `${at}.mtu`, 'MTU')}
          onCommit={(value) => set('mtu', value)}
        />
        <PlainCell className="items-center justify-center">
          {onRemove !== undefined && <RemoveButton of={name} onClick={onRemove} />}
        </PlainCell>
      </CellGrid>
      <CellGrid columns={needsEtherTypes ? 2 : 1} className="-mt-px">
        <ChoiceCell
          label="Between its sites"
          subject={name}
          value={mustBeFiltered === true ? 'filtered' : 'open'}
          options={[
            { value: 'open', label: 'Not filtered' },
            { value: 'filtered', label: 'Filtered' },
          ]}
          error={problemAt(problems, `${at}.mustBeFiltered`, 'Filtered')}
          onChange={(value) => set('mustBeFiltered', value === 'filtered' ? true : undefined)}
        />
        {needsEtherTypes && (
          <CommitCell
            label="EtherTypes to let through"
            subject={name}
            value={etherTypeText(segment.etherTypes)}
            placeholder="such as 0x88b5"
            validate={etherTypeProblem}
            error={problemAt(problems, `${at}.etherTypes`, 'EtherTypes')}
            onCommit={(text) => set('etherTypes', text === '' ? undefined : etherTypesOf(text))}
          />
        )}
      </CellGrid>
      <Fold title="Must carry" summary={summary} error={problemAt(problems, `${at}.protocols`, 'Must carry')}>
        <CheckGroup
          label={`What ${name} must carry`}
          choices={allProtocols.map((value) => ({ value, label: protocolWords[value] }))}
          chosen={protocols}
          onChange={(chosen) => chosen.length > 0 && onSet({ ...segment, protocols: chosen })}
        />
      </Fold>
      <SegmentSites {...{ form, problems, segment, at, onSet }} />
    </div>
  );
}

function SegmentSites({
  form,
  problems,
  segment,
  at,
  onSet,
}: Pick<FormPartProps, 'form' | 'problems'> & {
  readonly segment: SegmentPlan;
  readonly at: string;
  readonly onSet: (segment: SegmentPlan) => void;
}) {
  const { sites } = form;
  if (sites.length < 3) return null;
  const chosen = segment.sites ?? sites.map(({ key }) => key);
  return (
    <Fold
      title="Where it is"
      summary={
        chosen.length === sites.length ? 'at all sites' : `at ${chosen.length} of ${sites.length} sites`
      }
      error={problemAt(problems, `${at}.sites`, 'Where it is')}
    >
      <CheckGroup
        label={`Where ${segment.name} is`}
        choices={sites.map(({ key, name }) => ({ value: key, label: name }))}
        chosen={chosen}
        onChange={(keys) => {
          // A segment at one site is not stretched.
          if (keys.length >= 2)
            onSet(withField(segment, 'sites', keys.length === sites.length ? undefined : keys));
        }}
      />
    </Fold>
  );
}

function Fold({
  title,
  summary,
  error,
  children,
}: {
  readonly title: string;
  readonly summary: string;
  readonly error: string | undefined;
  readonly children: ReactNode;
}) {
  return (
    <>
      <details className="-mt-px border border-rule-strong bg-field" open={error !== undefined || undefined}>
        <summary className="cursor-pointer px-9 py-5 text-base">
          <span className="text-label text-ink-3">{title}</span>{' '}
          <span className="font-medium">{summary}</span>
        </summary>
        <div className="border-t border-rule-2 px-9 py-8">{children}</div>
      </details>
      {error !== undefined && <FieldError>{error}</FieldError>}
    </>
  );
}

function CheckGroup<Value extends string>({
  label,
  choices,
  chosen,
  onChange,
}: {
  readonly label: string;
  readonly choices: readonly { readonly value: Value; readonly label: string }[];
  readonly chosen: readonly Value[];
  readonly onChange: (chosen: readonly Value[]) => void;
}) {
  return (
    <fieldset>
      <legend className="sr-only">{label}</legend>
      <div className="grid grid-cols-3 gap-x-8 gap-y-2 max-sm:grid-cols-2">
        {choices.map((choice) => (
          <CheckBox
            key={choice.value}
            className="min-h-24"
            checked={chosen.includes(choice.value)}
            onChange={(event) =>
              onChange(
                choices
                  .map(({ value }) => value)
                  .filter((value) =>
                    value === choice.value ? event.target.checked : chosen.includes(value),
                  ),
              )
            }
          >
            {choice.label}
          </CheckBox>
        ))}
      </div>
    </fieldset>
  );
}
