import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { isGateway } from '../../engine/model/devices.ts';
import type { Side } from '../../engine/model/layout.ts';
import { otherEnd } from '../../engine/network/network.ts';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { dockEndpoint, moveEndpointTo } from '../../workspace/operations/move-parts.ts';
import { useNetwork } from './carried-segments.tsx';
import { ConnectButton } from './connect-button.tsx';
import { ElementLink, ElementList } from './element-link.tsx';
import { SelectField, TextField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead, usePerform } from './panel-head.tsx';
import { Section } from './section.tsx';

const sides: readonly { readonly value: Side; readonly label: string }[] = [
  { value: 'left', label: 'left' },
  { value: 'right', label: 'right' },
  { value: 'top', label: 'top' },
  { value: 'bottom', label: 'bottom' },
];

/** A loopback endpoint: where it is, its addresses, and the tunnels that end on it. */
export function EndpointPanel({ id }: { readonly id: string }) {
  const network = useNetwork();
  const open = useOpenDesign();
  const run = usePerform();
  const document = useOpenState((state) => state.document);
  const endpoint = document.endpoints[id];
  if (endpoint === undefined) return null;
  const at = (field: string) => ['endpoints', id, field];
  const ref = { collection: 'endpoints', id } as const;
  const device = document.devices[endpoint.device];
  const tunnels = network.tunnelsByEndpoint.get(id) ?? [];
  const now = () => open.store.getState().document;
  return (
    <>
      <PanelHead of={ref} namePath={at('name')} />
      <CellGrid columns={2}>
        <SelectField
          label="Device"
          path={at('device')}
          required
          choices={Object.entries(document.devices)
            .filter(([, each]) => isGateway(each))
            .map(([each, { name }]) => ({ value: each, label: name }))}
          onChoose={(target) => {
            if (target !== undefined) run(moveEndpointTo(now(), id, target));
          }}
        />
        <SelectField<Side>
          label="Docks at"
          path={['layout', 'endpoints', id, 'side']}
          emptyWord="where it fits"
          choices={sides}
          onChoose={(side) => run(dockEndpoint(now(), id, side))}
        />
        {device?.kind === 'ha-pair' && (
          <SelectField
            label="Held by"
            path={at('member')}
            span={2}
            emptyWord="both members"
            choices={([1, 2] as const).map((member) => ({
              value: member,
              label: `${device.memberNames[member]} alone`,
            }))}
          />
        )}
        <TextField label="IPv4 with prefix" path={at('ipv4')} span={2} emptyWord="none" />
        <TextField label="IPv6 with prefix" path={at('ipv6')} span={2} emptyWord="none" />
        <ReadCell label="On" span={2}>
          <ElementLink to={{ collection: 'devices', id: endpoint.device }} />
        </ReadCell>
      </CellGrid>
      <FindingBoxes about={ref} />
      <Section title={`Tunnels (${tunnels.length})`} beside={<ConnectButton kind="tunnel" from={ref} />}>
        <ElementList
          of={tunnels.map(({ tunnel }) => ({ collection: 'tunnels', id: tunnel }))}
          empty="No tunnel ends here yet."
          detail={({ id: tunnel }) => {
            const end = tunnels.find((each) => each.tunnel === tunnel)?.end ?? 'a';
            const entry = document.tunnels[tunnel];
            if (entry === undefined) return null;
            const far = document.endpoints[entry[otherEnd(end)].endpoint]?.device ?? '';
            return [
              entry[end].vni === undefined ? 'no VNI' : `VNI ${entry[end].vni}`,
              `to ${document.devices[far]?.name ?? far}`,
            ].join(' ');
          }}
        />
      </Section>
    </>
  );
}
