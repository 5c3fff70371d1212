import type { Design, Entry } from '../../engine/model/design.ts';

/** Traffic that a segment has to carry, in one line. */
export interface DemandRow {
  readonly id: string;
  readonly name: string;
  readonly segment: string;
  readonly letter: string;
  readonly segmentName: string;
  readonly from: string;
  readonly to: string;
  readonly forwardBps: number | undefined;
  readonly reverseBps: number | undefined;
  readonly flows: number | undefined;
  readonly latencyAllowedUs: number | undefined;
}

const placeName = (design: Design, place: Entry<'demands'>['from']): string =>
  'site' in place ? `all of ${design.sites[place.site]!.name}` : design.devices[place.host]!.name;

/** Demands of all segments or of one, in order of letter, then as the design has them. */
export const demandRows = (design: Design, only?: string): readonly DemandRow[] =>
  Object.entries(design.demands)
    .filter(([, demand]) => only === undefined || demand.segment === only)
    .map(([id, demand]): DemandRow => {
      const segment = design.segments[demand.segment]!;
      const [from, to] = [placeName(design, demand.from), placeName(design, demand.to)];
      return {
        id,
        name: demand.name ?? `${from} to ${to}`,
        segment: demand.segment,
        letter: segment.letter,
        segmentName: segment.name,
        from,
        to,
        forwardBps: demand.forwardBps,
        reverseBps: demand.reverseBps,
        flows: demand.flows,
        latencyAllowedUs: demand.latencyAllowedUs,
      };
    })
    .sort(
      (a, b) => a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : a.letter > b.letter ? 1 : 0),
    );
