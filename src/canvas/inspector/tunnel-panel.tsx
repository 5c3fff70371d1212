import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { SelectCell } from '../../components/field-cells.tsx';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import { tunnelPath } from '../../engine/network/association-path.ts';
import { deviceOfTunnelEnd, ends, type End } from '../../engine/network/network.ts';
import { hostSettings } from '../../engine/wire/host-settings.ts';
import { stackLayers } from '../../engine/wire/stack-layers.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { associationsBetween } from '../../workspace/operations/join-endpoints.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { SegmentName, useCarried, useNetwork } from './carried-segments.tsx';
import { formatMilliseconds } from '../../lib/duration-text.ts';
import { ElementLink, ElementList } from './element-link.tsx';
import { endHeads } from './end-heads.ts';
import { markAt } from './field-marks.ts';
import { LongTextField, SelectField, TextField, Unknown, YesNoField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { CrossingRail, Mirror, MirrorRow, Rail, useEndCell } from './mirror.tsx';
import { PanelHead } from './panel-head.tsx';
import { Section } from './section.tsx';
import { TunnelCord } from './tunnel-cord.tsx';
import {
  capacityOf,
  checksumsMatter,
  endAddress,
  farAddress,
  forwardersAt,
  moveIntoForwarder,
  vlansOf,
} from './tunnel-facts.ts';
import { useAt, useCommit, useEditable } from './use-field.ts';
import { ViaList } from './via-list.tsx';
import { wholeNumber } from '../../lib/written-value.ts';

const vni = wholeNumber();
const udpPort = wholeNumber();
const outerDf = [
  { value: 'set', label: 'set' },
  { value: 'clear', label: 'clear' },
  { value: 'inherit', label: 'from inner' },
] as const;
const innerTags = [
  { value: 'strip', label: 'strip' },
  { value: 'keep', label: 'keep' },
] as const;

const udpChecksum = [
  { value: 'computed', label: 'computed' },
  { value: 'zero', label: 'zero' },
] as const;

/** A tunnel: its cord, what it carries, both ends side by side, what the checks say, and its sizes. */
export function TunnelPanel({ id }: { readonly id: string }) {
  const network = useNetwork();
  const tunnel = network.design.tunnels[id];
  const segments = useCarried(id);
  if (tunnel === undefined) return null;
  const devices = { a: deviceOfTunnelEnd(network, tunnel, 'a'), b: deviceOfTunnelEnd(network, tunnel, 'b') };
  const heads = endHeads(network.design, devices.a, devices.b);
  const ref = { collection: 'tunnels', id } as const;
  const asksForChecksums = checksumsMatter(network, id);
  return (
    <>
      <PanelHead of={ref} namePath={['tunnels', id, 'name']} />
      <TunnelCord segments={segments} vni={{ a: tunnel.a.vni, b: tunnel.b.vni }} />
      <CellGrid columns="minmax(0, 4fr) minmax(0, 3fr)">
        <ReadCell label={segments.length > 1 ? 'Segments' : 'Segment'}>
          {segments.length === 0 ? (
            <Unknown word="none reaches it" />
          ) : (
            segments.map((segment) => (
              <SegmentName key={segment.id} id={segment.id} segment={network.design.segments[segment.id]!} />
            ))
          )}
        </ReadCell>
        <ProtectedBy id={id} />
      </CellGrid>
      <Mirror label="Both ends" entry={['tunnels', id]} heads={heads}>
        <MirrorRow field={['vni']} agree="must">
          {({ path, place, alignRight }) => (
            <TextField label="VNI" {...{ path, place, alignRight }} writing={vni} />
          )}
        </MirrorRow>
        <AddressRows id={id} />
        <MirrorRow field={['udpPort']} agree="must">
          {({ path, place, alignRight }) => (
            <TextField label="UDP port" {...{ path, place, alignRight }} writing={udpPort} />
          )}
        </MirrorRow>
        <MirrorRow field={['outerDf']} agree="should">
          {({ path, place, alignRight }) => (
            <SelectField label="Outer DF" {...{ path, place, alignRight }} choices={outerDf} />
          )}
        </MirrorRow>
        <MirrorRow field={['innerTags']} agree="should">
          {({ path, place, alignRight }) => (
            <SelectField label="Inner tag" {...{ path, place, alignRight }} choices={innerTags} />
          )}
        </MirrorRow>
        <ForwarderRow id={id} />
        {asksForChecksums && <ChecksumRows />}
      </Mirror>
      {asksForChecksums && (
        <p className="text-note text-ink-2">
          Over IPv6 a UDP checksum of zero is an error unless the receiving end was told to take it.
        </p>
      )}
      <FindingBoxes about={ref} />
      <Sizes id={id} />
      <Section
        title="Ends and way"
        open={false}
        about={[
          ['tunnels', id, 'family'],
          ...ends.flatMap((end) => [
            ['tunnels', id, end, 'endpoint'],
            ['tunnels', id, end, 'via'],
          ]),
        ]}
      >
        <Ends id={id} devices={devices} />
        <CellGrid>
          <SelectField
            label="Address family"
            path={['tunnels', id, 'family']}
            choices={[
              { value: 4, label: 'IPv4' },
              { value: 6, label: 'IPv6' },
            ]}
            emptyWord="whichever both ends have"
          />
        </CellGrid>
        {tunnel.association === undefined &&
          ends.map((end) => (
            <ViaList
              key={end}
              path={['tunnels', id, end, 'via']}
              device={devices[end]}
              place={heads[end].place}
            />
          ))}
        <ElementList
          of={ends.flatMap((end) => [
            { collection: 'endpoints' as const, id: tunnel[end].endpoint },
            ...forwardersAt(network, id, end).map((forwarder) => ({
              collection: 'forwarders' as const,
              id: forwarder,
            })),
          ])}
          empty="Nothing is joined to it."
        />
      </Section>
      <Section title="Notes" open={tunnel.notes !== undefined}>
        <CellGrid>
          <LongTextField label="Notes" path={['tunnels', id, 'notes']} />
        </CellGrid>
      </Section>
    </>
  );
}

/** What each end writes as the outer UDP checksum, and whether it takes packets without one. */
function ChecksumRows() {
  return (
    <>
      <MirrorRow field={['udpChecksum']} agree="free">
        {({ end: _end, ...cell }) => <SelectField label="UDP checksum" {...cell} choices={udpChecksum} />}
      </MirrorRow>
      <MirrorRow field={['takesZeroChecksum']} agree="free">
        {({ end: _end, ...cell }) => (
          <YesNoField label="Zero checksum" {...cell} words={['taken', 'refused']} />
        )}
      </MirrorRow>
    </>
  );
}

function ProtectedBy({ id }: { readonly id: string }) {
  const document = useOpenState((state) => state.document);
  const editable = useEditable();
  const commit = useCommit();
  const tunnel = document.tunnels[id]!;
  const { association } = tunnel;
  if (!editable)
    return (
      <ReadCell label="Protected by">
        {association === undefined ? (
          <Unknown word="nothing: bare" />
        ) : (
          <ElementLink to={{ collection: 'associations', id: association }} />
        )}
      </ReadCell>
    );
  const offered = new Set(associationsBetween(document, tunnel.a.endpoint, tunnel.b.endpoint));
  if (association !== undefined) offered.add(association);
  return (
    <SelectField
      label="Protected by"
      path={['tunnels', id, 'association']}
      emptyWord="nothing: bare"
      choices={[...offered].map((each) => ({
        value: each,
        label: nameOf(document, { collection: 'associations', id: each }),
      }))}
      onChoose={(chosen) =>
        commit(
          `Protection of ${tunnel.name}`,
          // Inside IPsec the association says the way; a bare tunnel says its own.
          joinPatches(document, [
            patchAt(['tunnels', id, 'association'], chosen),
            ...(chosen === undefined ? [] : ends.map((end) => patchAt(['tunnels', id, end, 'via'], null))),
          ]),
        )
      }
    />
  );
}

function AddressRows({ id }: { readonly id: string }) {
  const network = useNetwork();
  const { openFindings } = useChecks();
  const cellAt = useEndCell(['endpoint']);
  const address = (end: End, far: boolean) => {
    const { place, alignRight, path } = cellAt(end);
    const text = far ? farAddress(network, id, end) : endAddress(network, id, end);
    return (
      <ReadCell
        label={far ? 'Far end' : 'This end'}
        {...{ place, alignRight }}
        marked={far ? undefined : markAt(openFindings, path)}
      >
        {text === undefined ? <Unknown word="no address" /> : <span className="break-all">{text}</span>}
      </ReadCell>
    );
  };
  return (
    <>
      {address('a', false)}
      <CrossingRail />
      {address('b', false)}
      {address('a', true)}
      {address('b', true)}
    </>
  );
}

/** The forwarder that each end's frames come from, with the VLANs that it takes. */
function ForwarderRow({ id }: { readonly id: string }) {
  const network = useNetwork();
  const document = useOpenState((state) => state.document);
  const editable = useEditable();
  const commit = useCommit();
  const cellAt = useEndCell([]);
  const vlans = (end: End): string =>
    forwardersAt(network, id, end)
      .map((forwarder) => vlansOf(network, forwarder))
      .join(', ');
  const words = (forwarder: string): string =>
    [network.design.forwarders[forwarder]!.name, vlansOf(network, forwarder)]
      .filter((part) => part !== '')
      .join(', ');
  const cell = (end: End) => {
    const { place, alignRight } = cellAt(end);
    const own = forwardersAt(network, id, end);
    const tunnel = network.design.tunnels[id]!;
    const label = 'Bridge, VLAN';
    if (!editable || own.length > 1)
      return (
        <ReadCell {...{ label, place, alignRight }}>
          {own.length === 0 ? (
            <Unknown word="in none" />
          ) : (
            own.map((forwarder) => (
              <div key={forwarder}>
                <ElementLink to={{ collection: 'forwarders', id: forwarder }}>{words(forwarder)}</ElementLink>
              </div>
            ))
          )}
        </ReadCell>
      );
    const offered = network.forwardersByDevice.get(deviceOfTunnelEnd(network, tunnel, end)) ?? [];
    const move = (forwarder: string | undefined): void => {
      commit(
        `Bridge of ${tunnel.name} at ${place}`,
        moveIntoForwarder(network, document, id, end, forwarder),
      );
    };
    return (
      <SelectCell
        {...{ label, place, alignRight }}
        value={own[0] ?? ''}
        placeholder="in none"
        options={offered.map((forwarder) => ({ value: forwarder, label: words(forwarder) }))}
        onChange={move}
        onClear={() => move(undefined)}
      />
    );
  };
  const [a, b] = [vlans('a'), vlans('b')];
  return (
    <>
      {cell('a')}
      <Rail agreement={a === '' || b === '' ? 'unknown' : a === b ? 'same' : 'differ'} />
      {cell('b')}
    </>
  );
}

/** Which endpoints a tunnel joins. */
function Ends({ id, devices }: { readonly id: string; readonly devices: { readonly [E in End]: string } }) {
  const document = useOpenState((state) => state.document);
  const tunnel = useAt<{ readonly name: string }>(['tunnels', id]);
  const heads = endHeads(document, devices.a, devices.b);
  if (tunnel === undefined) return null;
  return (
    <CellGrid>
      {ends.map((end) => (
        <SelectField
          key={end}
          label={`Endpoint at ${heads[end].place}`}
          path={['tunnels', id, end, 'endpoint']}
          required
          choices={Object.entries(document.endpoints)
            .filter(([, endpoint]) => endpoint.device !== devices[end === 'a' ? 'b' : 'a'])
            .map(([endpoint, { name, device }]) => ({
              value: endpoint,
              label: `${name} on ${document.devices[device]?.name ?? device}`,
            }))}
        />
      ))}
    </CellGrid>
  );
}

/** What fits and what is added, computed from the design; nothing where something it rests on isn't known. */
function Sizes({ id }: { readonly id: string }) {
  const network = useNetwork();
  const capacity = capacityOf(network, id);
  const path = tunnelPath(network, id);
  const transport = path.ok ? network.design.transports[path.transport] : undefined;
  const layers =
    capacity === undefined || capacity.largestBytes === 0
      ? undefined
      : stackLayers({
          innerPacketBytes: capacity.largestBytes,
          innerIpVersion: 'ipv4',
          stack: capacity.stack,
        });
  const settings =
    capacity === undefined || capacity.largestBytes === 0
      ? undefined
      : hostSettings(capacity.largestBytes, capacity.stack);
  const added = layers?.ok ? layers.totals.outerIpPacketBytes - layers.totals.innerPacketBytes : undefined;
  return (
    <section aria-label="Computed">
      <CellGrid columns={3}>
        <ReadCell label="Largest IP">
          {capacity === undefined ? <Unknown word="unknown" /> : `${capacity.largestBytes} B`}
        </ReadCell>
        <ReadCell label="Added">{added === undefined ? <Unknown word="unknown" /> : `${added} B`}</ReadCell>
        <ReadCell label="TCP MSS">
          {settings?.ok ? `${settings.tcpMssBytes.ipv4} B` : <Unknown word="unknown" />}
        </ReadCell>
        <ReadCell label="Over" span={2}>
          {path.ok ? (
            <ElementLink to={{ collection: 'transports', id: path.transport }} />
          ) : (
            <Unknown word="no common way" />
          )}
        </ReadCell>
        <ReadCell label="One way">
          {transport?.latencyUs === undefined ? (
            <Unknown word="unknown" />
          ) : (
            `${formatMilliseconds(transport.latencyUs)} ms`
          )}
        </ReadCell>
      </CellGrid>
    </section>
  );
}
