import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { ends } from '../../engine/network/network.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { linksIn } from '../../workspace/operations/connect-ports.ts';
import { useNetwork } from './carried-segments.tsx';
import { lifetime } from '../../lib/duration-text.ts';
import { ElementLink, ElementList } from './element-link.tsx';
import { SelectField, TextField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { portWords } from './port-words.ts';
import { rate } from '../../lib/rate-text.ts';
import { Section } from './section.tsx';
import { useCommit } from './use-field.ts';
import { accessOverhead } from '../../lib/written-value.ts';

/** A cable or a landing. */
export function LinkPanel({ id }: { readonly id: string }) {
  const kind = useOpenState((state) => state.document.links[id]?.kind);
  const ref = { collection: 'links', id } as const;
  return (
    <>
      <PanelHead of={ref} />
      <CellGrid>
        <TextField label="Name" path={['links', id, 'name']} emptyWord="what it joins" />
      </CellGrid>
      {kind === 'cable' && <CableCells id={id} />}
      {kind === 'landing' && <LandingCells id={id} />}
    </>
  );
}

const portLabel = (port: { readonly number: number; readonly name?: string }, words: string): string =>
  `${port.name ?? port.number}, ${words}`;

function CableCells({ id }: { readonly id: string }) {
  const network = useNetwork();
  const document = useOpenState((state) => state.document);
  const cable = document.links[id];
  if (cable?.kind !== 'cable') return null;
  const bundle = network.bundleByCable.get(id);
  const others = (bundle?.cables ?? []).filter((other) => other !== id);
  return (
    <>
      {ends.map((end) => {
        const plug = cable[end];
        const device = document.devices[plug.device];
        if (device === undefined) return null;
        const free = Object.entries(device.ports)
          .filter(
            ([port, facts]) =>
              port === plug.port ||
              (facts.role === device.ports[plug.port]?.role &&
                linksIn(
                  document,
                  plug.device,
                  port,
                  device.kind === 'ha-pair' ? (plug.member ?? 1) : undefined,
                ).length === 0),
          )
          .sort(([, a], [, b]) => a.number - b.number);
        return (
          <div key={end} role="group" aria-label={`Plug in ${device.name}`}>
            <CellGrid columns={2}>
              <ReadCell label="Plugged into" span={2}>
                <ElementLink
                  to={{ collection: 'devices', id: plug.device, port: plug.port, member: plug.member }}
                />
              </ReadCell>
              <SelectField
                label={`Port of ${device.name}`}
                path={['links', id, end, 'port']}
                span={device.kind === 'ha-pair' ? 1 : 2}
                required
                choices={free.map(([port, facts]) => ({
                  value: port,
                  label: portLabel(facts, portWords(facts)),
                }))}
              />
              {device.kind === 'ha-pair' && (
                <SelectField
                  label="Member"
                  place={device.name}
                  path={['links', id, end, 'member']}
                  required
                  read={(stored) => (stored === 2 ? 2 : 1)}
                  choices={([1, 2] as const).map((member) => ({
                    value: member,
                    label: device.memberNames[member],
                    disabled:
                      member !== (plug.member ?? 1) &&
                      linksIn(document, plug.device, plug.port, member).length > 0,
                  }))}
                />
              )}
              <TextField
                label="Aggregation group"
                place={device.name}
                path={['devices', plug.device, 'ports', plug.port, 'aggregation']}
                span={2}
                emptyWord="none: a single cable"
              />
            </CellGrid>
          </div>
        );
      })}
      <FindingBoxes about={{ collection: 'links', id }} />
      {others.length > 0 && (
        <Section title="Tied together with">
          <ElementList of={others.map((other) => ({ collection: 'links', id: other }))} empty="" />
        </Section>
      )}
    </>
  );
}

type Nat = 'none' | 'behind' | 'hidden' | 'forwarded';
const natChoices: readonly { readonly value: Nat; readonly label: string }[] = [
  { value: 'none', label: 'no NAT in front' },
  { value: 'forwarded', label: 'behind NAT, port forwarded' },
  { value: 'hidden', label: 'behind NAT, not forwarded' },
  { value: 'behind', label: 'behind NAT, forwarding unknown' },
];
const natValues: Readonly<Record<Nat, unknown>> = {
  none: null,
  behind: { forwarded: null },
  hidden: { forwarded: false },
  forwarded: { forwarded: true },
};
const natOf = (stored: unknown): Nat => {
  if (typeof stored !== 'object' || stored === null) return 'none';
  const forwarded = 'forwarded' in stored ? stored.forwarded : undefined;
  return forwarded === true ? 'forwarded' : forwarded === false ? 'hidden' : 'behind';
};

function LandingCells({ id }: { readonly id: string }) {
  const network = useNetwork();
  const commit = useCommit();
  const document = useOpenState((state) => state.document);
  const landing = document.links[id];
  if (landing?.kind !== 'landing') return null;
  const device = document.devices[landing.device];
  const at = (field: string) => ['links', id, field];
  const associations = (network.associationsByDevice.get(landing.device) ?? []).map(
    ({ association }) => association,
  );
  return (
    <>
      <CellGrid columns={2}>
        <ReadCell label="Port" span={2}>
          <ElementLink to={{ collection: 'devices', id: landing.device, port: landing.port }} />
        </ReadCell>
        <SelectField
          label="Transport"
          path={at('transport')}
          span={2}
          required
          choices={Object.entries(document.transports).map(([transport, { name }]) => ({
            value: transport,
            label: name,
          }))}
        />
        <TextField label="Outside IPv4" path={at('ipv4')} span={2} emptyWord="none stated" />
        <TextField label="Outside IPv6" path={at('ipv6')} span={2} emptyWord="none stated" />
        <SelectField<boolean>
          label="Address"
          path={at('dynamic')}
          span={landing.dynamic === true ? 1 : 2}
          required
          read={(stored) => stored === true}
          choices={[
            { value: false, label: 'fixed' },
            { value: true, label: 'changes' },
          ]}
          onChoose={(changes) =>
            commit(
              `Address of ${device?.name ?? landing.device}`,
              // A fixed address needs no name that follows it.
              patchAt(
                ['links', id],
                changes === true ? { dynamic: true } : { dynamic: null, dynamicName: null },
              ),
            )
          }
        />
        {landing.dynamic === true && (
          <TextField label="Name that follows it" path={at('dynamicName')} emptyWord="none" />
        )}
        <SelectField
          label="NAT"
          path={at('nat')}
          span={2}
          required
          choices={natChoices}
          read={natOf}
          onChoose={(nat) => {
            if (nat !== undefined)
              commit(`NAT of ${device?.name ?? landing.device}`, patchAt(at('nat'), natValues[nat]));
          }}
        />
        {landing.nat !== undefined && (
          <TextField
            label="NAT forgets after"
            path={[...at('nat'), 'mappingSeconds']}
            writing={lifetime}
            span={2}
            hint="NAT forgets after: how long it remembers a UDP flow on which no packet comes."
          />
        )}
        <TextField
          label="Access overhead"
          path={at('accessOverhead')}
          writing={accessOverhead}
          span={2}
          emptyWord="none"
        />
        <TextField label="Rate up" path={at('rateUpBps')} writing={rate} />
        <TextField label="Rate down" path={at('rateDownBps')} writing={rate} />
        {device?.kind === 'ha-pair' && (
          <SelectField
            label="Members plugged in"
            path={at('members')}
            span={2}
            required
            read={(stored) => (stored === '1' || stored === '2' ? stored : 'both')}
            choices={[
              { value: 'both', label: 'both' },
              { value: '1', label: `${device.memberNames[1]} alone` },
              { value: '2', label: `${device.memberNames[2]} alone` },
            ]}
          />
        )}
      </CellGrid>
      <FindingBoxes about={{ collection: 'links', id }} />
      <Section title="Associations of its device">
        <ElementList
          of={associations.map((association) => ({ collection: 'associations', id: association }))}
          empty="None."
        />
      </Section>
    </>
  );
}
