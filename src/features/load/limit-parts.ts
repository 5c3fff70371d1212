import type { Hop, HopLoad, Way } from '../../engine/load/carried-direction.ts';
import { gatewayLimits, hopLimits } from '../../engine/load/limits.ts';
import type { LoadReport } from '../../engine/load/load-of.ts';
import type { Network } from '../../engine/network/network.ts';

/** What one way of a demand puts on a limit or a tunnel. */
export interface LimitPart {
  readonly demand: string;
  readonly way: Way;
  /** Absent where its rate, its packets or what is put around them isn't known. */
  readonly load?: HopLoad;
  /** Which figure of the load the limit counts. */
  readonly measure: keyof HopLoad;
}

/** The measure by which a hop comes up against a key: a limit's, or a tunnel's one way. */
const measuresOf = (network: Network, hop: Hop, key: string): readonly (keyof HopLoad)[] => {
  const { crossing } = hop;
  const isTunnel =
    key === `${crossing.collection} ${crossing.id} ${crossing.from === 'a' ? 'a-to-b' : 'b-to-a'}` &&
    crossing.collection === 'tunnels';
  return isTunnel
    ? ['outerRateBps']
    : hopLimits(network, hop)
        .filter(({ limit }) => limit.key === key)
        .map(({ measure }) => measure);
};

/** The parts that add up on a limit, or in a tunnel one way; a gateway that handles a packet twice has two of it. */
export const limitParts = (network: Network, report: LoadReport, key: string): readonly LimitPart[] =>
  report.demands.flatMap(({ demand, forward, reverse }) =>
    (['forward', 'reverse'] as const).flatMap((way): readonly LimitPart[] => {
      const { direction } = way === 'forward' ? forward : reverse;
      if (direction.state !== 'carried') return [];
      const part = (hop: Hop, measure: keyof HopLoad): LimitPart => ({
        demand,
        way,
        ...(hop.load === undefined ? {} : { load: hop.load }),
        measure,
      });
      return [
        ...direction.hops.flatMap((hop) =>
          measuresOf(network, hop, key).map((measure) => part(hop, measure)),
        ),
        ...direction.work.flatMap((at) => {
          const { rate, packets, oneFlow } = gatewayLimits(network, at);
          const hop = direction.hops[at.hop]!;
          return [
            ...[rate, packets]
              .filter(({ limit }) => limit.key === key)
              .map(({ measure }) => part(hop, measure)),
            ...(oneFlow.limit.key === key ? [part(hop, 'innerRateBps')] : []),
          ];
        }),
      ];
    }),
  );
