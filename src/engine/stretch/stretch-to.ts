import type { Design } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder } from '../model/rank.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import { freeVlans } from '../numbering/free-numbers.ts';
import { vlansAt } from '../numbering/numbers-of.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { segmentsByForwarder } from '../rules/carried-segments.ts';
import { protocolFrames } from '../rules/protocol-frames.ts';
import { runRules } from '../rules/run-rules.ts';
import type { Answer, Problem } from '../wire/problem.ts';
import { refuse } from '../wire/problem.ts';
import { crossConnectPolicy } from './cross-connect-policy.ts';
import type { Draft } from './draft.ts';
import { draftOf } from './draft.ts';
import { codeOf, gatewayAt, portOf, switchBehind } from './existing-parts.ts';
import { hostAddress } from './host-addresses.ts';
import type { Target } from './join-site.ts';
import { joinSites, problem } from './join-site.ts';
import { narrowestOf } from './segment-sizes.ts';
import type { SegmentShape } from './segment-shape.ts';
import { segmentShape } from './segment-shape.ts';
import { siteCodes, slugOf } from './site-codes.ts';
import { addAccessPort, addHost, addSite } from './site-parts.ts';
import type { StretchContext } from './stretch.ts';
import type { SitePlan } from './stretch-form.ts';
import { problemsOfIssues, sitePlanSchema } from './stretch-form.ts';
import { neighbourProtocolsOf } from './topology.ts';

export interface StretchToRequest {
  readonly segment: Id;
  /** A site of the design, or a new one whose landings name transports of the design. */
  readonly site: Id | SitePlan;
  /** Where it is joined, for segments whose shape leaves that open. */
  readonly from?: Id;
  readonly sampleHost?: boolean;
  /** Where larger packets don't fit through the new tunnel: lower the segment and its hosts instead of refusing. */
  readonly lowerMtu?: boolean;
}

/** Transports that the segment's tunnels run over now. */
const transportsInUse = (design: Design, shape: SegmentShape): readonly Id[] => {
  const landing = (id: Id | undefined) => (id === undefined ? undefined : design.links[id]);
  return [
    ...new Set(
      shape.tunnels.flatMap((id) => {
        const tunnel = design.tunnels[id]!;
        const via =
          tunnel.association === undefined ? tunnel.a.via : design.associations[tunnel.association]!.a.via;
        const first = landing(inRankOrder(via)[0]?.[1].landing);
        return first?.kind === 'landing' ? [first.transport] : [];
      }),
    ),
  ];
};

/** The site as it is, or made from its plan. */
const targetOf = (
  draft: Draft,
  { site }: StretchToRequest,
  vlan: number,
  lanMtuBytes: number,
  isBare: boolean,
): Answer<Target> => {
  if (typeof site === 'string') {
    const gateway = gatewayAt(draft, site);
    return gateway === undefined
      ? refuse([
          problem(
            'site',
            draft.entries('sites')[site]!.name,
            'a site with a firewall, an HA pair or a router: place one there first',
          ),
        ])
      : { ok: true, site, gateway };
  }
  const codes = siteCodes([site], new Set(Object.keys(draft.entries('sites'))));
  const parts = addSite(draft, {
    plan: site,
    code: codes[0]!,
    transports: new Map(site.landings.map(({ transport }) => [transport, transport])),
    uplinks: [[vlan]],
    lanMtuBytes,
    takesVxlan: isBare ? 'peers' : 'nobody',
  });
  return { ok: true, site: parts.site, gateway: parts.gateway };
};

/** The VLAN that the segment takes at a site: the one it has, the usual one where it is free, else another. */
const vlanAt = (
  design: Design,
  { segment, site }: StretchToRequest,
  context: StretchContext,
): Answer<{ readonly vlan: number }> => {
  const { sites } = design.segments[segment]!;
  const here = typeof site === 'string' ? sites[site]?.vlan : undefined;
  if (here !== undefined) return { ok: true, vlan: here };
  const counts = new Map<number, number>();
  for (const { vlan } of Object.values(sites))
    if (vlan !== undefined) counts.set(vlan, (counts.get(vlan) ?? 0) + 1);
  const [usual] = [...counts].sort(([a, n], [b, m]) => m - n || a - b);
  const taken = typeof site === 'string' ? vlansAt(design, site) : new Set<number>();
  if (usual !== undefined && !taken.has(usual[0])) return { ok: true, vlan: usual[0] };
  const free = freeVlans(
    design,
    1,
    { sites: typeof site === 'string' ? [site] : [], step: 10 },
    context.numbering,
  );
  return free.ok ? { ok: true, vlan: free.vlans[0]! } : free;
};

const requestProblems = (
  design: Design,
  request: StretchToRequest,
  shape: SegmentShape,
): readonly Problem[] => {
  const { segment, site, from } = request;
  const entry = design.segments[segment]!;
  if (typeof site === 'string') {
    if (!Object.hasOwn(design.sites, site)) return [problem('site', site, 'a site of this design')];
    if (shape.joined.includes(site))
      return [problem('site', design.sites[site]!.name, `a site that ${entry.name} does not reach yet`)];
    if (from === site) return [problem('from', design.sites[site]!.name, 'another site than the new one')];
  } else {
    const parsed = sitePlanSchema.safeParse(site);
    if (!parsed.success) return problemsOfIssues(parsed.error.issues, site, 'site');
    const unknown = site.landings.findIndex(({ transport }) => !Object.hasOwn(design.transports, transport));
    if (unknown >= 0)
      return [
        problem(
          `site.landings.${unknown}.transport`,
          site.landings[unknown]!.transport,
          'a transport of this design',
        ),
      ];
    if (Object.values(design.sites).some(({ name }) => name.toLowerCase() === site.name.trim().toLowerCase()))
      return [problem('site.name', site.name, 'a name that no site of the design has')];
  }
  const neighbours = neighbourProtocolsOf(entry);
  if (neighbours.length > 0 && shape.joined.length > 1)
    return [
      problem(
        'segment',
        entry.name,
        `a segment without ${neighbours.map((each) => protocolFrames[each].name).join(', ')}: bridges keep these to themselves, so that it reaches two sites and no more`,
      ),
    ];
  if (from !== undefined && !Object.hasOwn(design.sites, from))
    return [problem('from', from, 'a site of this design')];
  if (shape.kind === 'alone' && shape.choices.length === 0)
    return [problem('segment', entry.name, 'a segment that lands at some site: say where it is first')];
  if (from === undefined && shape.partners.length === 0)
    return [
      problem(
        'from',
        undefined,
        `the site to join it to: ${shape.choices.map((id) => design.sites[id]!.name).join(', ')}`,
      ),
    ];
  return [];
};

/** Policies for cross-connects that are new: those of the segment's others, else a first one. */
const addPolicies = (draft: Draft, segment: Id): void => {
  const design = draft.design();
  const network = indexNetwork(design);
  const ofSegment = Object.keys(design.forwarders).filter(
    (id) => segmentsByForwarder(network).get(id)?.includes(segment) === true,
  );
  const model = ofSegment.map((id) => design.forwarders[id]!.policy).find((policy) => policy !== undefined);
  for (const id of ofSegment) {
    const forwarder = design.forwarders[id]!;
    if (forwarder.kind === 'cross-connect' && forwarder.policy === undefined)
      draft.set('forwarders', id, { ...forwarder, policy: model ?? crossConnectPolicy(design, segment, []) });
  }
};

const addSampleHost = (
  draft: Draft,
  segment: Id,
  { site, gateway }: Target,
  vlan: number,
  mtu: number,
): void => {
  const network = indexNetwork(draft.design());
  const forwarder = (network.forwardersByDevice.get(gateway) ?? []).find(
    (id) => segmentsByForwarder(network).get(id)?.includes(segment) === true,
  );
  const port = forwarder === undefined ? undefined : portOf(draft.entries('forwarders')[forwarder]!);
  const access = port === undefined ? undefined : switchBehind(draft, gateway, port);
  if (access === undefined) return;
  const entry = draft.entries('segments')[segment]!;
  const hosts = Object.values(draft.entries('devices')).flatMap((device) =>
    device.kind === 'host' && device.segment === segment ? [device] : [],
  );
  const taken = new Set(
    hosts.flatMap(({ addresses }) => (addresses ?? []).map((text) => text.split('/')[0])),
  );
  const subnet = entry.sites[site]?.subnets?.[0];
  let address: string | undefined;
  for (let nth = 0; subnet !== undefined && nth <= taken.size; nth += 1) {
    const candidate = hostAddress(subnet, nth);
    if (candidate === undefined) break;
    if (!taken.has(candidate.split('/')[0])) {
      address = candidate;
      break;
    }
  }
  const face = hosts.find((host) => host.face !== undefined)?.face;
  addHost(draft, access, addAccessPort(draft, access, vlan, mtu), {
    site,
    segment,
    name: `${slugOf(entry.name, 10)}-${codeOf(draft, gateway)}`,
    ...(face === undefined ? {} : { face }),
    ...(address === undefined ? {} : { address }),
    ...(entry.mtu === undefined ? {} : { mtuBytes: entry.mtu }),
  });
};

/** Keeps the segment within what fits through its new tunnels, where the request allows to lower it. */
const fitSegment = (draft: Draft, { segment, lowerMtu }: StretchToRequest): readonly Problem[] => {
  const entry = draft.entries('segments')[segment]!;
  const narrowest = narrowestOf(draft.design(), segment);
  if (entry.mtu === undefined || narrowest === undefined || narrowest.largestBytes >= entry.mtu) return [];
  const { largestBytes, transport, transportMtuFor } = narrowest;
  if (lowerMtu !== true)
    return [
      problem(
        'lowerMtu',
        lowerMtu ?? false,
        `true, which lowers ${entry.name} and its hosts from ${entry.mtu} to ${largestBytes} bytes; or an MTU of ${transportMtuFor(entry.mtu)} on ${draft.entries('transports')[transport]!.name}`,
      ),
    ];
  draft.set('segments', segment, { ...entry, mtu: largestBytes });
  for (const [id, device] of Object.entries(draft.entries('devices'))) {
    if (device.kind !== 'host' || device.segment !== segment) continue;
    const ports = Object.fromEntries(
      Object.entries(device.ports).map(([port, each]) => [
        port,
        each.mtu !== undefined && each.mtu > largestBytes ? { ...each, mtu: largestBytes } : each,
      ]),
    );
    draft.set('devices', id, { ...device, ports });
  }
  const network = indexNetwork(draft.design());
  for (const [id, segments] of segmentsByForwarder(network)) {
    const forwarder = draft.entries('forwarders')[id]!;
    if (segments.includes(segment) && (forwarder.gateway?.mtu ?? 0) > largestBytes)
      draft.set('forwarders', id, { ...forwarder, gateway: { ...forwarder.gateway, mtu: largestBytes } });
  }
  return [];
};

/** Blocking findings that the design did not have before, as reasons to refuse. */
const newlyBlocking = (
  before: Design,
  after: Design,
  site: string,
  context: StretchContext,
): readonly Problem[] => {
  const blocking = (design: Design) =>
    runRules(design, context.numbering).filter(({ severity }) => severity === 'blocking');
  const known = new Set(blocking(before).map(({ key }) => key));
  return blocking(after)
    .filter(({ key }) => !known.has(key))
    .map(({ sentence }) => problem('site', site, `a change first, or another site: ${sentence}`));
};

/**
 * Stretches a segment of a design to one more site: the tunnels that its shape asks for (one to the hub, one to each of a
 * mesh, else one to `from`), with associations, loopbacks, VLANs, forwarders and a host where wanted; the site itself where
 * it is new. One patch. Refused where the shape leaves a choice, where something is missing, or where a blocking finding
 * would follow.
 */
export const stretchTo = (
  request: StretchToRequest,
  context: StretchContext,
): Answer<{ readonly patch: MergePatch; readonly site: Id }> => {
  const { design, newId } = context;
  const { segment } = request;
  if (!Object.hasOwn(design.segments, segment))
    return refuse([problem('segment', segment, 'a segment of this design')]);
  const shape = segmentShape(design, segment);
  const wrong = requestProblems(design, request, shape);
  if (wrong.length > 0) return refuse(wrong);
  const vlan = vlanAt(design, request, context);
  if (!vlan.ok) return vlan;
  const draft = draftOf(design, newId);
  const entry = design.segments[segment]!;
  const lanMtuBytes = Math.max(STANDARD_PAYLOAD_BYTES, entry.mtu ?? 0);
  const inUse = transportsInUse(design, shape);
  const isBare =
    inUse.length > 0 && shape.tunnels.every((id) => design.tunnels[id]!.association === undefined);
  const target = targetOf(draft, request, vlan.vlan, lanMtuBytes, isBare);
  if (!target.ok) return target;
  const partners = request.from !== undefined && shape.kind !== 'mesh' ? [request.from] : shape.partners;
  const model = entry.sites[partners[0]!] ?? Object.values(entry.sites)[0];
  const places = {
    ...entry.sites,
    [target.site]: {
      ...(model?.subnets === undefined ? {} : { subnets: model.subnets }),
      ...entry.sites[target.site],
      vlan: vlan.vlan,
    },
  };
  draft.set('segments', segment, { ...entry, sites: places });
  const vlans = new Map([target.site, ...partners].map((id) => [id, places[id]?.vlan ?? vlan.vlan] as const));
  for (const partnerSite of partners) {
    const gateway = gatewayAt(draft, partnerSite);
    if (gateway === undefined)
      return refuse([
        problem('from', design.sites[partnerSite]!.name, 'a site with a firewall, an HA pair or a router'),
      ]);
    const problems = joinSites(
      draft,
      segment,
      { partner: { site: partnerSite, gateway }, target },
      { shape, inUse, vlans, lanMtuBytes },
      context,
    );
    if (problems.length > 0) return refuse(problems);
  }
  addPolicies(draft, segment);
  const unfit = fitSegment(draft, request);
  if (unfit.length > 0) return refuse(unfit);
  if (request.sampleHost === true) addSampleHost(draft, segment, target, vlan.vlan, lanMtuBytes);
  const after = draft.design();
  const blocking = newlyBlocking(design, after, after.sites[target.site]!.name, context);
  if (blocking.length > 0) return refuse(blocking);
  return { ok: true, patch: draft.patch(), site: target.site };
};
