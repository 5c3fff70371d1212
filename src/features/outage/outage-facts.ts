import type { AttachmentPoint } from '../../engine/flood/attachment-points.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Network } from '../../engine/network/network.ts';
import { casualtiesOf, type Casualties } from '../../engine/outage/casualties.ts';
import { outageOf, type Outage } from '../../engine/outage/outage.ts';
import { siteReach, type Reach, type SiteReach } from '../../engine/outage/site-reach.ts';
import type { FailureSummary } from './failure-run.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** What a set of failures comes to. */
export interface OutageFacts {
  readonly outage: Outage;
  readonly casualties: Casualties;
  readonly reach: readonly SiteReach[];
}

/** What some elements part by failing together; they have to be the design's own. */
export const outageFacts = (network: Network, failed: readonly ElementRef[]): OutageFacts | undefined => {
  const answer = casualtiesOf(network, failed);
  if (!answer.ok) return undefined;
  const { casualties } = answer;
  const outage = outageOf(network, failed, casualties, { pairs: true });
  return { outage, casualties, reach: siteReach(network, outage) };
};

/** A host by its name, a port that stands for a site without hosts by its own. */
export const pointName = (design: Design, { device, port }: AttachmentPoint): string =>
  nameOf(design, { collection: 'devices', id: device, ...(port === undefined ? {} : { port }) });

/** Two hosts that no longer exchange frames. */
export interface PartedRow {
  readonly key: string;
  readonly letter: string;
  readonly segment: string;
  readonly from: string;
  readonly fromSite: string;
  readonly to: string;
  readonly toSite: string;
  readonly ways: string;
}

export const partedRows = (design: Design, { segments }: Outage): readonly PartedRow[] =>
  segments.flatMap(({ segment, pairs = [] }) => {
    const { letter, name } = design.segments[segment]!;
    return pairs.map(({ a, b, lost }): PartedRow => {
      const [from, to] = lost === 'b-to-a' ? [b, a] : [a, b];
      return {
        key: `${segment} ${a.device} ${a.port ?? ''} ${b.device} ${b.port ?? ''}`,
        letter,
        segment: name,
        from: pointName(design, from),
        fromSite: design.sites[from.site]!.name,
        to: pointName(design, to),
        toSite: design.sites[to.site]!.name,
        ways: lost === 'both' ? 'both ways' : 'this way only',
      };
    });
  });

export const reachWords: Readonly<Record<Reach, string>> = {
  reaches: 'reaches',
  partly: 'partly',
  parted: 'parted',
  'out-of-service': 'out of service',
};

/** A site with how each segment stands there. */
export interface SiteRow {
  readonly site: string;
  readonly name: string;
  readonly reach: ReadonlyMap<string, SiteReach>;
  /** The worst first: how many pairs its hosts have lost. */
  readonly lostPairs: number;
  readonly outOfService: number;
}

export const siteRows = (design: Design, reach: readonly SiteReach[]): readonly SiteRow[] => {
  const bySite = new Map<string, Map<string, SiteReach>>();
  for (const one of reach) {
    const own = bySite.get(one.site) ?? new Map<string, SiteReach>();
    bySite.set(one.site, own.set(one.segment, one));
  }
  return [...bySite].map(([site, own]) => ({
    site,
    name: design.sites[site]!.name,
    reach: own,
    lostPairs: [...own.values()].reduce((sum, { lostPairs }) => sum + lostPairs, 0),
    outOfService: [...own.values()].filter((one) => one.reach === 'out-of-service').length,
  }));
};

const counted = (count: number, one: string, many = `${one}s`): string =>
  `${count} ${count === 1 ? one : many}`;

/** What has come of it, in one sentence. */
export const outageSentence = ({ outage }: OutageFacts): string => {
  const { pairCount, segments, gone, failedOver } = outage;
  const out = gone.length === 0 ? '' : `${counted(gone.length, 'host')} out of service. `;
  const moved = failedOver.length === 0 ? '' : `${counted(failedOver.length, 'pair')} changed over. `;
  return pairCount === 0
    ? `${out}${moved}${gone.length === 0 ? 'Nobody' : 'Of the others nobody'} is parted.`
    : `${out}${moved}${counted(pairCount, 'pair')} of hosts parted in ${counted(segments.length, 'segment')}.`;
};

/** How many things harm when they fail alone; where none does, what was tried. */
export const singlesSentence = (singles: readonly FailureSummary[]): string => {
  const harmful = singles.filter(({ pairCount }) => pairCount > 0).length;
  return harmful === 0
    ? `Nothing parts when any one thing fails: all ${singles.length} tried.`
    : `${harmful} of ${singles.length} things part hosts when they fail alone.`;
};
