import type { Probe } from './probe.ts';
import type { TraceDelivery, TraceStep, TraceStorm } from './trace.ts';
import type { Names } from './trace-words.ts';

const stormWords = ({ growth, copiesByRound }: TraceStorm): string =>
  growth === 'circulates'
    ? 'Its copies circulate without end'
    : `Its copies multiply without end: ${copiesByRound.slice(0, 4).join(', ')} from round to round`;

/** What came of the frame, in one sentence without its stop. */
export const traceSummary = (
  names: Names,
  { destination }: Probe,
  steps: readonly TraceStep[],
  deliveries: readonly TraceDelivery[],
  storm: TraceStorm | undefined,
): string => {
  if (storm !== undefined) return stormWords(storm);
  const drops = steps.flatMap(({ verdict }) => (verdict?.code === 'dropped' ? [verdict] : []));
  const cause = drops.find(({ byDesign }) => !byDesign) ?? drops[0];
  if (destination.kind === 'host') {
    const delivery = deliveries.find(({ device }) => device === destination.host);
    const name = names.device(destination.host);
    if (delivery !== undefined)
      return delivery.copies === 1 ? `It reaches ${name}` : `It reaches ${name} in ${delivery.copies} copies`;
    return `It does not reach ${name}${cause === undefined ? '' : `: ${cause.words}`}`;
  }
  const more = cause === undefined || cause.byDesign ? '' : `; a copy ended: ${cause.words}`;
  if (deliveries.length === 0) return `It reaches nobody${cause === undefined ? '' : `: ${cause.words}`}`;
  const several = deliveries.filter(({ copies }) => copies !== 1).length;
  const who = deliveries.length === 1 ? names.device(deliveries[0]!.device) : `${deliveries.length} devices`;
  return `It reaches ${who}${several === 0 ? '' : `, ${several} of them more than once`}${more}`;
};
