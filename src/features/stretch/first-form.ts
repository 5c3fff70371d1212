import type { Design } from '../../engine/model/design.ts';
import type { SegmentPlan, SitePlan, StretchForm, TransportPlan } from '../../engine/stretch/stretch-form.ts';

/** The first of `stem1`, `stem2` … that is not taken. */
const freeText = (taken: readonly string[], stem: string, from: number): string => {
  let n = from;
  while (taken.includes(`${stem}${n}`)) n += 1;
  return `${stem}${n}`;
};

/** A key that no entry of a list has. */
export const freeKey = (list: readonly { readonly key: string }[], stem: string): string =>
  freeText(
    list.map(({ key }) => key),
    stem,
    1,
  );

/** One more site, called as given or by its number, landing where the others do. */
export const nextSite = ({ sites, transports }: StretchForm, name?: string): SitePlan => ({
  key: freeKey(sites, 's'),
  name:
    name ??
    freeText(
      sites.map((site) => site.name),
      'Site ',
      sites.length + 1,
    ),
  gateway: 'firewall',
  landings: [{ transport: transports[0]!.key }],
});

export const nextSegment = ({ segments }: StretchForm): SegmentPlan => ({
  key: freeKey(segments, 'g'),
  name: freeText(
    segments.map((segment) => segment.name),
    'Segment ',
    segments.length + 1,
  ),
  protocols: ['ipv4'],
});

export const nextTransport = ({ transports }: StretchForm): TransportPlan => ({
  key: freeKey(transports, 't'),
  name: freeText(
    transports.map((transport) => transport.name),
    'Transport ',
    transports.length + 1,
  ),
  kind: 'internet',
});

/** What the assistant begins with: two sites on one access, or on the transports that the design has. */
export const firstForm = (design: Design): StretchForm => {
  const known = Object.entries(design.transports)
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .slice(0, 4)
    .map(([id, { name, kind, trusted, mtu }], i): TransportPlan => ({
      key: `t${i + 1}`,
      existing: id,
      name,
      kind,
      ...(trusted === undefined ? {} : { trusted }),
      ...(mtu === undefined ? {} : { mtu }),
    }));
  const transports: readonly TransportPlan[] =
    known.length > 0 ? known : [{ key: 't1', name: 'Internet access', kind: 'internet', mtu: 1500 }];
  const form: StretchForm = {
    sites: [],
    transports,
    segments: [{ key: 'g1', name: 'Segment 1', protocols: ['ipv4'] }],
    topology: { kind: 'pair' },
    encrypted: true,
    sampleHosts: true,
  };
  const one = { ...form, sites: [nextSite(form)] };
  return { ...one, sites: [...one.sites, nextSite(one)] };
};

/** What a site is called until somebody names it. */
const isUnnamed = ({ name }: SitePlan): boolean => /^Site \d+$/.test(name.trim()) || name.trim() === '';

/** The form with sites of these names: those that have none yet take the first of them, the rest are added, up to `most`. */
export const withNamedSites = (form: StretchForm, names: readonly string[], most: number): StretchForm => {
  const left = [...names];
  const named: StretchForm = {
    ...form,
    sites: form.sites.map((site) => (isUnnamed(site) ? { ...site, name: left.shift() ?? site.name } : site)),
  };
  return left
    .slice(0, most - named.sites.length)
    .reduce<StretchForm>((so, name) => withSites(so, [...so.sites, nextSite(so, name)]), named);
};

/** The form with its sites changed: topology and segments follow. */
export const withSites = (form: StretchForm, sites: readonly SitePlan[]): StretchForm => {
  const keys = sites.map(({ key }) => key);
  const { topology } = form;
  return {
    ...form,
    sites,
    topology:
      topology.kind === 'pair' && sites.length !== 2
        ? { kind: 'hub', hub: keys[0]! }
        : topology.kind === 'hub' && !keys.includes(topology.hub)
          ? { kind: 'hub', hub: keys[0]! }
          : topology,
    segments: form.segments.map((segment) => {
      if (segment.sites === undefined) return segment;
      const { sites: own, ...everywhere } = segment;
      const left = own.filter((key) => keys.includes(key));
      return left.length < 2 ? everywhere : { ...segment, sites: left };
    }),
  };
};

/** The form without one of its transports: sites that landed on it land on the first that is left. */
export const withoutTransport = (form: StretchForm, key: string): StretchForm => {
  const transports = form.transports.filter((transport) => transport.key !== key);
  return {
    ...form,
    transports,
    sites: form.sites.map((site) => {
      const landings = site.landings.filter(({ transport }) => transport !== key);
      return { ...site, landings: landings.length > 0 ? landings : [{ transport: transports[0]!.key }] };
    }),
  };
};
