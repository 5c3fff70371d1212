import { CellGrid, PlainCell, ReadCell } from '../../components/cell.tsx';
import { CheckCell, CommitCell, NumberCell, SelectCell } from '../../components/field-cells.tsx';
import type { TransportPlan } from '../../engine/stretch/stretch-form.ts';
import { MOST_TRANSPORTS } from '../../engine/stretch/stretch-form.ts';
import { nextTransport, withoutTransport } from './first-form.ts';
import { AddButton, FormPart, type FormPartProps, RemoveButton, replaced, withField } from './form-part.tsx';
import { problemAt } from './problem-words.ts';

const kinds = [
  { value: 'internet', label: 'internet' },
  { value: 'private-routed', label: 'private routed' },
  { value: 'own-routed', label: 'our own routed' },
] as const;

const kindWords = Object.fromEntries(kinds.map(({ value, label }) => [value, label])) as Record<
  TransportPlan['kind'],
  string
>;

/** The routed networks that the sites land on. */
export function TransportsPart({ form, problems, onChange }: FormPartProps) {
  const { transports } = form;
  return (
    <FormPart
      title="Transports"
      beside={
        <AddButton
          disabled={transports.length >= MOST_TRANSPORTS}
          onClick={() => onChange({ ...form, transports: [...transports, nextTransport(form)] })}
        >
          Add a transport
        </AddButton>
      }
    >
      {transports.map((transport, i) => {
        const { key, name, kind, trusted, mtu, existing } = transport;
        const set = (entry: TransportPlan): void =>
          onChange({ ...form, transports: replaced(transports, i, entry) });
        const at = (field: string): string => `transports.${i}.${field}`;
        const isTrusted = trusted ?? kind === 'own-routed';
        const remove = transports.length > 1 && (
          <RemoveButton of={name} onClick={() => onChange(withoutTransport(form, key))} />
        );
        if (existing !== undefined)
          return (
            <CellGrid key={key} columns="minmax(0,2fr) minmax(0,1.5fr) minmax(0,1fr) minmax(0,1fr) 38px">
              <ReadCell label="On the sheet">{name}</ReadCell>
              <ReadCell label="Kind">{kindWords[kind]}</ReadCell>
              <ReadCell label="Trusted">{isTrusted ? 'yes' : 'no'}</ReadCell>
              <ReadCell label="MTU">{mtu ?? 'unknown'}</ReadCell>
              <PlainCell className="items-center justify-center">{remove}</PlainCell>
            </CellGrid>
          );
        return (
          <CellGrid key={key} columns="minmax(0,2fr) minmax(0,1.5fr) minmax(0,1fr) minmax(0,1fr) 38px">
            <CommitCell
              label="Name"
              value={name}
              error={problemAt(problems, at('name'), 'Name')}
              onCommit={(text) => set({ ...transport, name: text })}
            />
            <SelectCell
              label="Kind"
              value={kind}
              options={kinds}
              onChange={(value) => set({ ...transport, kind: value })}
            />
            <CheckCell
              label="Trusted"
              checked={isTrusted}
              onChange={(checked) => set({ ...transport, trusted: checked })}
            />
            <NumberCell
              label="MTU"
              value={mtu}
              min={68}
              max={65_535}
              placeholder="unknown"
              error={problemAt(problems, at('mtu'), 'MTU')}
              onCommit={(value) => set(withField(transport, 'mtu', value))}
            />
            <PlainCell className="items-center justify-center">{remove}</PlainCell>
          </CellGrid>
        );
      })}
    </FormPart>
  );
}
