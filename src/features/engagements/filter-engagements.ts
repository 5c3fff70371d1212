import { designStates, type DesignSummary, type Engagement } from '../../contract/designs.ts';

export type DesignState = (typeof designStates)[number];

export interface EngagementFilter {
  readonly state: DesignState | null;
  /** Words of a title, an identification number or an engagement's name. */
  readonly words: string;
}

export const isDesignState = (value: string | null): value is DesignState =>
  designStates.some((state) => state === value);

/**
 * The engagements with those of their designs that fit. Without a filter an engagement without designs stays, since
 * it is where the first one is made; with one, only engagements in which something fits.
 */
export function filterEngagements(
  engagements: readonly Engagement[],
  { state, words }: EngagementFilter,
): readonly Engagement[] {
  const wanted = words.trim().toLowerCase();
  if (state === null && wanted === '') return engagements;
  return engagements.flatMap((engagement) => {
    const named = wanted === '' || engagement.name.toLowerCase().includes(wanted);
    const designs = engagement.designs.filter(
      (design) => (state === null || design.state === state) && (named || speaksOf(design, wanted)),
    );
    const stays = designs.length > 0 || (named && state === null);
    return stays ? [{ ...engagement, designs }] : [];
  });
}

const speaksOf = (design: DesignSummary, wanted: string): boolean =>
  [design.title, design.identification].some((text) => text?.toLowerCase().includes(wanted));

/** How many designs there are in each state, in the order of a design's life; states without any are left out. */
export function countByState(
  engagements: readonly Engagement[],
): readonly { readonly state: DesignState; readonly count: number }[] {
  const designs = engagements.flatMap((engagement) => engagement.designs);
  return designStates
    .map((state) => ({ state, count: designs.filter((design) => design.state === state).length }))
    .filter(({ count }) => count > 0);
}

/** The designs with most blocking findings, at most `most` of them; archived ones wait for nobody. */
export function faultsWaiting(
  engagements: readonly Engagement[],
  most: number,
): readonly { readonly design: DesignSummary; readonly engagement: Engagement }[] {
  return engagements
    .filter(({ archivedAt }) => archivedAt === null)
    .flatMap((engagement) => engagement.designs.map((design) => ({ design, engagement })))
    .filter(({ design }) => design.archivedAt === null && design.counts.blocking > 0)
    .sort(
      (a, b) =>
        b.design.counts.blocking - a.design.counts.blocking ||
        b.design.changedAt.localeCompare(a.design.changedAt),
    )
    .slice(0, most);
}
