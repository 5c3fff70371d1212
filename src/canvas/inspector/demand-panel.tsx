import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { CommitCell } from '../../components/field-cells.tsx';
import type { Entry } from '../../engine/model/design.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { AddButton } from './add-button.tsx';
import { SegmentName } from './carried-segments.tsx';
import { milliseconds } from '../../lib/duration-text.ts';
import { SelectField, TextField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { rate } from '../../lib/rate-text.ts';
import { Section } from './section.tsx';
import { refusalSentence, useCommit, useField } from './use-field.ts';
import { wholeNumber } from '../../lib/written-value.ts';

const count = wholeNumber();
const bytes = wholeNumber('B');

/** Traffic that a segment has to carry between two places. */
export function DemandPanel({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const demand = design.demands[id];
  if (demand === undefined) return null;
  const at = (field: string) => ['demands', id, field];
  const ref = { collection: 'demands', id } as const;
  const segment = design.segments[demand.segment];
  return (
    <>
      <PanelHead of={ref} />
      {segment !== undefined && <SegmentName id={demand.segment} segment={segment} />}
      <CellGrid columns={2}>
        <TextField label="Name" path={at('name')} span={2} emptyWord="none" />
        <SelectField
          label="Segment"
          path={at('segment')}
          span={2}
          required
          choices={Object.entries(design.segments).map(([each, { letter, name }]) => ({
            value: each,
            label: `${letter} ${name}`,
          }))}
        />
        <PlaceCell id={id} field="from" label="From" />
        <PlaceCell id={id} field="to" label="To" />
        <TextField label="Rate there" path={at('forwardBps')} writing={rate} />
        <TextField label="Rate back" path={at('reverseBps')} writing={rate} />
        <TextField label="Flows" path={at('flows')} writing={count} />
        <TextField label="Latency allowed" path={at('latencyAllowedUs')} writing={milliseconds} />
        <TextField label="Window" path={at('windowBytes')} writing={bytes} span={2} />
      </CellGrid>
      <FindingBoxes about={ref} />
      <MixSection id={id} />
    </>
  );
}

type Place = Entry<'demands'>['from'];
const placeKey = (place: Place): string => ('site' in place ? `site ${place.site}` : `host ${place.host}`);

/** A whole site or one host. */
function PlaceCell({
  id,
  field,
  label,
}: {
  readonly id: string;
  readonly field: 'from' | 'to';
  readonly label: string;
}) {
  const design = useOpenState((state) => state.document);
  const path = ['demands', id, field];
  const { commit } = useField<Place>(path);
  return (
    <SelectField<string>
      label={label}
      path={path}
      span={2}
      required
      choices={[
        ...Object.entries(design.sites).map(([site, { name }]) => ({
          value: `site ${site}`,
          label: `all of ${name}`,
        })),
        ...Object.entries(design.devices)
          .filter(([, { kind }]) => kind === 'host')
          .map(([host, { name }]) => ({ value: `host ${host}`, label: name })),
      ]}
      read={(stored) => placeKey(stored as Place)}
      onChoose={(key) => {
        const [kind, place] = key?.split(' ') ?? [];
        if (place !== undefined) commit(label, kind === 'site' ? { site: place } : { host: place });
      }}
    />
  );
}

type Mix = NonNullable<Entry<'demands'>['mix']>;
const usualPacket = { packetBytes: 1400, weight: 1 };
const bounds = { packetBytes: [68, 65_535], weight: [1, 1_000_000] } as const;

/** The lengths of its packets and how often each occurs. */
function MixSection({ id }: { readonly id: string }) {
  const path = ['demands', id, 'mix'];
  const { value: mix, editable, commit } = useField<Mix>(path);
  const commitPatch = useCommit();
  const set = (next: Mix): void => {
    if (next.length === 0) commitPatch('Frame mix', patchAt(path, null));
    else commit('Frame mix', next);
  };
  const cell = (at: number, field: 'packetBytes' | 'weight', label: string) => {
    const current = mix?.[at];
    if (current === undefined) return null;
    if (!editable) return <ReadCell label={label}>{current[field]}</ReadCell>;
    const [least, most] = bounds[field];
    return (
      <CommitCell
        label={label}
        place={`line ${at + 1}`}
        value={String(current[field])}
        inputMode="numeric"
        validate={(text) => {
          const number = Number(text);
          return Number.isInteger(number) && number >= least && number <= most
            ? undefined
            : refusalSentence(label, text, `type a whole number from ${least} to ${most}`);
        }}
        onCommit={(text) =>
          set((mix ?? []).map((line, other) => (other === at ? { ...line, [field]: Number(text) } : line)))
        }
      />
    );
  };
  return (
    <Section title="Frame mix">
      {mix === undefined && <p className="text-note text-ink-3">Not stated.</p>}
      {mix?.map((_line, at) => (
        // Lines of a mix have no names of their own: their place is what tells them apart.
        <div key={at} className="flex items-start gap-4">
          <div className="min-w-0 flex-1">
            <CellGrid columns={2}>
              {cell(at, 'packetBytes', 'IP packet, bytes')}
              {cell(at, 'weight', 'Weight')}
            </CellGrid>
          </div>
          {editable && (
            <Button
              kind="quiet"
              small
              iconOnly
              className="mt-9"
              aria-label={`Remove line ${at + 1}`}
              icon={<Icon name="cross" size={14} />}
              onClick={() => set(mix.filter((_other, other) => other !== at))}
            />
          )}
        </div>
      ))}
      {editable && (mix?.length ?? 0) < 16 && (
        <AddButton subject="to the frame mix" onClick={() => set([...(mix ?? []), usualPacket])}>
          Add a packet length
        </AddButton>
      )}
    </Section>
  );
}
