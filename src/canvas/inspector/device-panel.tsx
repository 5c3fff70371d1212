import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { ElementRef, Entry } from '../../engine/model/design.ts';
import { hostFaces, isGateway } from '../../engine/model/devices.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { otherEnd } from '../../engine/network/network.ts';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { freeName } from '../../workspace/operations/free-names.ts';
import { placeEndpoint } from '../../workspace/operations/place-parts.ts';
import { AddButton } from './add-button.tsx';
import { useNetwork } from './carried-segments.tsx';
import { ConnectButton } from './connect-button.tsx';
import { DeviceKindCell } from './device-kind-cell.tsx';
import { milliseconds } from '../../lib/duration-text.ts';
import { ElementLink, ElementList } from './element-link.tsx';
import { LongTextField, SelectField, TextField, YesNoField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead, usePerform } from './panel-head.tsx';
import { PortTable } from './port-table.tsx';
import { ProfileCell } from './profile-cells.tsx';
import { Section } from './section.tsx';
import { SpanningTreeCells } from './spanning-tree-cells.tsx';
import { vlansOf } from './tunnel-facts.ts';
import { useCommit, useEditable } from './use-field.ts';
import { textList } from '../../lib/written-value.ts';

const vxlanSources = [
  { value: 'anyone', label: 'anyone' },
  { value: 'peers', label: 'its peers only' },
  { value: 'nobody', label: 'nobody' },
] as const;

/** A firewall, HA pair, router, switch or host, with its ports and what it holds. */
export function DevicePanel({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const device = design.devices[id];
  if (device === undefined) return null;
  const at = (...field: string[]) => ['devices', id, ...field];
  const ref: ElementRef = { collection: 'devices', id };
  const gateway = isGateway(device);
  return (
    <>
      <PanelHead of={ref} namePath={at('name')} />
      <CellGrid columns={2}>
        <DeviceKindCell id={id} />
        <SelectField
          label="Site"
          path={at('site')}
          required
          choices={Object.entries(design.sites).map(([site, { name }]) => ({ value: site, label: name }))}
        />
        {device.kind === 'host' && <HostCells id={id} />}
        <TextField label="Management address" path={at('managementAddress')} span={2} />
        <ProfileCell device={id} />
      </CellGrid>
      {device.kind === 'ha-pair' && <PairCells id={id} />}
      <FindingBoxes about={ref} />
      <PortTable device={id} />
      {gateway && <Overlay id={id} device={device} />}
      {device.kind !== 'host' && (
        <Section title="Settings" open={false} about={[at('settings')]}>
          {gateway && (
            <p className="text-note text-degr">
              These hold for the whole device: they touch all traffic through it, not only the tunnels.
            </p>
          )}
          <CellGrid columns={2}>
            {gateway && (
              <>
                <YesNoField label="Ignore DF" path={at('settings', 'ignoreDf')} />
                <YesNoField
                  label="Multicast routing"
                  path={at('settings', 'multicastRouting')}
                  words={['on', 'off']}
                />
                <YesNoField
                  label="Inner tags"
                  path={at('settings', 'keepInnerTags')}
                  words={['kept', 'stripped']}
                  span={2}
                />
                <SelectField
                  label="VXLAN taken from"
                  path={at('settings', 'vxlanFrom')}
                  choices={vxlanSources}
                  span={2}
                  hint="VXLAN taken from: whose packets to the VXLAN port its WAN ports let in outside IPsec."
                />
              </>
            )}
            <SpanningTreeCells path={at('settings', 'spanningTree')} of={device.name} />
          </CellGrid>
        </Section>
      )}
      <Section title="Notes" open={device.notes !== undefined}>
        <CellGrid>
          <LongTextField label="Notes" path={at('notes')} />
        </CellGrid>
      </Section>
    </>
  );
}

const faceChoices = hostFaces.map((face) => ({ value: face, label: face }));

function HostCells({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const at = (field: string) => ['devices', id, field];
  return (
    <>
      <SelectField label="Face" path={at('face')} choices={faceChoices} emptyWord="plain" />
      <SelectField
        label="Segment"
        path={at('segment')}
        choices={Object.entries(design.segments).map(([segment, { letter, name }]) => ({
          value: segment,
          label: `${letter} ${name}`,
        }))}
      />
      <TextField label="Addresses" path={at('addresses')} writing={textList} span={2} />
    </>
  );
}

function PairCells({ id }: { readonly id: string }) {
  const device = useOpenState((state) => state.document.devices[id]);
  if (device?.kind !== 'ha-pair') return null;
  const at = (...field: string[]) => ['devices', id, ...field];
  return (
    <Section title="The pair">
      <CellGrid columns={2}>
        <TextField label="Member 1" path={at('memberNames', '1')} required />
        <TextField label="Member 2" path={at('memberNames', '2')} required />
        <SelectField
          label="Mode"
          path={at('mode')}
          span={2}
          choices={[
            { value: 'active-standby', label: 'one active, one standby' },
            { value: 'active-active', label: 'both active' },
          ]}
        />
        {device.mode !== 'active-active' && (
          <SelectField
            label="Active member"
            path={at('active')}
            emptyWord={device.memberNames[1]}
            choices={([1, 2] as const).map((member) => ({
              value: member,
              label: device.memberNames[member],
            }))}
          />
        )}
        <YesNoField label="State sync" path={at('stateSync')} words={['on', 'off']} />
        <TextField
          label="Failover takes"
          path={at('failoverUs')}
          writing={milliseconds}
          span={device.mode === 'active-active' ? 1 : 2}
        />
      </CellGrid>
    </Section>
  );
}

/** Endpoints, associations and forwarders of a gateway. */
function Overlay({ id, device }: { readonly id: string; readonly device: Entry<'devices'> }) {
  const network = useNetwork();
  const open = useOpenDesign();
  const numbering = useNumbering();
  const editable = useEditable();
  const commit = useCommit();
  const run = usePerform();
  const { design } = network;
  const forwarders = network.forwardersByDevice.get(id) ?? [];
  const addBridge = (): void => {
    const own = Object.fromEntries(forwarders.map((forwarder) => [forwarder, design.forwarders[forwarder]!]));
    const bridge = newEntryId('br');
    const entry = { device: id, kind: 'bridge', name: freeName(own, 'br'), circuits: {} };
    if (commit(`Bridge of ${device.name}`, patchAt(['forwarders', bridge], entry)))
      open.select([{ collection: 'forwarders', id: bridge }]);
  };
  return (
    <>
      <Section
        title="Loopback endpoints"
        beside={
          editable && (
            <AddButton
              subject="an endpoint"
              onClick={() => run(placeEndpoint(open.store.getState().document, id, newEntryId, numbering))}
            >
              Add
            </AddButton>
          )
        }
      >
        <ElementList
          of={(network.endpointsByDevice.get(id) ?? []).map((endpoint) => ({
            collection: 'endpoints',
            id: endpoint,
          }))}
          empty="No tunnel can end here yet."
          detail={({ id: endpoint }) => (
            <ConnectButton
              kind="tunnel"
              from={{ collection: 'endpoints', id: endpoint }}
              subject={`from ${design.endpoints[endpoint]?.name ?? endpoint}`}
            />
          )}
        />
      </Section>
      <Section
        title="IPsec associations"
        beside={<ConnectButton kind="association" from={{ collection: 'devices', id }} />}
      >
        <ElementList
          of={(network.associationsByDevice.get(id) ?? []).map(({ association }) => ({
            collection: 'associations',
            id: association,
          }))}
          empty="None."
          detail={({ id: association }) => {
            const at = network.associationsByDevice.get(id)?.find((each) => each.association === association);
            const far =
              at === undefined ? undefined : design.associations[association]?.[otherEnd(at.end)].device;
            return far === undefined ? null : `to ${design.devices[far]?.name ?? far}`;
          }}
        />
      </Section>
      <Section
        title="Bridges and cross-connects"
        beside={
          editable && (
            <AddButton subject="a bridge" onClick={addBridge}>
              Add
            </AddButton>
          )
        }
      >
        {forwarders.length === 0 && <p className="text-note text-ink-3">Nothing is forwarded at layer 2.</p>}
        {forwarders.length > 0 && (
          <CellGrid>
            {forwarders.map((forwarder) => (
              <ReadCell
                key={forwarder}
                label={design.forwarders[forwarder]!.kind === 'bridge' ? 'Bridge' : 'Cross-connect'}
              >
                <ElementLink to={{ collection: 'forwarders', id: forwarder }} />
                <span className="block text-note text-ink-2">
                  {[
                    vlansOf(network, forwarder) === '' ? 'no port' : `VLAN ${vlansOf(network, forwarder)}`,
                    ...(network.circuitsByForwarder.get(forwarder) ?? []).flatMap(({ circuit }) =>
                      circuit.kind === 'tunnel'
                        ? [design.tunnels[circuit.tunnel]?.name ?? circuit.tunnel]
                        : [],
                    ),
                  ].join(', ')}
                </span>
              </ReadCell>
            ))}
          </CellGrid>
        )}
      </Section>
    </>
  );
}
