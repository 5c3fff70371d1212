import { CellGrid } from '../../components/cell.tsx';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { ElementList } from './element-link.tsx';
import { LongTextField, SelectField, TextField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { NewerProfile } from './profile-cells.tsx';
import { rate } from '../../lib/rate-text.ts';
import { Section } from './section.tsx';
import { wholeNumber } from '../../lib/written-value.ts';

const perSecond = wholeNumber('/s');
const count = wholeNumber();
const scopes = [
  { value: 'endpoint', label: 'one tunnel per endpoint' },
  { value: 'peer', label: 'one tunnel per peer' },
  { value: 'multipoint', label: 'several, as one circuit' },
] as const;
const groupChoices = [
  { value: 'drop', label: 'dropped' },
  { value: 'pass', label: 'passed on' },
  { value: 'peer', label: 'taken in' },
] as const;
// IEEE 802.1Q-2022 table 8-1: 01-80-C2-00-00-00 to -0F, from memory.
const reservedOctets = Array.from({ length: 16 }, (_, octet) => octet.toString(16).padStart(2, '0'));

/** What a class of gateway can do, as it was measured. */
export function ProfilePanel({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const profile = design.profiles[id];
  if (profile === undefined) return null;
  const at = (...field: string[]) => ['profiles', id, ...field];
  const users = Object.entries(design.devices).filter(([, device]) => device.profile === id);
  const ref = { collection: 'profiles', id } as const;
  return (
    <>
      <PanelHead of={ref} namePath={at('name')} />
      <CellGrid columns={2}>
        <LongTextField label="Basis: who measured it, how, when" path={at('basis')} span={2} />
        <SelectField label="One VNI may name" path={at('vniScope')} choices={scopes} span={2} />
        <SelectField
          label="Multicast TTL"
          path={at('multicastTtl')}
          choices={[
            { value: 'kept', label: 'kept' },
            { value: 'lowered', label: 'lowered' },
          ]}
        />
        <TextField label="MAC table" path={at('macTable')} writing={count} />
        <SelectField
          label="Too large, with DF"
          path={at('oversizeDf')}
          span={2}
          choices={[
            { value: 'silent', label: 'dropped without a word' },
            { value: 'icmp', label: 'dropped, sender told' },
            { value: 'fragment', label: 'cut all the same' },
          ]}
        />
        <SelectField
          label="HMAC-SHA2-256 cut to"
          path={at('hmacSha256Bits')}
          span={2}
          // RFC 4868 section 2.3: 128 bits.
          choices={[
            { value: 128, label: '128 bits, as the standard says' },
            { value: 96, label: '96 bits, as an early draft said' },
          ]}
          hint="HMAC-SHA2-256 cut to: bits of the integrity value left on a packet. Ends that differ refuse each other’s packets."
        />
      </CellGrid>
      <NewerProfile id={id} />
      <FindingBoxes about={ref} />
      {(['plain', 'encrypted'] as const).map((kind) => (
        <Section
          key={kind}
          title={kind === 'plain' ? 'Throughput without encryption' : 'Throughput with encryption'}
        >
          <CellGrid columns={2}>
            <TextField label="One flow" path={at(kind, 'oneFlowBps')} writing={rate} />
            <TextField label="Many flows" path={at(kind, 'manyFlowsBps')} writing={rate} />
            <TextField label="Packets" path={at(kind, 'packetsPerSecond')} writing={perSecond} span={2} />
            {kind === 'encrypted' && (
              <>
                <SelectField
                  label="Encryption done by"
                  path={at('encryption')}
                  span={2}
                  choices={[
                    { value: 'offloaded', label: 'offload hardware' },
                    { value: 'cpu', label: 'the CPU' },
                  ]}
                />
                <LongTextField label="When it falls back to the CPU" path={at('cpuWhen')} span={2} />
              </>
            )}
          </CellGrid>
        </Section>
      ))}
      <Section title="Reserved group addresses" open={false} about={[at('reservedGroups')]}>
        <CellGrid columns={2}>
          {reservedOctets.map((octet) => (
            <SelectField
              key={octet}
              label={`01-80-C2-00-00-${octet.toUpperCase()}`}
              path={at('reservedGroups', octet)}
              choices={groupChoices}
            />
          ))}
        </CellGrid>
      </Section>
      <Section title={`Used by (${users.length})`}>
        <ElementList
          of={users.map(([device]) => ({ collection: 'devices', id: device }))}
          empty="No device."
        />
      </Section>
    </>
  );
}
