import { CellGrid } from '../../components/cell.tsx';
import { transportWords } from '../../drawing/parts/words.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { useNetwork } from './carried-segments.tsx';
import { CheckList } from './check-list.tsx';
import { milliseconds } from '../../lib/duration-text.ts';
import { ElementList } from './element-link.tsx';
import { LongTextField, SelectField, TextField, YesNoField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { rate } from '../../lib/rate-text.ts';
import { Section } from './section.tsx';
import { percent } from '../../lib/share-text.ts';
import { useField } from './use-field.ts';
import { wholeNumber } from '../../lib/written-value.ts';

const bytes = wholeNumber('B');
const kinds = [
  { value: 'internet', label: 'internet' },
  { value: 'private-routed', label: 'private, routed' },
  { value: 'own-routed', label: 'our own, routed' },
] as const;
const filters = [
  { value: 'packet-too-big', label: '“too big” messages' },
  { value: 'fragments', label: 'fragments' },
  { value: 'esp', label: 'ESP' },
  { value: 'udp-500', label: 'UDP 500' },
  { value: 'udp-4500', label: 'UDP 4500' },
  { value: 'udp-4789', label: 'UDP 4789' },
  { value: 'multicast', label: 'multicast' },
] as const;

/** A transport: what it carries, how it behaves, what it filters, and who lands on it. */
export function TransportPanel({ id }: { readonly id: string }) {
  const network = useNetwork();
  const transport = useOpenState((state) => state.document.transports[id]);
  if (transport === undefined) return null;
  const at = (field: string) => ['transports', id, field];
  const ref = { collection: 'transports', id } as const;
  const landings = network.landingsByTransport.get(id) ?? [];
  return (
    <>
      <PanelHead of={ref} namePath={at('name')} />
      <CellGrid columns={2}>
        <SelectField label="Kind" path={at('kind')} choices={kinds} required />
        <YesNoField
          label="Trusted"
          path={at('trusted')}

          emptyWord={`by its kind: ${transportWords(transport).trusted ? 'yes' : 'no'}`}
        />
        <TextField label="MTU" path={at('mtu')} writing={bytes} />
        <TextField label="Rate limit" path={at('rateBps')} writing={rate} />
        <TextField label="Latency, one way" path={at('latencyUs')} writing={milliseconds} />
        <TextField label="Jitter" path={at('jitterUs')} writing={milliseconds} />
        <TextField label="Loss" path={at('lossPpm')} writing={percent} />
        <SelectField
          label="Paths"
          path={at('paths')}
          choices={[
            { value: 'one', label: 'one' },
            { value: 'several', label: 'several' },
          ]}
        />
        <FamiliesCell id={id} />
      </CellGrid>
      <FindingBoxes about={ref} />
      <Section title="What it filters" open={transport.filters !== undefined} about={[at('filters')]}>
        <CheckList label="Filtered" path={at('filters')} choices={filters} noneWords="it filters nothing" />
      </Section>
      <Section title={`Landings (${landings.length})`}>
        <ElementList
          of={landings.map((landing) => ({ collection: 'links', id: landing }))}
          empty="Nobody has landed on it yet."
        />
      </Section>
      <Section title="Notes" open={transport.notes !== undefined}>
        <CellGrid>
          <LongTextField label="Notes" path={at('notes')} />
        </CellGrid>
      </Section>
    </>
  );
}

const familySets = { '4': [4], '6': [6], '4 6': [4, 6] } as const;
type FamilySet = keyof typeof familySets;

/** Which address families a transport routes. */
function FamiliesCell({ id }: { readonly id: string }) {
  const path = ['transports', id, 'families'];
  const { commit } = useField<readonly (4 | 6)[]>(path);
  return (
    <SelectField<FamilySet>
      label="Address families"
      path={path}
      span={2}
      choices={[
        { value: '4', label: 'IPv4' },
        { value: '6', label: 'IPv6' },
        { value: '4 6', label: 'IPv4 and IPv6' },
      ]}
      read={(stored) =>
        Array.isArray(stored) ? ([...new Set(stored)].sort().join(' ') as FamilySet) : undefined
      }
      onChoose={(set) => commit('Address families', set === undefined ? undefined : familySets[set])}
    />
  );
}
