import type { Design, ElementRef, Entry } from '../../engine/model/design.ts';
import type { DeviceKind, Member } from '../../engine/model/devices.ts';
import { hiddenDevices } from '../routing/stands.ts';
import { paletteOf } from '../theme/segment-tokens.ts';
import type { CorePalette } from '../theme/paint.ts';
import type { GlyphName } from './glyphs.ts';
import { carriesWords, hostAddressWords, subnetWords, transportWords, vlanWords } from './words.ts';
import type { TransportWords } from './words.ts';

/** A segment as a cord wears it. */
export interface CordSegment {
  readonly id: string;
  readonly letter: string;
  readonly palette: CorePalette;
}
export interface SegmentFacts extends CordSegment {
  readonly name: string;
  readonly vlan: string;
  readonly subnet: string;
  readonly carries: string;
}
export interface TunnelFacts {
  /** In letter order; empty when it carries none. */
  readonly segments: readonly CordSegment[];
  readonly vni: { readonly a?: number; readonly b?: number };
  readonly endpoints: { readonly a: string; readonly b: string };
  readonly association?: string;
  /** Where one cord stands for several tunnels that leave the sheet together: how many. */
  readonly count?: number;
}
export interface PortFacts {
  readonly number: number;
  readonly shut: boolean;
}
export interface MemberFacts {
  readonly member: Member;
  readonly name: string;
  readonly word: 'active' | 'standby';
}
export interface DeviceFacts {
  readonly site: string;
  readonly kind: DeviceKind;
  readonly name: string;
  readonly glyph: GlyphName;
  /** A host's address, a gateway's kind, or what a collapsed site hides. */
  readonly second?: string;
  readonly members?: readonly MemberFacts[];
  readonly ports: { readonly [port: string]: PortFacts };
}
export interface NoteFacts {
  readonly text: string;
  readonly target?: ElementRef;
}
/** The cells of the title block (data fields of ISO 7200:2004, from memory). */
export interface TitleBlockFacts {
  readonly legalOwner: string;
  readonly createdBy: string;
  readonly status: string;
  readonly documentType: string;
  readonly approvedBy: string;
  readonly identification: string;
  readonly title: string;
  readonly supplementaryTitle: string;
  readonly dateOfIssue: string;
  readonly revision: string;
  readonly language: string;
  readonly sheet: string;
}

/** All that the parts say in words and letters, computed once per version of a design. */
export interface DrawingFacts {
  /** In letter order: A to Z, then AA. */
  readonly segments: readonly SegmentFacts[];
  readonly sites: { readonly [id: string]: string };
  /** What each collapsed site keeps back, by kind: '1 switch, 3 hosts'. */
  readonly keptBack: { readonly [site: string]: string };
  readonly devices: { readonly [id: string]: DeviceFacts };
  readonly transports: { readonly [id: string]: TransportWords };
  readonly tunnels: { readonly [id: string]: TunnelFacts };
  readonly associations: { readonly [id: string]: string };
  readonly endpoints: { readonly [id: string]: string };
  readonly notes: { readonly [id: string]: NoteFacts };
  /** The device of each forwarder, which has no place of its own. */
  readonly forwarders: { readonly [id: string]: string };
  readonly titleBlock: TitleBlockFacts;
}

const mapEntries = <E, R>(
  entries: { readonly [id: string]: E },
  convert: (entry: E, id: string) => R,
): { readonly [id: string]: R } =>
  Object.fromEntries(Object.entries(entries).map(([id, entry]) => [id, convert(entry, id)]));

/** A to Z before AA: shorter letters first. */
const byLetter = (a: { readonly letter: string }, b: { readonly letter: string }): number =>
  a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : a.letter > b.letter ? 1 : 0);

const membersOf = (device: Entry<'devices'>): readonly MemberFacts[] | undefined => {
  if (device.kind !== 'ha-pair') return undefined;
  const active = device.active ?? 1;
  return ([1, 2] as const).map((member) => ({
    member,
    name: device.memberNames[member],
    word: device.mode === 'active-active' || member === active ? 'active' : 'standby',
  }));
};

const kindWords: readonly (readonly [DeviceKind, string, string])[] = [
  ['firewall', 'firewall', 'firewalls'],
  ['ha-pair', 'HA pair', 'HA pairs'],
  ['router', 'router', 'routers'],
  ['switch', 'switch', 'switches'],
  ['host', 'host', 'hosts'],
];

const keptBackWords = (design: Design): { readonly [site: string]: string } => {
  const hidden = [...hiddenDevices(design)].map((id) => design.devices[id]!);
  const collapsed = Object.entries(design.layout.sites ?? {}).filter(([, place]) => place.collapsed === true);
  return Object.fromEntries(
    collapsed.map(([site]) => {
      const own = hidden.filter((device) => device.site === site);
      const words = kindWords.flatMap(([kind, one, many]) => {
        const count = own.filter((device) => device.kind === kind).length;
        return count === 0 ? [] : [`${count} ${count === 1 ? one : many}`];
      });
      return [site, words.join(', ')];
    }),
  );
};

const deviceFacts = (design: Design): { readonly [id: string]: DeviceFacts } => {
  const perSite = new Map<string, number>();
  for (const device of Object.values(design.devices))
    perSite.set(device.site, (perSite.get(device.site) ?? 0) + 1);
  const second = (device: Entry<'devices'>): string | undefined => {
    if (device.kind === 'host') return hostAddressWords(device);
    if (device.kind === 'switch') return undefined;
    const hidden = (perSite.get(device.site) ?? 1) - 1;
    if (design.layout.sites?.[device.site]?.collapsed && hidden > 0)
      return `${hidden} more ${hidden === 1 ? 'device' : 'devices'}`;
    return device.kind === 'ha-pair' ? undefined : device.kind;
  };
  return mapEntries(design.devices, (device): DeviceFacts => {
    const secondLine = second(device);
    const members = membersOf(device);
    return {
      site: device.site,
      kind: device.kind,
      name: device.name,
      // The members of a pair are firewalls to look at.
      glyph:
        device.kind === 'host'
          ? (device.face ?? 'host')
          : device.kind === 'ha-pair'
            ? 'firewall'
            : device.kind,
      ports: mapEntries(device.ports, (port) => ({ number: port.number, shut: port.shut === true })),
      ...(secondLine === undefined ? {} : { second: secondLine }),
      ...(members === undefined ? {} : { members }),
    };
  });
};

const titleBlockFacts = (design: Design, given: Partial<TitleBlockFacts>): TitleBlockFacts => {
  const { meta } = design;
  return {
    legalOwner: meta.legalOwner ?? '–',
    createdBy: meta.createdBy ?? '–',
    status: meta.status ?? 'Draft',
    documentType: meta.documentType ?? 'L2 overlay design',
    approvedBy: meta.approvedBy ?? '–',
    identification: meta.identification ?? '–',
    title: meta.title,
    supplementaryTitle: meta.supplementaryTitle ?? '',
    dateOfIssue: meta.dateOfIssue ?? '–',
    revision: meta.revision ?? '–',
    language: meta.language ?? 'en',
    sheet: '1/1',
    ...given,
  };
};

/**
 * What a design's drawing says. `tunnelSegments` gives the ids of the segments that each tunnel carries, as the engine
 * follows them through the circuits; `titleBlock` replaces cells whose values live outside the design (a revision's state).
 */
export const drawingFacts = (
  design: Design,
  tunnelSegments: ReadonlyMap<string, readonly string[]>,
  titleBlock: Partial<TitleBlockFacts> = {},
): DrawingFacts => {
  const segments = Object.entries(design.segments)
    .map(([id, segment]): SegmentFacts => ({
      id,
      letter: segment.letter,
      palette: paletteOf(segment.letter),
      name: segment.name,
      vlan: vlanWords(segment),
      subnet: subnetWords(segment),
      carries: carriesWords(segment),
    }))
    .sort((a, b) => byLetter(a, b) || (a.id < b.id ? -1 : 1));
  const cordSegments = new Map(
    segments.map(({ id, letter, palette }): [string, CordSegment] => [id, { id, letter, palette }]),
  );
  return {
    segments,
    sites: mapEntries(design.sites, (site) => site.name),
    keptBack: keptBackWords(design),
    devices: deviceFacts(design),
    transports: mapEntries(design.transports, transportWords),
    tunnels: mapEntries(design.tunnels, (tunnel, id): TunnelFacts => ({
      segments: (tunnelSegments.get(id) ?? [])
        .flatMap((segment) => cordSegments.get(segment) ?? [])
        .sort(byLetter),
      vni: {
        ...(tunnel.a.vni === undefined ? {} : { a: tunnel.a.vni }),
        ...(tunnel.b.vni === undefined ? {} : { b: tunnel.b.vni }),
      },
      endpoints: { a: tunnel.a.endpoint, b: tunnel.b.endpoint },
      ...(tunnel.association === undefined ? {} : { association: tunnel.association }),
    })),
    associations: mapEntries(design.associations, (association) => association.name),
    endpoints: mapEntries(design.endpoints, (endpoint) => endpoint.name),
    notes: mapEntries(design.notes, ({ text, target }) => ({
      text,
      ...(target === undefined ? {} : { target }),
    })),
    forwarders: mapEntries(design.forwarders, (forwarder) => forwarder.device),
    titleBlock: titleBlockFacts(design, titleBlock),
  };
};
