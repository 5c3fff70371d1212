import { overlaps, rangeOf } from '../numbering/address-range.ts';
import { addressRangeOf } from '../rules/address-range.ts';
import type { Problem } from '../wire/problem.ts';
import type { LandingPlan, StretchForm } from './stretch-form.ts';
import type { Join } from './topology.ts';
import { isTrusted, joinedPairs, sharedTransports } from './topology.ts';

/** Why nobody outside can send this landing a first packet; undefined where somebody can. */
export const hiddenBy = ({ dynamic, nat }: LandingPlan): 'dynamic' | 'nat' | undefined =>
  dynamic === true ? 'dynamic' : nat === 'hides' ? 'nat' : undefined;

export const landingOn = (form: StretchForm, site: number, transport: string): LandingPlan =>
  form.sites[site]!.landings.find((landing) => landing.transport === transport)!;

const familyOf = (address: string): 4 | 6 => (address.includes(':') ? 6 : 4);

/** Why two sites can't meet on a transport that both land on; undefined where they can. */
const whyApart = (form: StretchForm, [a, b]: Join, transport: string): string | undefined => {
  const [mine, other] = [landingOn(form, a, transport), landingOn(form, b, transport)];
  const names = `${form.sites[a]!.name} and ${form.sites[b]!.name}`;
  if (
    mine.address !== undefined &&
    other.address !== undefined &&
    familyOf(mine.address) !== familyOf(other.address)
  )
    return `addresses of one family at ${names}`;
  if (!form.encrypted)
    return [mine, other].some(({ nat }) => nat !== undefined && nat !== 'none')
      ? `no NAT between ${names}, or encryption: a bare tunnel does not pass it`
      : undefined;
  // RFC 7296 section 2.23: one of two ends needs an address that the other can send to first.
  return hiddenBy(mine) !== undefined && hiddenBy(other) !== undefined
    ? `one end that can be reached: neither ${names} can; forward UDP 500 and 4500 to one, or give one a fixed address`
    : undefined;
};

/** Transports on which two sites can meet, in the form's order. */
export const meetingTransports = (form: StretchForm, join: Join): readonly string[] =>
  sharedTransports(form, join).filter((key) => whyApart(form, join, key) === undefined);

const pairProblems = (form: StretchForm): readonly Problem[] =>
  joinedPairs(form).flatMap((join): readonly Problem[] => {
    const [a, b] = join;
    const shared = sharedTransports(form, join);
    const field = `sites.${b}.landings`;
    if (shared.length === 0)
      return [
        {
          field,
          value: form.sites[b]!.landings.map(({ transport }) => transport),
          expected: `a transport that ${form.sites[a]!.name} lands on, too`,
        },
      ];
    if (meetingTransports(form, join).length > 0) return [];
    const transport = shared[0]!;
    const landing = landingOn(form, b, transport);
    return [
      {
        field,
        value: landing.address ?? landing.nat ?? landing.transport,
        expected: whyApart(form, join, transport)!,
      },
    ];
  });

const trustProblems = (form: StretchForm): readonly Problem[] => {
  if (form.encrypted) return [];
  const used = new Set(joinedPairs(form).flatMap((join) => sharedTransports(form, join)));
  const untrusted = form.transports.filter((transport) => used.has(transport.key) && !isTrusted(transport));
  return untrusted.length === 0
    ? []
    : [
        {
          field: 'encrypted',
          value: false,
          expected: `true: ${untrusted.map(({ name }) => name).join(', ')} ${untrusted.length === 1 ? 'is' : 'are'} not trusted`,
        },
      ];
};

const unusable: readonly (string | undefined)[] = ['link-local', 'loopback', 'multicast', 'unspecified'];

const addressProblems = (form: StretchForm): readonly Problem[] => {
  const seen = new Map<string, string>();
  return form.sites.flatMap(({ name, landings }, s) =>
    landings.flatMap(({ address, transport, nat, dynamic }, i): readonly Problem[] => {
      if (address === undefined) return [];
      const problem = (expected: string): readonly Problem[] => [
        { field: `sites.${s}.landings.${i}.address`, value: address, expected },
      ];
      if (dynamic === true) return problem('no address where the provider changes it');
      const holder = seen.get(`${transport} ${address}`);
      if (holder !== undefined) return problem(`another address than ${holder} has on the same transport`);
      seen.set(`${transport} ${address}`, name);
      const range = addressRangeOf(address);
      if (unusable.includes(range)) return problem(`an address that can be sent to; this one is ${range}`);
      const kind = form.transports.find(({ key }) => key === transport)!.kind;
      if ((range === 'private' || range === 'shared') && kind === 'internet' && (nat ?? 'none') === 'none')
        return problem('a public address, or NAT in front of it: the internet carries no private ones');
      const inside = form.segments.find(
        ({ subnet }) => subnet !== undefined && overlaps(rangeOf(subnet), rangeOf(address)),
      );
      return inside === undefined ? [] : problem(`an address outside ${inside.subnet} of ${inside.name}`);
    }),
  );
};

/** What keeps two sites that have to be joined from meeting on a transport. */
export const landingProblems = (form: StretchForm): readonly Problem[] => [
  ...addressProblems(form),
  ...trustProblems(form),
  ...pairProblems(form),
];
