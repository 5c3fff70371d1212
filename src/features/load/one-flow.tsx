import type { Ceiling, Reachable } from '../../engine/load/reachable.ts';
import type { Design } from '../../engine/model/design.ts';
import { TCP_LOSS_BOUND_CONSTANT } from '../../engine/reference/tcp.ts';
import { bytesText, durationText, lossText, rateText } from '../../lib/figure-texts.ts';
import { missingWords } from '../../workspace/operations/missing-words.ts';
import { ceilingWords } from './demand-ways.ts';

interface OneFlowProps {
  readonly reachable: Reachable;
  readonly design: Design;
  /** There and back; absent where a latency isn't known. */
  readonly rttUs: number | undefined;
  readonly lossPerMillion: number | undefined;
  readonly windowBytes: number | undefined;
}

const mostShown = 5;

/** What a single TCP flow reaches alone on its way, what holds it back first, and by which formula. */
export function OneFlow({ reachable, design, rttUs, lossPerMillion, windowBytes }: OneFlowProps) {
  const { oneFlow, manyFlows, windowNeededBytes, missing } = reachable;
  const [first] = oneFlow;
  const [many] = manyFlows;
  return (
    <section aria-label="TCP on this way" className="flex flex-col gap-6">
      <h3 className="text-base font-semibold text-ink">TCP on this way, alone</h3>
      <p className="text-base text-ink">
        {first === undefined
          ? 'No limit on the way is known, so nothing can be said.'
          : `A single flow reaches ${rateText(first.limitBps)}: ${ceilingWords(design, first)} holds it back.`}
        {many !== undefined && first !== undefined && many.limitBps > first.limitBps && (
          <> Many flows together reach {rateText(many.limitBps)}.</>
        )}
      </p>
      <ol className="border-t border-rule">
        {oneFlow.slice(0, mostShown).map((ceiling, at) => (
          <li key={`${ceiling.kind} ${at}`} className="flex gap-8 border-b border-rule py-4 text-base">
            <span className="min-w-0 flex-1">
              <span className={at === 0 ? 'font-semibold' : ''}>{ceilingWords(design, ceiling)}</span>
              <span className="block text-note text-ink-2">
                {formulaWords(ceiling.kind, { rttUs, lossPerMillion, windowBytes })}
              </span>
            </span>
            <span className="whitespace-nowrap">{rateText(ceiling.limitBps)}</span>
          </li>
        ))}
      </ol>
      {windowNeededBytes !== undefined && (
        <p className="text-note text-ink-2">
          To fill the way a flow needs a window of {bytesText(windowNeededBytes)}: its rate times the round
          trip. RFC 7323, section 1.1.
        </p>
      )}
      {windowBytes === undefined && (
        <p className="text-note text-ink-3">
          Reckoned without a window: type one above to see what it leaves.
        </p>
      )}
      {missing.length > 0 && (
        <p className="text-note text-ink-2">
          Not known: {missing.map((one) => missingWords(design, one)).join('; ')}.
        </p>
      )}
    </section>
  );
}

/** The formula of a ceiling with its figures in it, and where it comes from. */
const formulaWords = (
  kind: Ceiling['kind'],
  { rttUs, lossPerMillion, windowBytes }: Pick<OneFlowProps, 'rttUs' | 'lossPerMillion' | 'windowBytes'>,
): string => {
  if (kind === 'window' && windowBytes !== undefined && rttUs !== undefined)
    return `Window / round trip: ${bytesText(windowBytes)} / ${durationText(rttUs)}. RFC 7323, section 1.1.`;
  if (kind === 'loss' && lossPerMillion !== undefined && rttUs !== undefined)
    return `${TCP_LOSS_BOUND_CONSTANT} × segment / (round trip × √loss), with ${durationText(rttUs)} and ${lossText(lossPerMillion)}. RFC 3819, section 8.5.1.`;
  if (kind === 'port-speed') return 'Port speed, less what Ethernet and every header take of it.';
  if (kind === 'transport-rate') return 'Ordered rate, less what every header takes of it.';
  if (kind === 'one-cable') return 'A flow stays on one cable of an aggregate. IEEE 802.1AX, from memory.';
  return 'The equipment profile’s figure, less the headers of IP and TCP.';
};
