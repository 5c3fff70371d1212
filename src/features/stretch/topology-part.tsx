import { CellGrid } from '../../components/cell.tsx';
import { ChoiceCell, SelectCell } from '../../components/field-cells.tsx';
import type { topologyKinds } from '../../engine/stretch/stretch-form.ts';
import { FormPart, type FormPartProps } from './form-part.tsx';
import { problemAt } from './problem-words.ts';

type Kind = (typeof topologyKinds)[number];

/** How the sites hang together, and whether what goes between them is encrypted. */
export function TopologyPart({ form, problems, onChange }: FormPartProps) {
  const { sites, topology, encrypted } = form;
  const kinds: readonly { readonly value: Kind; readonly label: string; readonly disabled?: boolean }[] = [
    { value: 'pair', label: 'Pair', disabled: sites.length !== 2 },
    { value: 'hub', label: 'Hub' },
    { value: 'chain', label: 'Chain' },
    { value: 'mesh', label: 'Full mesh' },
  ];
  return (
    <FormPart title="Shape">
      <CellGrid columns={2}>
        <ChoiceCell
          label="Topology"
          span={2}
          value={topology.kind}
          options={kinds}
          error={problemAt(problems, 'topology.kind', 'Topology')}
          onChange={(kind) =>
            onChange({ ...form, topology: kind === 'hub' ? { kind, hub: sites[0]!.key } : { kind } })
          }
        />
        {topology.kind === 'hub' && (
          <SelectCell
            label="The hub"
            value={topology.hub}
            options={sites.map(({ key, name }) => ({ value: key, label: name }))}
            error={problemAt(problems, 'topology.hub', 'The hub')}
            onChange={(hub) => onChange({ ...form, topology: { kind: 'hub', hub } })}
          />
        )}
        <ChoiceCell
          label="Between the sites"
          span={topology.kind === 'hub' ? 1 : 2}
          value={encrypted ? 'ipsec' : 'bare'}
          options={[
            { value: 'ipsec', label: 'IPsec' },
            { value: 'bare', label: 'Bare' },
          ]}
          error={problemAt(problems, 'encrypted', 'IPsec')}
          onChange={(value) => onChange({ ...form, encrypted: value === 'ipsec' })}
        />
        {encrypted && (
          <ChoiceCell
            label="Ends prove who they are by"
            span={2}
            value={form.authentication ?? 'certificate'}
            options={[
              { value: 'certificate', label: 'Certificate' },
              { value: 'pre-shared-key', label: 'Pre-shared key' },
            ]}
            onChange={(authentication) => onChange({ ...form, authentication })}
          />
        )}
      </CellGrid>
    </FormPart>
  );
}
