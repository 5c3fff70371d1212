import type { Design } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { freeTunnelName, freeVnis } from '../numbering/free-numbers.ts';
import { segmentsByForwarder } from '../rules/carried-segments.ts';
import type { Answer, Problem } from '../wire/problem.ts';
import { refuse } from '../wire/problem.ts';
import type { Draft } from './draft.ts';
import {
  codeOf,
  endpointFor,
  habitsOf,
  landingsOf,
  openTrunk,
  portOf,
  sharedBy,
  switchBehind,
  uplinkOf,
} from './existing-parts.ts';
import type { OverlayEnd } from './overlay-parts.ts';
import { addAssociation, addForwarder, addTunnel, isolationOf, joinTunnel } from './overlay-parts.ts';
import type { SegmentShape } from './segment-shape.ts';
import { segmentShape } from './segment-shape.ts';
import { addUplink } from './site-parts.ts';
import type { StretchContext } from './stretch.ts';

interface At {
  readonly draft: Draft;
  readonly network: Network;
  readonly segment: Id;
  readonly gateway: Id;
  readonly vlan: number;
  readonly lanMtuBytes: number;
  readonly isFiltered: boolean;
}

/** A forwarder of the gateway that may take one more tunnel of the segment; made, with its uplink, where there is none. */
const forwarderFor = (at: At): Answer<{ readonly forwarder: Id }> => {
  const { draft, network, segment, gateway, vlan, lanMtuBytes, isFiltered } = at;
  const code = codeOf(draft, gateway);
  const { letter } = draft.entries('segments')[segment]!;
  const own = (network.forwardersByDevice.get(gateway) ?? []).filter(
    (id) =>
      segmentsByForwarder(network).get(id)?.includes(segment) === true || passesOn(network, id, segment),
  );
  const tunnelCount = (id: Id): number =>
    Object.values(draft.entries('forwarders')[id]!.circuits).filter(({ kind }) => kind === 'tunnel').length;
  const open = own.find((id) => draft.entries('forwarders')[id]!.kind === 'bridge' || tunnelCount(id) === 0);
  if (open !== undefined) return { ok: true, forwarder: open };
  const name = draft.entries('devices')[gateway]!.name;
  // A cross-connect has its one tunnel already: the next one needs a port of its own to the same switch.
  const taken = own[0] === undefined ? undefined : portOf(draft.entries('forwarders')[own[0]]!);
  let port = uplinkOf(draft, gateway);
  if (taken !== undefined) {
    const access = switchBehind(draft, gateway, taken);
    if (access === undefined)
      return refuse([
        problem('from', name, 'another site: its cross-connect is full, and its port leads to no switch'),
      ]);
    port = addUplink(draft, { gateway, access, code }, [vlan], lanMtuBytes);
  }
  if (port === undefined)
    return refuse([problem('site', name, 'a LAN trunk port on this gateway: add one first')]);
  openTrunk(draft, gateway, port, vlan);
  return {
    ok: true,
    forwarder: addForwarder(draft, {
      gateway,
      code,
      letter,
      kind: isFiltered ? 'cross-connect' : 'bridge',
      access: { port, vlan },
    }),
  };
};

/** Whether a forwarder without a port in the segment carries it from tunnel to tunnel. */
const passesOn = (network: Network, forwarder: Id, segment: Id): boolean => {
  const shape = segmentShape(network.design as Design, segment);
  return (network.circuitsByForwarder.get(forwarder) ?? []).some(
    ({ circuit }) => circuit.kind === 'tunnel' && shape.tunnels.includes(circuit.tunnel),
  );
};

export interface Target {
  readonly site: Id;
  readonly gateway: Id;
}

const trusts = (draft: Draft, transport: Id): boolean =>
  draft.entries('transports')[transport]!.trusted === true;

/** One tunnel of the segment between a site that has it and the new one. */
export const joinSites = (
  draft: Draft,
  segment: Id,
  ends: { readonly partner: Target; readonly target: Target },
  plan: {
    readonly shape: SegmentShape;
    readonly inUse: readonly Id[];
    readonly vlans: ReadonlyMap<Id, number>;
    readonly lanMtuBytes: number;
  },
  context: StretchContext,
): readonly Problem[] => {
  const { partner, target } = ends;
  const shared = sharedBy(draft, partner.gateway, target.gateway, plan.inUse);
  const siteName = (site: Id): string => draft.entries('sites')[site]!.name;
  if (shared.length === 0)
    return [
      problem(
        'site',
        siteName(target.site),
        `a site that lands on a transport of ${siteName(partner.site)}: land it there first`,
      ),
    ];
  const design = context.design;
  const isBareSoFar =
    plan.shape.tunnels.length === 0 ||
    plan.shape.tunnels.every((id) => design.tunnels[id]!.association === undefined);
  const known = Object.entries(draft.entries('associations')).find(([, { a, b }]) => {
    const devices = [a.device, b.device];
    return devices.includes(partner.gateway) && devices.includes(target.gateway);
  })?.[0];
  const isBare = known === undefined && isBareSoFar && trusts(draft, shared[0]!);
  // Bare tunnels keep to what is trusted.
  const over = isBare ? shared.filter((transport) => trusts(draft, transport)) : shared;
  const families = plan.shape.tunnels.map((id) => design.tunnels[id]!.family);
  const family = families.includes(6) ? 6 : 4;
  const endOf = (gateway: Id, peer: Id): Answer<OverlayEnd> => {
    const found = endpointFor(
      draft,
      gateway,
      known === undefined && peer === target.gateway ? undefined : peer,
      family,
      context,
    );
    if (!found.ok) return found;
    const landings = landingsOf(draft, gateway);
    const via = over.map((transport) => landings.find(([, on]) => on === transport)![0]);
    return { ok: true, gateway, code: codeOf(draft, gateway), endpoint: found.endpoint, via };
  };
  const a = endOf(partner.gateway, target.gateway);
  const b = endOf(target.gateway, partner.gateway);
  if (!a.ok) return a.problems;
  if (!b.ok) return b.problems;
  const vnis = freeVnis(draft.design(), 1, context.numbering);
  if (!vnis.ok) return vnis.problems;
  const association = known ?? (isBare ? undefined : addAssociation(draft, a, b, habitsOf(draft)));
  const { letter, mustBeFiltered } = draft.entries('segments')[segment]!;
  const tunnel = addTunnel(draft, a, b, {
    vni: vnis.vnis[0]!,
    name: freeTunnelName(draft.design(), `tn-${a.code}-${b.code}-${letter.toLowerCase()}`, context.numbering),
    ...(association === undefined ? {} : { association }),
  });
  const forwarders: Id[] = [];
  for (const { gateway, site } of [partner, target]) {
    const answer = forwarderFor({
      draft,
      network: indexNetwork(draft.design()),
      segment,
      gateway,
      vlan: plan.vlans.get(site)!,
      lanMtuBytes: plan.lanMtuBytes,
      isFiltered: mustBeFiltered === true,
    });
    if (!answer.ok) return answer.problems;
    forwarders.push(answer.forwarder);
  }
  const group =
    plan.shape.kind === 'mesh' ? isolationOf(draft.entries('forwarders')[forwarders[0]!]!) : undefined;
  for (const forwarder of forwarders) joinTunnel(draft, forwarder, tunnel, group);
  return [];
};

export const problem = (field: string, value: unknown, expected: string): Problem => ({
  field,
  value,
  expected,
});
