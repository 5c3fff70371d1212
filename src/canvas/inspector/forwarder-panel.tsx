import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { DeepReadonly, Entry } from '../../engine/model/design.ts';
import type { Circuit } from '../../engine/model/overlay.ts';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import { isTrunk } from '../../engine/network/frame-tags.ts';
import { keepsTags } from '../../engine/rules/tag-mode.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { useNetwork } from './carried-segments.tsx';
import { ElementLink } from './element-link.tsx';
import type { FieldPath } from './field-marks.ts';
import { SelectField, TextField, YesNoField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { GatewayInterface } from './gateway-interface.tsx';
import { OrderedList } from './ordered-list.tsx';
import { PanelHead } from './panel-head.tsx';
import { PolicyList } from './policy-list.tsx';
import { portWords } from './port-words.ts';
import { Section } from './section.tsx';
import { SpanningTreeCells } from './spanning-tree-cells.tsx';
import { useCommit } from './use-field.ts';
import { circuitVlans, vlanTranslation } from './vlan-list.ts';

type Forwarder = Entry<'forwarders'>;
type Kind = Forwarder['kind'];

/** A bridge or a cross-connect: what it joins, what it lets through, and its inside interface. */
export function ForwarderPanel({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const commit = useCommit();
  const forwarder = design.forwarders[id];
  if (forwarder === undefined) return null;
  const at = (field: string) => ['forwarders', id, field];
  const ref = { collection: 'forwarders', id } as const;
  const isBridge = forwarder.kind === 'bridge';
  const changeKind = (kind: Kind | undefined): void => {
    if (kind === undefined) return;
    // A filter is a cross-connect's; a spanning tree and a gateway's interface need a bridge.
    const gone = kind === 'bridge' ? ['policy'] : ['spanningTree', 'gateway'];
    commit(
      `Kind of ${forwarder.name}`,
      joinPatches(design, [patchAt(at('kind'), kind), ...gone.map((field) => patchAt(at(field), null))]),
    );
  };
  return (
    <>
      <PanelHead of={ref} namePath={at('name')} />
      <CellGrid columns={2}>
        <SelectField<Kind>
          label="Kind"
          path={at('kind')}
          required
          choices={[
            { value: 'bridge', label: 'bridge' },
            { value: 'cross-connect', label: 'cross-connect' },
          ]}
          onChoose={changeKind}
        />
        <ReadCell label="On">
          <ElementLink to={{ collection: 'devices', id: forwarder.device }} />
        </ReadCell>
        <SelectField
          label="Multicast"
          path={at('multicast')}
          span={2}
          choices={[
            { value: 'flood', label: 'flooded' },
            { value: 'snoop', label: 'where it was joined' },
            { value: 'drop', label: 'dropped' },
          ]}
        />
        <YesNoField
          label="Group membership querier"
          path={at('querier')}
          span={2}
          hint="Querier: it asks the segment who is a member of which group. Where nobody asks, bridges that watch forget."
        />
        {isBridge && <SpanningTreeCells path={at('spanningTree')} of={forwarder.name} />}
      </CellGrid>
      <p className="text-note text-ink-2">
        {isBridge
          ? 'Floods between all its circuits and filters nothing.'
          : 'Joins one port to one tunnel and drops everything that no rule permits.'}
      </p>
      <FindingBoxes about={ref} />
      <Circuits id={id} forwarder={forwarder} />
      {!isBridge && (
        <Section title="Filter">
          <PolicyList path={at('policy')} of={forwarder.name} />
        </Section>
      )}
      {isBridge && <GatewayInterface id={id} of={forwarder.name} />}
    </>
  );
}

function Circuits({ id, forwarder }: { readonly id: string; readonly forwarder: Forwarder }) {
  const design = useOpenState((state) => state.document);
  const network = useNetwork();
  const device = design.devices[forwarder.device];
  const ports = Object.entries(device?.ports ?? {})
    .filter(([, port]) => port.role === 'lan')
    .sort(([, a], [, b]) => a.number - b.number);
  const here = new Set(
    (network.circuitsByForwarder.get(id) ?? []).flatMap(({ circuit }) =>
      circuit.kind === 'tunnel' ? [circuit.tunnel] : [],
    ),
  );
  const tunnels = [
    ...new Set((network.tunnelsByDevice.get(forwarder.device) ?? []).map(({ tunnel }) => tunnel)),
  ];
  const free = tunnels.filter((tunnel) => !here.has(tunnel));
  const [firstPort] = ports;
  return (
    <Section title={`Circuits (${Object.keys(forwarder.circuits).length})`}>
      <OrderedList<DeepReadonly<Circuit>>
        path={['forwarders', id, 'circuits']}
        noun="circuit"
        of={forwarder.name}
        empty="It joins nothing yet."
        titleOf={(circuit) =>
          circuit.kind === 'tunnel' ? (
            <ElementLink to={{ collection: 'tunnels', id: circuit.tunnel }} />
          ) : (
            <ElementLink to={{ collection: 'devices', id: forwarder.device, port: circuit.port }} />
          )
        }
        fresh={[
          ...(firstPort === undefined
            ? []
            : [
                {
                  label: 'Add a port',
                  entry: () => ({
                    kind: 'port' as const,
                    port: firstPort[0],
                    vlans: isTrunk(firstPort[1]) ? ('all' as const) : ('untagged' as const),
                  }),
                },
              ]),
          ...(free[0] === undefined
            ? []
            : [{ label: 'Add a tunnel', entry: () => ({ kind: 'tunnel' as const, tunnel: free[0]! }) }]),
        ]}
      >
        {(circuit, _circuitId, path) =>
          circuit.kind === 'port' ? (
            <PortCircuitCells
              circuit={circuit}
              path={path}
              ports={ports.map(([port, facts]) => ({
                value: port,
                label: `${facts.name ?? facts.number}, ${portWords(facts)}`,
              }))}
            />
          ) : (
            <CellGrid columns={2}>
              <SelectField
                label="Tunnel"
                path={[...path, 'tunnel']}
                required
                choices={tunnels
                  .filter((tunnel) => tunnel === circuit.tunnel || !here.has(tunnel))
                  .map((tunnel) => ({
                    value: tunnel,
                    label: nameOf(design, { collection: 'tunnels', id: tunnel }),
                  }))}
              />
              <TextField label="Isolation group" path={[...path, 'isolation']} emptyWord="none" />
            </CellGrid>
          )
        }
      </OrderedList>
      <p className="text-note text-ink-2">Circuits of one isolation group never exchange frames.</p>
    </Section>
  );
}

function PortCircuitCells({
  circuit,
  path,
  ports,
}: {
  readonly circuit: DeepReadonly<Extract<Circuit, { kind: 'port' }>>;
  readonly path: FieldPath;
  readonly ports: readonly { readonly value: string; readonly label: string }[];
}) {
  return (
    <CellGrid columns={2}>
      <SelectField label="Port" path={[...path, 'port']} required choices={ports} span={2} />
      <TextField label="VLANs" path={[...path, 'vlans']} writing={circuitVlans} span={2} required />
      <SelectField
        label="Their tag"
        span={2}
        path={[...path, 'tag']}
        emptyWord={`not stated: ${keepsTags({ ...circuit, tag: undefined }) ? 'kept' : 'removed'}`}
        choices={[
          { value: 'removed', label: 'removed' },
          { value: 'kept', label: 'kept' },
        ]}
      />
      <TextField
        label="Translated, wire > inside"
        span={2}
        path={[...path, 'translate']}
        writing={vlanTranslation}
        emptyWord="none"
      />
      <TextField label="Isolation group" path={[...path, 'isolation']} span={2} emptyWord="none" />
    </CellGrid>
  );
}
