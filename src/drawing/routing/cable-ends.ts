import type { Design, Entry } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import type { Side } from '../../engine/model/layout.ts';
import type { PipGeometry, Point } from '../geometry.ts';
import { spotKey } from './port-sides.ts';
import { byText } from './rects.ts';

/** One end of a cable: where it leaves a plate. */
export interface CableEnd {
  readonly at: Point;
  readonly side: Side;
  readonly device: string;
  readonly member?: Member;
}
/** A cable between two plates, or all cables of one aggregation. */
export interface CableRun {
  readonly key: string;
  readonly links: readonly string[];
  readonly a: CableEnd;
  readonly b: CableEnd;
  readonly aggregated: boolean;
  /** Between the two members of one pair. */
  readonly within: boolean;
}
/** A WAN cable from a plate to its transport. */
export interface LandingRun {
  readonly key: string;
  readonly link: string;
  readonly landing: Extract<Entry<'links'>, { kind: 'landing' }>;
  readonly from: CableEnd;
}

const middleOf = (ends: readonly CableEnd[]): CableEnd => {
  const first = ends[0]!;
  const same = ends.filter((end) => end.side === first.side);
  const mean = (axis: 'x' | 'y'): number => same.reduce((sum, end) => sum + end.at[axis], 0) / same.length;
  return { ...first, at: { x: mean('x'), y: mean('y') } };
};

/** Cables and landings of a design whose pips are on the sheet, in the order of their ids. */
export const cableRuns = (
  design: Design,
  pips: ReadonlyMap<string, PipGeometry>,
): { readonly cables: readonly CableRun[]; readonly landings: readonly LandingRun[] } => {
  const endAt = (device: string, port: string, member: Member | undefined): CableEnd | undefined => {
    const pip = pips.get(spotKey(device, port, member));
    return pip === undefined
      ? undefined
      : { at: pip.at, side: pip.side, device, ...(member === undefined ? {} : { member }) };
  };
  const isPair = (device: string): boolean => design.devices[device]?.kind === 'ha-pair';
  const groups = new Map<string, { links: string[]; a: CableEnd[]; b: CableEnd[]; within: boolean }>();
  const landings: LandingRun[] = [];
  for (const [id, link] of Object.entries(design.links).sort(([a], [b]) => byText(a, b))) {
    if (link.kind === 'landing') {
      const members: readonly (Member | undefined)[] = !isPair(link.device)
        ? [undefined]
        : link.members === '1'
          ? [1]
          : link.members === '2'
            ? [2]
            : [1, 2];
      for (const member of members) {
        const from = endAt(link.device, link.port, member);
        if (from !== undefined)
          landings.push({
            key: `${id}${member === undefined ? '' : ` ${member}`}`,
            link: id,
            landing: link,
            from,
          });
      }
      continue;
    }
    const memberOf = (plug: typeof link.a): Member | undefined =>
      isPair(plug.device) ? (plug.member ?? 1) : undefined;
    let plugs = [link.a, link.b] as const;
    if (byText(link.a.device, link.b.device) > 0) plugs = [link.b, link.a];
    const [p, q] = plugs;
    const a = endAt(p.device, p.port, memberOf(p));
    const b = endAt(q.device, q.port, memberOf(q));
    if (a === undefined || b === undefined) continue;
    const aggregation = [p, q].map(
      (plug) => design.devices[plug.device]?.ports[plug.port]?.aggregation ?? '',
    );
    const bundled = aggregation.every((name) => name !== '');
    const key = bundled
      ? `${p.device} ${memberOf(p) ?? ''} ${q.device} ${memberOf(q) ?? ''} ${aggregation.join(' ')}`
      : id;
    const group = groups.get(key) ?? { links: [], a: [], b: [], within: p.device === q.device };
    group.links.push(id);
    group.a.push(a);
    group.b.push(b);
    groups.set(key, group);
  }
  const cables = [...groups.values()].map(({ links, a, b, within }): CableRun => ({
    key: links[0]!,
    links,
    a: middleOf(a),
    b: middleOf(b),
    aggregated: links.length > 1,
    within,
  }));
  return { cables: cables.sort((x, y) => byText(x.key, y.key)), landings };
};
