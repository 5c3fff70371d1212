import { useState } from 'react';
import { Button } from '../components/button.tsx';
import { CellGrid, FieldError } from '../components/cell.tsx';
import { Dialog } from '../components/dialog.tsx';
import { NumberCell, SelectCell } from '../components/field-cells.tsx';
import type { Design } from '../engine/model/design.ts';
import { isGateway } from '../engine/model/devices.ts';
import { associationPath } from '../engine/network/association-path.ts';
import { indexNetwork } from '../engine/network/index-network.ts';
import { useNumbering } from '../workspace/checks-context.tsx';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { linksIn } from '../workspace/operations/connect-ports.ts';
import { freeVni } from '../workspace/operations/free-names.ts';
import {
  associateGateways,
  associationsBetween,
  joinEndpoints,
  likelyTransport,
  mayGoBare,
  sharedTransports,
  whyNoTunnel,
} from '../workspace/operations/join-endpoints.ts';
import type { Operation } from '../workspace/operations/operation.ts';
import { connectEnds, type ConnectEnd } from './connect-ends.ts';
import { askToJoin, useDesk, type JoinRequest } from './desk-state.ts';

const titles = {
  cable: 'Pull a cable',
  landing: 'Land a WAN port',
  tunnel: 'Pull a tunnel',
  association: 'Make an IPsec association',
} as const;

/** Asks what a connection needs: its ends where they were not pointed at, and for a tunnel its VNI and association. */
export function JoinDialog() {
  const request = useDesk((state) => state.join);
  if (request === undefined) return null;
  return <OpenJoinDialog key={JSON.stringify(request)} request={request} />;
}

interface Choice {
  readonly value: string;
  readonly label: string;
}

const sortedByLabel = (choices: Choice[]): Choice[] =>
  choices.sort((a, b) => a.label.localeCompare(b.label, 'en', { numeric: true }));

const memberNameOf = (design: Design, device: string, member: 1 | 2 | undefined): string => {
  const entry = design.devices[device]!;
  return entry.kind === 'ha-pair' && member !== undefined ? entry.memberNames[member] : entry.name;
};

/** Every port that is free for a cable or a landing, as `device/port@member`. */
const freePorts = (design: Design, role: 'wan' | 'lan'): Choice[] =>
  sortedByLabel(
    Object.entries(design.devices).flatMap(([id, device]) =>
      (device.kind === 'ha-pair' && role === 'lan' ? ([1, 2] as const) : [undefined]).flatMap((member) =>
        Object.entries(device.ports)
          .filter(([port, facts]) => facts.role === role && linksIn(design, id, port, member).length === 0)
          .map(([port, facts]) => ({
            value: `${id}/${port}${member === undefined ? '' : `@${member}`}`,
            label: `${memberNameOf(design, id, member)}, port ${facts.name ?? facts.number}`,
          })),
      ),
    ),
  );

const choicesFor = (design: Design, kind: JoinRequest['kind'], side: 'a' | 'b'): Choice[] => {
  if (kind === 'cable') return freePorts(design, 'lan');
  if (kind === 'landing')
    return side === 'a'
      ? freePorts(design, 'wan')
      : sortedByLabel(
          Object.entries(design.transports).map(([id, transport]) => ({ value: id, label: transport.name })),
        );
  if (kind === 'tunnel')
    return sortedByLabel(
      Object.entries(design.endpoints).map(([id, endpoint]) => ({
        value: id,
        label: `${endpoint.name} on ${design.devices[endpoint.device]!.name}, ${endpoint.ipv4 ?? endpoint.ipv6 ?? 'no address yet'}`,
      })),
    );
  return sortedByLabel(
    Object.entries(design.devices)
      .filter(([, device]) => isGateway(device))
      .map(([id, device]) => ({ value: id, label: device.name })),
  );
};

const valueOf = (end: ConnectEnd | undefined): string => {
  if (end === undefined) return '';
  if (end.kind !== 'device' || end.port === undefined) return end.id;
  return `${end.id}/${end.port}${end.member === undefined ? '' : `@${end.member}`}`;
};

const endFrom = (kind: JoinRequest['kind'], side: 'a' | 'b', value: string): ConnectEnd => {
  if (kind === 'tunnel') return { kind: 'endpoint', id: value };
  if (kind === 'landing' && side === 'b') return { kind: 'transport', id: value };
  const [id, rest] = value.split('/') as [string, string | undefined];
  const [port, member] = rest?.split('@') ?? [];
  return {
    kind: 'device',
    id,
    ...(port === undefined ? {} : { port }),
    ...(member === undefined ? {} : { member: Number(member) as 1 | 2 }),
  };
};

const runsOver = (design: Design, association: string, transport: string): boolean => {
  const path = associationPath(indexNetwork(design), association);
  return path.ok && path.transport === transport;
};

function OpenJoinDialog({ request }: { readonly request: JoinRequest }) {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const design = useOpenState((state) => state.document);
  const { kind } = request;
  const [a, setA] = useState(valueOf(request.a));
  const [b, setB] = useState(valueOf(request.b));
  const [vni, setVni] = useState<number | undefined>(() => freeVni(design, numbering));
  const [segment, setSegment] = useState<string>(
    Object.entries(design.segments).length === 1 ? Object.keys(design.segments)[0]! : '',
  );
  const [chosen, setChosen] = useState<string>('');
  const [chosenTransport, setChosenTransport] = useState<string>('');
  const [problem, setProblem] = useState<string>();

  const both = a !== '' && b !== '';
  const existing = kind === 'tunnel' && both ? associationsBetween(design, a, b) : [];
  const joinable = kind === 'tunnel' && both && whyNoTunnel(design, a, b) === undefined;
  const shared = joinable
    ? sharedTransports(design, design.endpoints[a]!.device, design.endpoints[b]!.device)
    : [];
  const transport = shared.includes(chosenTransport)
    ? chosenTransport
    : joinable
      ? likelyTransport(design, a, b)
      : undefined;
  const bare = mayGoBare(design, transport);
  const fitting = existing.find((id) => transport === undefined || runsOver(design, id, transport));
  const offered = fitting ?? (bare ? 'none' : 'new');
  const association = chosen === '' ? offered : chosen;

  const operation = (): Operation => {
    if (!both) return { ok: false, why: 'Choose both ends.' };
    if (kind === 'tunnel') {
      if (vni === undefined)
        return { ok: false, why: 'VNI is empty. Type a whole number from 0 to 16777215.' };
      return joinEndpoints(
        design,
        {
          a,
          b,
          vni,
          association,
          ...(transport === undefined ? {} : { transport }),
          ...(segment === '' ? {} : { segment }),
        },
        newEntryId,
        numbering,
      );
    }
    if (kind === 'association') return associateGateways(design, a, b, newEntryId);
    const result = connectEnds(design, endFrom(kind, 'a', a), endFrom(kind, 'b', b), newEntryId);
    return 'ask' in result ? { ok: false, why: 'Pull a cord between rings, a cable between ports.' } : result;
  };
  const submit = (): void => {
    const done = perform(open, operation());
    if (done.ok) askToJoin(undefined);
    else setProblem(done.why);
  };
  const endLabels = kind === 'landing' ? (['WAN port', 'Transport'] as const) : (['From', 'To'] as const);
  const optionsOf = (side: 'a' | 'b', value: string): Choice[] => {
    const choices = choicesFor(design, kind, side);
    if (value === '' || choices.some((choice) => choice.value === value)) return choices;
    const end = endFrom(kind, side, value);
    const name = end.kind === 'device' ? (design.devices[end.id]?.name ?? end.id) : end.id;
    return [{ value, label: `${name}, first free port` }, ...choices];
  };
  return (
    <Dialog
      open
      onOpenChange={(isOpen) => {
        if (!isOpen) askToJoin(undefined);
      }}
      title={titles[kind]}
      widthPx={620}
      onSubmit={submit}
      footer={
        <>
          <Button onClick={() => askToJoin(undefined)}>Cancel</Button>
          <Button kind="primary" type="submit">
            {kind === 'tunnel'
              ? 'Pull the tunnel'
              : kind === 'association'
                ? 'Make it'
                : kind === 'landing'
                  ? 'Land it'
                  : 'Pull the cable'}
          </Button>
        </>
      }
    >
      <CellGrid columns={2}>
        <SelectCell
          label={endLabels[0]}
          value={a}
          options={optionsOf('a', a)}
          onChange={setA}
          placeholder="Choose…"
        />
        <SelectCell
          label={endLabels[1]}
          value={b}
          options={optionsOf('b', b)}
          onChange={setB}
          placeholder="Choose…"
        />
        {kind === 'tunnel' && (
          <>
            <NumberCell
              label="VNI, lowest free offered"
              value={vni}
              onCommit={setVni}
              min={0}
              max={16_777_215}
              required
            />
            <SelectCell
              label="Carries"
              value={segment}
              options={Object.entries(design.segments).map(([id, entry]) => ({
                value: id,
                label: `${entry.letter}  ${entry.name}`,
              }))}
              onChange={setSegment}
              onClear={() => setSegment('')}
              placeholder="Nothing yet"
            />
            <SelectCell
              label="Over"
              value={transport ?? ''}
              options={shared.map((id) => ({ value: id, label: design.transports[id]!.name }))}
              onChange={setChosenTransport}
              placeholder="No transport in common yet"
            />
            <SelectCell
              label="Protected by"
              value={association}
              options={[
                ...existing.map((id) => ({ value: id, label: design.associations[id]!.name })),
                { value: 'new', label: 'A new IPsec association' },
                {
                  value: 'none',
                  label: bare
                    ? 'Nothing: the transport is trusted'
                    : 'Nothing: anyone on the transport can read and inject frames',
                },
              ]}
              onChange={setChosen}
            />
          </>
        )}
      </CellGrid>
      {problem !== undefined && <FieldError>{problem}</FieldError>}
    </Dialog>
  );
}
