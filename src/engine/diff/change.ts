import type { Design, ElementRef, Entry } from '../model/design.ts';
import { elementName } from './element-names.ts';

/** What stands together in a list of differences: a site, a segment, what joins two sites, or the drawing itself. */
export interface ChangeGroup {
  readonly key: string;
  readonly name: string;
}

/** One difference between two designs, said in one sentence. */
export interface Change {
  readonly kind: 'added' | 'removed' | 'changed';
  /** What it is about; null where it is the drawing itself. */
  readonly ref: ElementRef | null;
  /** Without a final stop. */
  readonly sentence: string;
  readonly group: ChangeGroup;
  /** Where in the document, as keys from its root; what lies beneath is told of as well. */
  readonly paths: readonly (readonly string[])[];
}

const kindsOfGroup = [
  'site',
  'segment',
  'between',
  'transport',
  'profiles',
  'title',
  'notes',
  'layout',
] as const;
type KindOfGroup = (typeof kindsOfGroup)[number];

const group = (kind: KindOfGroup, name: string, id = ''): ChangeGroup => ({ key: `${kind}:${id}`, name });
export const titleGroup = group('title', 'Title block');
export const layoutGroup = group('layout', 'Places on the sheet');

const orderOf = ({ key }: ChangeGroup): number =>
  kindsOfGroup.indexOf(key.slice(0, key.indexOf(':')) as KindOfGroup);

/** Sites first, then segments, what joins sites, and the drawing itself; by name among themselves. */
export const compareGroups = (a: ChangeGroup, b: ChangeGroup): number =>
  orderOf(a) - orderOf(b) ||
  (a.name < b.name ? -1 : a.name > b.name ? 1 : a.key < b.key ? -1 : a.key > b.key ? 1 : 0);

/** Where a reader looks for an element of a design that has it. */
export const groupOf = (design: Design, { collection, id }: ElementRef): ChangeGroup => {
  switch (collection) {
    case 'sites':
      return siteGroup(design, id);
    case 'devices':
      return deviceGroup(design, id);
    case 'endpoints':
      return deviceGroup(design, design.endpoints[id]!.device);
    case 'forwarders':
      return deviceGroup(design, design.forwarders[id]!.device);
    case 'links':
      return linkGroup(design, design.links[id]!);
    case 'tunnels': {
      const { a, b } = design.tunnels[id]!;
      return betweenGroup(design, design.endpoints[a.endpoint]?.device, design.endpoints[b.endpoint]?.device);
    }
    case 'associations': {
      const { a, b } = design.associations[id]!;
      return betweenGroup(design, a.device, b.device);
    }
    case 'segments':
      return segmentGroup(design, id);
    case 'demands':
      return segmentGroup(design, design.demands[id]!.segment);
    case 'transports':
      return group('transport', 'Transports');
    case 'profiles':
      return group('profiles', 'Equipment profiles');
    case 'notes':
      return group('notes', 'Notes');
  }
};

const siteGroup = (design: Design, id: string): ChangeGroup =>
  group('site', elementName(design, 'sites', id), id);
const deviceGroup = (design: Design, id: string): ChangeGroup =>
  siteGroup(design, design.devices[id]?.site ?? '');
const segmentGroup = (design: Design, id: string): ChangeGroup =>
  group('segment', `Segment ${elementName(design, 'segments', id)}`, id);

const linkGroup = (design: Design, link: Entry<'links'>): ChangeGroup =>
  link.kind === 'landing'
    ? deviceGroup(design, link.device)
    : betweenGroup(design, link.a.device, link.b.device);

/** What joins two devices of one site belongs to that site. */
const betweenGroup = (design: Design, a: string | undefined, b: string | undefined): ChangeGroup => {
  const sites = [a, b].map((device) => design.devices[device ?? '']?.site ?? '').sort();
  const [first = '', second = ''] = sites;
  if (first === second) return siteGroup(design, first);
  const names = sites.map((id) => elementName(design, 'sites', id)).sort();
  return group('between', `Between ${names[0]!} and ${names[1]!}`, `${first}/${second}`);
};
