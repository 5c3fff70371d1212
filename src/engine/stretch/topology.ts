import type { Protocol } from '../model/intent.ts';
import type { SegmentPlan, StretchForm } from './stretch-form.ts';

/** Two sites that a tunnel joins, by their place in the form. */
export type Join = readonly [a: number, b: number];

/** Places of the sites that have a segment, in the form's order. */
export const sitesOf = ({ sites }: StretchForm, segment: SegmentPlan): readonly number[] =>
  sites.flatMap(({ key }, i) => (segment.sites === undefined || segment.sites.includes(key) ? [i] : []));

/**
 * The tunnels of a segment. Through a hub and along a chain they pass sites that don't have it themselves; a mesh joins
 * just those that do.
 */
export const joinsOf = (form: StretchForm, segment: SegmentPlan): readonly Join[] => {
  const places = sitesOf(form, segment);
  const { topology } = form;
  if (topology.kind === 'hub') {
    const hub = form.sites.findIndex(({ key }) => key === topology.hub);
    return places.filter((i) => i !== hub).map((i) => [hub, i]);
  }
  if (topology.kind === 'chain') {
    const [first, last] = [places[0]!, places.at(-1)!];
    return Array.from({ length: last - first }, (_, step) => [first + step, first + step + 1]);
  }
  return places.flatMap((a, i) => places.slice(i + 1).map((b): Join => [a, b]));
};

// IEEE 802.1Q section 8.6.3: every bridge keeps these to itself, so only a one-to-one cross-connect carries them on.
const neighbourProtocols = ['lacp', 'eapol', 'spanning-tree'] as const;

/** Protocols of a segment that no bridge passes on. */
export const neighbourProtocolsOf = ({
  protocols,
}: {
  readonly protocols?: readonly string[] | undefined;
}): readonly Protocol[] => neighbourProtocols.filter((protocol) => protocols?.includes(protocol) === true);

/** Whether a segment goes through cross-connects: to be filtered, or to carry what bridges keep to themselves. */
export const isCrossConnected = (segment: SegmentPlan): boolean =>
  segment.mustBeFiltered === true || neighbourProtocolsOf(segment).length > 0;

/** All sites that tunnels of some segment join, each pair once, in the order of the form. */
export const joinedPairs = (form: StretchForm): readonly Join[] => {
  const seen = new Map<string, Join>();
  for (const segment of form.segments)
    for (const join of joinsOf(form, segment)) seen.set(join.join(' '), join);
  return [...seen.values()].sort(([a, b], [c, d]) => a - c || b - d);
};

/** Transports that both sites land on, in the form's order. */
export const sharedTransports = (form: StretchForm, [a, b]: Join): readonly string[] => {
  const on = (site: number, key: string): boolean =>
    form.sites[site]!.landings.some(({ transport }) => transport === key);
  return form.transports.map(({ key }) => key).filter((key) => on(a, key) && on(b, key));
};

/** Common practice, no source: a network of one's own may be trusted, others are not unless somebody says so. */
export const isTrusted = ({ kind, trusted }: StretchForm['transports'][number]): boolean =>
  trusted ?? kind === 'own-routed';
