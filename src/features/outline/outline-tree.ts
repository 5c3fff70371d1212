import { elementKey } from '../../drawing/decorations.ts';
import type { Collection, Design, ElementRef } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { portKey, type Network } from '../../engine/network/network.ts';
import type { Finding } from '../../engine/rules/finding.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import {
  associationFacts,
  circuitFacts,
  demandFacts,
  deviceFacts,
  endpointFacts,
  forwarderFacts,
  landingFacts,
  memberFacts,
  noteFacts,
  portFacts,
  segmentFacts,
  segmentSiteFacts,
  siteFacts,
  transportFacts,
  tunnelFacts,
} from './element-facts.ts';
import { countsOf, findingsByElement, findingsOf, joinSets, type FindingSet } from './finding-tally.ts';
import type { OutlineGroup, OutlineRow } from './outline-row.ts';

/** Stands between the steps of a row's way from the root; no id holds it. */
export const keyStep = '>';

interface Made {
  readonly row: OutlineRow;
  readonly findings: FindingSet;
}
type ElementPlan = Pick<RowPlan, 'facts' | 'isOwn' | 'children'> & Partial<Pick<RowPlan, 'kind' | 'name'>>;
const nothing: readonly Made[] = [];
const noRows: readonly OutlineRow[] = [];
type RowPlan = Pick<OutlineRow, 'kind' | 'name' | 'facts'> &
  Partial<Pick<OutlineRow, 'ref' | 'group' | 'member' | 'isOwn' | 'detach'>> & {
    /** Its own step; an element's key where absent. */
    readonly step?: string;
    readonly children?: (key: string) => readonly Made[];
  };

// Made once: a collator of its own for every comparison takes most of the time of a large design.
const { compare } = new Intl.Collator('en', { numeric: true });
const byName = (a: readonly [string, { readonly name: string }], b: typeof a): number =>
  compare(a[1].name, b[1].name) || (a[0] < b[0] ? -1 : 1);
const named = <E extends { readonly name: string }>(entries: {
  readonly [id: string]: E;
}): readonly (readonly [string, E])[] => Object.entries(entries).sort(byName);

/** The whole design as nested rows, each with its facts and its findings: what the sheet shows, to be read. */
export const outlineTree = (design: Design, findings: readonly Finding[]): readonly OutlineRow[] => {
  const network = indexNetwork(design);
  const byElement = findingsByElement(findings);
  const make = (under: string, plan: RowPlan): Made => {
    const { ref, group, member, detach, kind, name, facts, children, isOwn = false } = plan;
    const step = plan.step ?? elementKey(ref!);
    const key = under === '' ? step : `${under}${keyStep}${step}`;
    const below = children?.(key) ?? nothing;
    const own = findingsOf(byElement, ref);
    const set = below.length === 0 ? own : joinSets([own, ...below.map((made) => made.findings)]);
    const counts = countsOf(findings, set);
    const rows = below.length === 0 ? noRows : below.map(({ row }) => row);
    // All of one shape: there may be twenty thousand.
    return {
      row: { key, ref, group, member, isOwn, detach, kind, name, facts, counts, children: rows },
      findings: set,
    };
  };
  const element = (under: string, ref: ElementRef, plan: ElementPlan): Made => {
    const { kind, name, facts, isOwn, children } = plan;
    return make(under, {
      ref,
      kind: kind ?? kindOf(design, ref),
      name: name ?? nameOf(design, ref),
      facts,
      isOwn,
      children,
    });
  };
  return outlineRows(design, network, make, element);
};

type Make = (under: string, plan: RowPlan) => Made;
type MakeElement = (under: string, ref: ElementRef, plan: ElementPlan) => Made;

const outlineRows = (
  design: Design,
  network: Network,
  make: Make,
  element: MakeElement,
): readonly OutlineRow[] => {
  const sites = named(design.sites);
  const link = (under: string, id: string, isOwn: boolean): Made => {
    const entry = design.links[id]!;
    const facts = entry.kind === 'landing' ? landingFacts(entry) : [];
    return element(under, { collection: 'links', id }, { facts, isOwn });
  };

  const port = (under: string, device: string, id: string, member: Member | undefined): Made => {
    const facts = design.devices[device]!.ports[id]!;
    const key = portKey(device, id);
    const plugged = [
      ...(network.cablesByPort.get(key) ?? [])
        .filter((at) => member === undefined || at.member === member)
        .map((at) => ({ id: at.cable, isOwn: at.end === 'a' })),
      ...(network.landingsByPort.get(key) ?? [])
        .filter((landing) => {
          const entry = design.links[landing];
          const members = entry?.kind === 'landing' ? (entry.members ?? 'both') : 'both';
          return member === undefined || members === 'both' || Number(members) === member;
        })
        .map((landing) => ({ id: landing, isOwn: false })),
    ];
    const ref = {
      collection: 'devices',
      id: device,
      port: id,
      ...(member === undefined ? {} : { member }),
    } as const;
    return element(under, ref, {
      name: facts.name ?? `Port ${facts.number}`,
      facts: portFacts(network, design, device, id, member),
      isOwn: true,
      children: (at) => plugged.map((one) => link(at, one.id, one.isOwn)),
    });
  };
  const ports = (under: string, device: string, member: Member | undefined): readonly Made[] =>
    Object.entries(design.devices[device]!.ports)
      .sort(([, a], [, b]) => a.number - b.number)
      .map(([id]) => port(under, device, id, member));

  const tunnel = (under: string, id: string, isOwn: boolean): Made =>
    element(under, { collection: 'tunnels', id }, { facts: tunnelFacts(network, design, id), isOwn });

  const endpoint = (under: string, id: string): Made =>
    element(
      under,
      { collection: 'endpoints', id },
      {
        facts: endpointFacts(design, id),
        isOwn: true,
        children: (at) =>
          (network.tunnelsByEndpoint.get(id) ?? []).map((one) => tunnel(at, one.tunnel, false)),
      },
    );

  const forwarder = (under: string, id: string): Made =>
    element(
      under,
      { collection: 'forwarders', id },
      {
        facts: forwarderFacts(network, id),
        isOwn: true,
        children: (at) =>
          (network.circuitsByForwarder.get(id) ?? []).map(({ id: circuitId, circuit, device }) => {
            const ref: ElementRef =
              circuit.kind === 'tunnel'
                ? { collection: 'tunnels', id: circuit.tunnel }
                : { collection: 'devices', id: device, port: circuit.port };
            const name =
              circuit.kind === 'tunnel' ? `Tunnel ${nameOf(design, ref)}` : `Port ${nameOf(design, ref)}`;
            return make(at, {
              step: `circuits/${circuitId}`,
              ref,
              kind: 'Circuit',
              name,
              facts: circuitFacts(circuit),
              detach: {
                words: `Take ${nameOf(design, ref)} out of ${design.forwarders[id]!.name}`,
                doneWords: `Took ${nameOf(design, ref)} out of ${design.forwarders[id]!.name}`,
                path: ['forwarders', id, 'circuits', circuitId],
              },
            });
          }),
      },
    );

  const device = (under: string, id: string): Made => {
    const entry = design.devices[id]!;
    return element(
      under,
      { collection: 'devices', id },
      {
        facts: deviceFacts(design, id),
        isOwn: true,
        children: (at) => [
          ...(entry.kind === 'ha-pair'
            ? ([1, 2] as const).map((member) =>
                make(at, {
                  ref: { collection: 'devices', id, member },
                  kind: 'Member',
                  name: entry.memberNames[member],
                  member,
                  isOwn: true,
                  facts: memberFacts(entry, member),
                  children: (inside) => ports(inside, id, member),
                }),
              )
            : ports(at, id, undefined)),
          ...(network.forwardersByDevice.get(id) ?? []).map((one) => forwarder(at, one)),
          ...(network.endpointsByDevice.get(id) ?? []).map((one) => endpoint(at, one)),
        ],
      },
    );
  };

  const site = (under: string, id: string): Made =>
    element(
      under,
      { collection: 'sites', id },
      {
        facts: siteFacts(network, design, id),
        isOwn: true,
        children: (at) =>
          (network.devicesBySite.get(id) ?? [])
            .map((one) => [one, design.devices[one]!] as const)
            .sort(byName)
            .map(([one]) => device(at, one)),
      },
    );

  const segment = (under: string, id: string): Made => {
    const entry = design.segments[id]!;
    const hosts = network.hostsBySegment.get(id) ?? [];
    return element(
      under,
      { collection: 'segments', id },
      {
        kind: `Segment ${entry.letter}`,
        facts: segmentFacts(entry),
        isOwn: true,
        children: (at) => [
          ...sites
            .filter(([one]) => entry.sites[one] !== undefined)
            .map(([one, { name }]) =>
              make(at, {
                ref: { collection: 'sites', id: one },
                kind: 'At site',
                name,
                facts: segmentSiteFacts(entry.sites[one]!),
                detach: {
                  words: `Take ${entry.name} off ${name}`,
                  doneWords: `Took ${entry.name} off ${name}`,
                  path: ['segments', id, 'sites', one],
                },
                children: (inside) =>
                  hosts
                    .filter((host) => design.devices[host]!.site === one)
                    .map((host) =>
                      element(
                        inside,
                        { collection: 'devices', id: host },
                        { facts: deviceFacts(design, host) },
                      ),
                    ),
              }),
            ),
          ...Object.keys(design.demands)
            .filter((one) => design.demands[one]!.segment === id)
            .sort()
            .map((one) =>
              element(
                at,
                { collection: 'demands', id: one },
                { facts: demandFacts(design, one), isOwn: true },
              ),
            ),
        ],
      },
    );
  };

  const group = (
    id: OutlineGroup,
    name: string,
    ids: readonly string[],
    child: (under: string, id: string) => Made,
  ): OutlineRow =>
    make('', {
      step: id,
      group: id,
      kind: 'Group',
      name,
      facts: [ids.length === 0 ? 'none yet' : String(ids.length)],
      children: (at) => ids.map((one) => child(at, one)),
    }).row;
  const idsOf = (collection: Extract<Collection, 'sites' | 'transports' | 'associations' | 'tunnels'>) =>
    named(design[collection]).map(([id]) => id);
  const bare = idsOf('tunnels').filter((id) => design.tunnels[id]!.association === undefined);
  const letters = Object.entries(design.segments)
    .sort(([, a], [, b]) => a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : 1))
    .map(([id]) => id);

  return [
    group('sites', 'Sites', idsOf('sites'), site),
    group('transports', 'Transports', idsOf('transports'), (under, id) =>
      element(
        under,
        { collection: 'transports', id },
        {
          facts: transportFacts(design, id),
          isOwn: true,
          children: (at) => (network.landingsByTransport.get(id) ?? []).map((one) => link(at, one, true)),
        },
      ),
    ),
    group('associations', 'IPsec associations', idsOf('associations'), (under, id) =>
      element(
        under,
        { collection: 'associations', id },
        {
          facts: associationFacts(network, design, id),
          isOwn: true,
          children: (at) => (network.tunnelsByAssociation.get(id) ?? []).map((one) => tunnel(at, one, true)),
        },
      ),
    ),
    ...(bare.length === 0
      ? []
      : [group('bare-tunnels', 'Bare tunnels', bare, (under, id) => tunnel(under, id, true))]),
    group('segments', 'Segments', letters, segment),
    group('notes', 'Notes', Object.keys(design.notes).sort(), (under, id) =>
      element(under, { collection: 'notes', id }, { facts: noteFacts(design, id), isOwn: true }),
    ),
  ];
};
