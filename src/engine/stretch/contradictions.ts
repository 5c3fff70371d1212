import { overlaps, rangeOf } from '../numbering/address-range.ts';
import type { Problem } from '../wire/problem.ts';
import { landingProblems } from './landing-problems.ts';
import type { SegmentPlan, StretchForm } from './stretch-form.ts';
import { MOST_TUNNELS } from './stretch-form.ts';
import { isCrossConnected, joinedPairs, joinsOf, neighbourProtocolsOf, sitesOf } from './topology.ts';

interface Named {
  readonly key: string;
  readonly name: string;
}

/** Places in a list whose text somebody before them has already. */
const repeated = (texts: readonly (string | undefined)[]): readonly number[] =>
  texts.flatMap((text, i) =>
    text !== undefined && texts.slice(0, i).some((other) => other === text) ? [i] : [],
  );

const spelt = (name: string): string => name.trim().toLowerCase();

const sameNames = (field: string, list: readonly Named[], what: string): readonly Problem[] => [
  ...repeated(list.map(({ key }) => key)).map((i) => ({
    field: `${field}.${i}.key`,
    value: list[i]!.key,
    expected: `a key of its own: another ${what} has this one`,
  })),
  ...repeated(list.map(({ name }) => spelt(name))).map((i) => ({
    field: `${field}.${i}.name`,
    value: list[i]!.name,
    expected: `a name of its own: another ${what} is called so`,
  })),
];

const unknownKeys = (
  field: string,
  keys: readonly string[],
  list: readonly Named[],
  what: string,
): readonly Problem[] =>
  keys.flatMap((key, i) =>
    list.some((each) => each.key === key)
      ? []
      : [{ field: `${field}.${i}`, value: key, expected: `the key of a ${what} of this form` }],
  );

/** What refers to nothing, or says the same twice. Later checks rely on there being none of it. */
const referenceProblems = ({ sites, transports, segments, topology }: StretchForm): readonly Problem[] => [
  ...sameNames('sites', sites, 'site'),
  ...sameNames('transports', transports, 'transport'),
  ...sameNames('segments', segments, 'segment'),
  ...repeated(sites.map(({ code }) => code)).map((i) => ({
    field: `sites.${i}.code`,
    value: sites[i]!.code,
    expected: 'a short form of its own: another site has this one',
  })),
  ...sites.flatMap(({ landings }, s) => [
    ...landings.flatMap(({ transport }, i) =>
      transports.some(({ key }) => key === transport)
        ? []
        : [
            {
              field: `sites.${s}.landings.${i}.transport`,
              value: transport,
              expected: 'the key of a transport of this form',
            },
          ],
    ),
    ...repeated(landings.map(({ transport }) => transport)).map((i) => ({
      field: `sites.${s}.landings.${i}.transport`,
      value: landings[i]!.transport,
      expected: 'a transport on which the site does not land already',
    })),
  ]),
  ...segments.flatMap((segment, i) => [
    ...unknownKeys(`segments.${i}.sites`, segment.sites ?? [], sites, 'site'),
    ...repeated(segment.sites ?? []).map((place) => ({
      field: `segments.${i}.sites.${place}`,
      value: segment.sites![place],
      expected: 'each site once',
    })),
  ]),
  ...(topology.kind === 'hub' && !sites.some(({ key }) => key === topology.hub)
    ? [{ field: 'topology.hub', value: topology.hub, expected: 'the key of a site of this form' }]
    : []),
  ...(topology.kind === 'pair' && sites.length !== 2
    ? [
        {
          field: 'topology.kind',
          value: 'pair',
          expected: `two sites, and there are ${sites.length}: take hub, chain or mesh`,
        },
      ]
    : []),
];

const namesOf = (form: StretchForm, places: readonly number[]): string =>
  places.map((i) => form.sites[i]!.name).join(', ');

/** Sites that the tunnels of a segment pass without it. */
const passedThrough = (form: StretchForm, segment: SegmentPlan): readonly number[] => {
  const own = new Set(sitesOf(form, segment));
  return [...new Set(joinsOf(form, segment).flat())].filter((i) => !own.has(i)).sort((a, b) => a - b);
};

const crossConnectProblems = (form: StretchForm, segment: SegmentPlan, at: string): readonly Problem[] => {
  if (!isCrossConnected(segment)) return [];
  const joins = joinsOf(form, segment);
  const neighbours = neighbourProtocolsOf(segment);
  if (neighbours.length > 0 && joins.length > 1)
    return [
      {
        field: `${at}.protocols`,
        value: neighbours,
        expected: `none of these on a segment of ${sitesOf(form, segment).length} sites: bridges keep them to themselves, so leave them out or give the segment two sites that are joined`,
      },
    ];
  if (form.topology.kind === 'mesh' && joins.length > 1)
    return [
      {
        field: `${at}.mustBeFiltered`,
        value: true,
        expected: `a hub or a chain: a cross-connect joins one port and one tunnel, and ports for each of ${sitesOf(form, segment).length - 1} tunnels would close loops through the switch`,
      },
    ];
  const through = passedThrough(form, segment);
  const bare = joins.find(([a, b]) => through.includes(a) && through.includes(b));
  return bare === undefined
    ? []
    : [
        {
          field: `${at}.sites`,
          value: segment.sites,
          expected: `one of ${namesOf(form, bare)} among them: between them nothing would filter the segment`,
        },
      ];
};

const segmentProblems = (form: StretchForm, i: number): readonly Problem[] => {
  const segment = form.segments[i]!;
  const at = `segments.${i}`;
  const mine = sitesOf(form, segment);
  const others = form.segments.slice(0, i);
  const sharing = others.find(
    (other) =>
      segment.vlan !== undefined &&
      other.vlan === segment.vlan &&
      sitesOf(form, other).some((site) => mine.includes(site)),
  );
  const overlapping = others.find(
    (other) =>
      segment.subnet !== undefined &&
      other.subnet !== undefined &&
      overlaps(rangeOf(segment.subnet), rangeOf(other.subnet)),
  );
  return [
    ...(sharing === undefined
      ? []
      : [
          {
            field: `${at}.vlan`,
            value: segment.vlan,
            expected: `another VLAN than ${sharing.name} has at the same site, or none to get a free one`,
          },
        ]),
    ...(overlapping === undefined
      ? []
      : [
          {
            field: `${at}.subnet`,
            value: segment.subnet,
            expected: `a subnet clear of ${overlapping.subnet}, which ${overlapping.name} has`,
          },
        ]),
    ...(isCrossConnected(segment) &&
    segment.protocols.includes('real-time-ethernet') &&
    segment.etherTypes === undefined
      ? [
          {
            field: `${at}.etherTypes`,
            value: undefined,
            expected: 'the EtherTypes that its cross-connects have to let through, such as 0x88b5',
          },
        ]
      : []),
    ...crossConnectProblems(form, segment, at),
  ];
};

/** What the fields of a form contradict in one another, each with the way out. [] for one that can be built. */
export const contradictions = (form: StretchForm): readonly Problem[] => {
  const dangling = referenceProblems(form);
  if (dangling.length > 0) return dangling;
  const tunnels = form.segments.reduce((sum, segment) => sum + joinsOf(form, segment).length, 0);
  if (tunnels > MOST_TUNNELS)
    return [
      {
        field: 'sites',
        value: form.sites.length,
        expected: `fewer sites or segments: these need ${tunnels} tunnels, ${MOST_TUNNELS} are the most; a hub needs the fewest`,
      },
    ];
  const joined = new Set(joinedPairs(form).flat());
  return [
    ...form.segments.flatMap((_, i) => segmentProblems(form, i)),
    ...form.sites.flatMap((site, i) =>
      joined.has(i)
        ? []
        : [
            {
              field: `sites.${i}.name`,
              value: site.name,
              expected: 'a site that some segment has: give it one, or leave it out',
            },
          ],
    ),
    ...landingProblems(form),
  ];
};
