import type { Design, Entry } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import { freeLetters } from '../numbering/free-letters.ts';
import { freeLoopbacks, freeTunnelName, freeVlans, freeVnis } from '../numbering/free-numbers.ts';
import type { NumberingContext } from '../numbering/numbering-context.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import type { Answer, Problem } from '../wire/problem.ts';
import { refuse } from '../wire/problem.ts';
import { crossConnectPolicy } from './cross-connect-policy.ts';
import { hostAddress } from './host-addresses.ts';
import type { Draft, NewId } from './draft.ts';
import { draftOf } from './draft.ts';
import { meetingTransports } from './landing-problems.ts';
import type { OverlayEnd } from './overlay-parts.ts';
import { addAssociation, addForwarder, addTunnel, joinTunnel } from './overlay-parts.ts';
import { leastBytesOf, narrowestOf, usualMtuBytes } from './segment-sizes.ts';
import { siteCodes, slugOf } from './site-codes.ts';
import type { SiteParts } from './site-parts.ts';
import { addAccessPort, addHost, addSite } from './site-parts.ts';
import { addStandingNotes } from './standing-notes.ts';
import type { SegmentPlan, StretchForm } from './stretch-form.ts';
import { parseStretchForm } from './stretch-form.ts';
import type { Join } from './topology.ts';
import { isCrossConnected, isTrusted, joinedPairs, joinsOf, sharedTransports, sitesOf } from './topology.ts';

export interface StretchContext {
  /** What is there already: an empty design, or one beside which the new parts go. */
  readonly design: Design;
  readonly newId: NewId;
  readonly numbering?: NumberingContext;
}

/** Tunnels of a mesh never exchange frames: RFC 4762 section 4.4. */
const meshGroup = 'mesh';

interface Numbers {
  readonly vlans: readonly number[];
  readonly loopbacks: readonly string[];
  readonly vnis: readonly number[];
  readonly letters: readonly string[];
}

/** The form with what the design says of transports that it has already. */
const withExisting = (input: unknown, { transports }: Design): Answer<{ readonly form: StretchForm }> => {
  const read = parseStretchForm(input);
  if (!read.ok) return read;
  const unknown = read.form.transports.flatMap(({ existing }, i) =>
    existing === undefined || Object.hasOwn(transports, existing)
      ? []
      : [{ field: `transports.${i}.existing`, value: existing, expected: 'a transport of this design' }],
  );
  if (unknown.length > 0) return refuse(unknown);
  if (read.form.transports.every(({ existing }) => existing === undefined)) return read;
  return parseStretchForm({
    ...read.form,
    transports: read.form.transports.map((plan) => {
      const known = plan.existing === undefined ? undefined : transports[plan.existing];
      if (known === undefined) return plan;
      const { name, kind, trusted, mtu } = known;
      return {
        key: plan.key,
        existing: plan.existing,
        name,
        kind,
        ...(trusted === undefined ? {} : { trusted }),
        ...(mtu === undefined ? {} : { mtu }),
      };
    }),
  });
};

/** All numbers that the form leaves open, from its pools. */
const numbersFor = (form: StretchForm, { design, numbering = {} }: StretchContext): Answer<Numbers> => {
  const { loopbacks: pool, vnis: vniPool } = form.pools ?? {};
  const addresses = form.sites.flatMap(({ landings }) => landings.flatMap(({ address }) => address ?? []));
  const context: NumberingContext = {
    ...numbering,
    pools: {
      ...numbering.pools,
      ...(pool === undefined ? {} : { loopbacks: [pool] }),
      ...(vniPool === undefined ? {} : { vnis: [vniPool] }),
    },
    reserved: {
      ...numbering.reserved,
      vlans: [
        ...(numbering.reserved?.vlans ?? []),
        ...form.segments.flatMap(({ vlan }) => (vlan === undefined ? [] : [{ from: vlan, to: vlan }])),
      ],
      networks: [
        ...(numbering.reserved?.networks ?? []),
        ...form.segments.flatMap(({ subnet }) => subnet ?? []),
        ...addresses.map((address) => `${address}/${address.includes(':') ? 128 : 32}`),
      ],
    },
  };
  const open = form.segments.filter(({ vlan }) => vlan === undefined).length;
  const family = (context.pools?.loopbacks?.[0] ?? '').includes(':') ? 6 : 4;
  const tunnels = form.segments.reduce((sum, segment) => sum + joinsOf(form, segment).length, 0);
  const vlans = freeVlans(design, open, { step: 10 }, context);
  const loopbacks = freeLoopbacks(design, family, form.sites.length, context);
  const vnis = freeVnis(design, tunnels, context);
  const problems = [vlans, loopbacks, vnis].flatMap((answer) => (answer.ok ? [] : answer.problems));
  if (!vlans.ok || !loopbacks.ok || !vnis.ok) return refuse(problems);
  const free = [...vlans.vlans];
  return {
    ok: true,
    vlans: form.segments.map(({ vlan }) => vlan ?? free.shift()!),
    loopbacks: loopbacks.loopbacks,
    vnis: vnis.vnis,
    letters: freeLetters(design, form.segments.length),
  };
};

/** One tunnel to come. */
interface TunnelPlan {
  readonly segment: number;
  readonly join: Join;
}

const tunnelsOf = (form: StretchForm): readonly TunnelPlan[] =>
  form.segments.flatMap((segment, i) => joinsOf(form, segment).map((join) => ({ segment: i, join })));

/** The tunnels of a segment at a site, in order. */
const tunnelsAt = (form: StretchForm, segment: SegmentPlan, site: number): readonly Join[] =>
  joinsOf(form, segment).filter((join) => join.includes(site));

/** Whether a segment needs a second uplink at a site: one cross-connect for the tunnel either way along a chain. */
const needsSecondUplink = (form: StretchForm, segment: SegmentPlan, site: number): boolean =>
  isCrossConnected(segment) &&
  form.topology.kind === 'chain' &&
  sitesOf(form, segment).includes(site) &&
  tunnelsAt(form, segment, site).length === 2;

/** VLANs of each uplink of a site. */
const uplinksOf = (
  form: StretchForm,
  vlans: readonly number[],
  site: number,
): readonly (readonly number[])[] => {
  const here = form.segments.flatMap((segment, i) =>
    sitesOf(form, segment).includes(site) ? [{ segment, vlan: vlans[i]! }] : [],
  );
  if (here.length === 0) return [];
  const second = here.filter(({ segment }) => needsSecondUplink(form, segment, site));
  return [here.map(({ vlan }) => vlan), ...(second.length === 0 ? [] : [second.map(({ vlan }) => vlan)])];
};

interface Built {
  readonly form: StretchForm;
  readonly numbers: Numbers;
  readonly draft: Draft;
  readonly segments: readonly Id[];
  readonly sites: readonly SiteParts[];
  readonly endpoints: readonly Id[];
  readonly transports: ReadonlyMap<string, Id>;
}

const addGround = (form: StretchForm, numbers: Numbers, draft: Draft): Built => {
  const transports = new Map(
    form.transports.map((plan) => {
      const { key, existing, kind, mtu, latencyUs } = plan;
      if (existing !== undefined) return [key, existing] as const;
      const entry: Entry<'transports'> = {
        name: draft.freeName('transports', plan.name),
        kind,
        trusted: isTrusted(plan),
        ...(mtu === undefined ? {} : { mtu }),
        ...(latencyUs === undefined ? {} : { latencyUs }),
      };
      return [key, draft.add('transports', slugOf(plan.name), entry)] as const;
    }),
  );
  const codes = siteCodes(form.sites, new Set(Object.keys(draft.entries('sites'))));
  const largest = Math.max(STANDARD_PAYLOAD_BYTES, ...form.segments.map(({ mtu }) => mtu ?? 0));
  const sites = form.sites.map((plan, i) =>
    addSite(draft, {
      plan,
      code: codes[i]!,
      transports,
      uplinks: uplinksOf(form, numbers.vlans, i),
      lanMtuBytes: largest,
      takesVxlan: form.encrypted ? 'nobody' : 'peers',
    }),
  );
  const endpoints = sites.map(({ gateway, code }, i) => {
    const address = numbers.loopbacks[i]!;
    return draft.add('endpoints', `lo-${code}`, {
      device: gateway,
      name: `lo-${code}`,
      ...(address.includes(':') ? { ipv6: address } : { ipv4: address }),
    });
  });
  const segments = form.segments.map((segment, i) => {
    const letter = numbers.letters[i]!;
    const { name, subnet, protocols, mustBeFiltered } = segment;
    const at = { vlan: numbers.vlans[i]!, ...(subnet === undefined ? {} : { subnets: [subnet] }) };
    return draft.add('segments', letter.toLowerCase(), {
      letter,
      name: draft.freeName('segments', name),
      sites: Object.fromEntries(sitesOf(form, segment).map((site) => [sites[site]!.site, at])),
      protocols,
      ...(mustBeFiltered === true ? { mustBeFiltered } : {}),
    });
  });
  return { form, numbers, draft, segments, sites, endpoints, transports };
};

/** Forwarders of a segment at a site by the tunnel that they are to have. */
const addForwarders = (built: Built, segment: number, site: number): ((join: Join) => Id) => {
  const { form, numbers, draft, sites } = built;
  const plan = form.segments[segment]!;
  const { gateway, code, uplinks } = sites[site]!;
  const common = { gateway, code, letter: numbers.letters[segment]! };
  const isHere = sitesOf(form, plan).includes(site);
  const tunnels = tunnelsAt(form, plan, site);
  const accessAt = (uplink: number) => ({ port: uplinks[uplink]!, vlan: numbers.vlans[segment]! });
  if (isHere && needsSecondUplink(form, plan, site)) {
    const [back, ahead] = [1, 0].map((uplink) =>
      addForwarder(draft, { ...common, kind: 'cross-connect', access: accessAt(uplink) }),
    );
    return (join) => (join[1] === site ? back! : ahead!);
  }
  const forwarder = addForwarder(draft, {
    ...common,
    kind: isCrossConnected(plan) && isHere && tunnels.length === 1 ? 'cross-connect' : 'bridge',
    ...(isHere ? { access: accessAt(0) } : {}),
  });
  return () => forwarder;
};

const addOverlay = (built: Built, numbering: NumberingContext | undefined): void => {
  const { form, numbers, draft, sites, endpoints, transports } = built;
  const endOf = (site: number, join: Join): OverlayEnd => {
    const { gateway, code, landings } = sites[site]!;
    const meeting = meetingTransports(form, join);
    const others = sharedTransports(form, join).filter((key) => !meeting.includes(key));
    const via = [...meeting, ...others].map((key) => landings.get(transports.get(key)!)!);
    return { gateway, code, endpoint: endpoints[site]!, via };
  };
  const associations = new Map<string, Id>();
  if (form.encrypted)
    for (const join of joinedPairs(form)) {
      const [a, b] = join;
      associations.set(
        join.join(' '),
        addAssociation(draft, endOf(a, join), endOf(b, join), {
          authentication: form.authentication ?? 'certificate',
          ...(form.domain === undefined ? {} : { domain: form.domain }),
        }),
      );
    }
  const forwarders = new Map<string, (join: Join) => Id>();
  form.segments.forEach((plan, segment) => {
    for (const site of [...new Set(joinsOf(form, plan).flat())].sort((a, b) => a - b))
      forwarders.set(`${segment} ${site}`, addForwarders(built, segment, site));
  });
  tunnelsOf(form).forEach(({ segment, join }, i) => {
    const [a, b] = join;
    const letter = numbers.letters[segment]!.toLowerCase();
    const association = associations.get(join.join(' '));
    const tunnel = addTunnel(draft, endOf(a, join), endOf(b, join), {
      vni: numbers.vnis[i]!,
      name: freeTunnelName(draft.design(), `tn-${sites[a]!.code}-${sites[b]!.code}-${letter}`, numbering),
      ...(association === undefined ? {} : { association }),
    });
    const isMesh = form.topology.kind === 'mesh' && sitesOf(form, form.segments[segment]!).length > 2;
    for (const site of join)
      joinTunnel(draft, forwarders.get(`${segment} ${site}`)!(join), tunnel, isMesh ? meshGroup : undefined);
  });
};

const numberIn = (form: StretchForm, built: Built, transport: Id): number =>
  form.transports.findIndex(({ key }) => built.transports.get(key) === transport);

/** Commits each segment to packets that fit, or says why it can't. */
const sizeSegments = (built: Built): readonly Problem[] => {
  const { form, draft, segments } = built;
  const design = draft.design();
  return segments.flatMap((id, i): readonly Problem[] => {
    const narrowest = narrowestOf(design, id);
    const asked = form.segments[i]!.mtu;
    const least = leastBytesOf(design, id);
    if (asked !== undefined && asked < least && least > 576)
      return [
        { field: `segments.${i}.mtu`, value: asked, expected: `${least} or more: the segment carries IPv6` },
      ];
    if (narrowest !== undefined && narrowest.largestBytes < Math.max(asked ?? 0, least)) {
      const transport = numberIn(form, built, narrowest.transport);
      const { name, mtu } = form.transports[transport]!;
      const wanted = narrowest.transportMtuFor(Math.max(asked ?? 0, least));
      return [
        asked === undefined || narrowest.largestBytes < least
          ? {
              field: `transports.${transport}.mtu`,
              value: mtu,
              expected: `${wanted} or more: ${form.segments[i]!.name} needs packets of ${Math.max(asked ?? 0, least)} bytes, and ${narrowest.largestBytes} fit`,
            }
          : {
              field: `segments.${i}.mtu`,
              value: asked,
              expected: `at most ${narrowest.largestBytes}, which is what fits over ${name}; or an MTU of ${wanted} there`,
            },
      ];
    }
    const mtu = asked ?? (narrowest === undefined ? undefined : usualMtuBytes(narrowest));
    if (mtu !== undefined) draft.set('segments', id, { ...draft.entries('segments')[id]!, mtu });
    return [];
  });
};

const addPolicies = (built: Built): void => {
  const { form, draft, segments } = built;
  const design = draft.design();
  for (const [id, forwarder] of Object.entries(draft.entries('forwarders'))) {
    if (forwarder.kind !== 'cross-connect' || forwarder.policy !== undefined) continue;
    const segment = form.segments.findIndex((_, i) =>
      Object.values(forwarder.circuits).some(
        (circuit) =>
          circuit.kind === 'port' &&
          typeof circuit.vlans !== 'string' &&
          circuit.vlans.includes(built.numbers.vlans[i]!),
      ),
    );
    draft.set('forwarders', id, {
      ...forwarder,
      policy: crossConnectPolicy(design, segments[segment]!, form.segments[segment]!.etherTypes ?? []),
    });
  }
};

const addHosts = (built: Built): void => {
  const { form, numbers, draft, segments, sites } = built;
  const lanMtu = Math.max(STANDARD_PAYLOAD_BYTES, ...form.segments.map(({ mtu }) => mtu ?? 0));
  sites.forEach(({ site, code, access }, i) => {
    form.segments.forEach((plan, s) => {
      const nth = sitesOf(form, plan).indexOf(i);
      if (nth < 0) return;
      const port = addAccessPort(draft, access!, numbers.vlans[s]!, lanMtu);
      if (form.sampleHosts === false) return;
      const { mtu } = draft.entries('segments')[segments[s]!]!;
      const address = plan.subnet === undefined ? undefined : hostAddress(plan.subnet, nth);
      addHost(draft, access!, port, {
        site,
        segment: segments[s]!,
        name: `${slugOf(plan.name, 10)}-${code}`,
        ...(plan.face === undefined ? {} : { face: plan.face }),
        ...(address === undefined ? {} : { address }),
        ...(mtu === undefined ? {} : { mtuBytes: mtu }),
      });
    });
  });
};

/**
 * A complete first design from a form: sites with gateways and switches, transports, loopbacks, associations, tunnels,
 * forwarders, sample hosts, numbered from the pools. One patch on the design it is given; positions are the caller's.
 * Refused with the fields that contradict each other, or for which the pools have nothing left.
 */
export const stretch = (input: unknown, context: StretchContext): Answer<{ readonly patch: MergePatch }> => {
  const read = withExisting(input, context.design);
  if (!read.ok) return read;
  const { form } = read;
  const numbers = numbersFor(form, context);
  if (!numbers.ok) return numbers;
  const draft = draftOf(context.design, context.newId);
  const built = addGround(form, numbers, draft);
  addOverlay(built, context.numbering);
  const problems = sizeSegments(built);
  if (problems.length > 0) return refuse(problems);
  addPolicies(built);
  addHosts(built);
  if (form.standingNotes === true) addStandingNotes(draft);
  return { ok: true, patch: draft.patch() };
};
