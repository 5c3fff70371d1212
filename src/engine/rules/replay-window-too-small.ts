import { associationPath, landingOf } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

const usualMtuBytes = 1500;
const microsecondsPerSecond = 1_000_000;
const largestWindow = 65_536;

const smallest = (values: readonly (number | undefined)[]): number | undefined => {
  const known = values.filter((value) => value !== undefined);
  return known.length === 0 ? undefined : Math.min(...known);
};

/**
 * How many packets of full size may overtake a late one on the way to this end, at the highest rate stated for the way;
 * undefined where packets keep their order or a figure is missing. Smaller packets make it more, never less.
 */
const overtaking = (network: Network, id: string, end: End): number | undefined => {
  const path = associationPath(network, id);
  if (!path.ok) return undefined;
  const transport = network.design.transports[path.transport]!;
  if (transport.paths !== 'several' || transport.jitterUs === undefined) return undefined;
  const at = { a: landingOf(network, path.landingA), b: landingOf(network, path.landingB) };
  const rateBps = smallest([transport.rateBps, at[otherEnd(end)].rateUpBps, at[end].rateDownBps]);
  if (rateBps === undefined) return undefined;
  const packetBits = 8 * (transport.mtu ?? usualMtuBytes);
  return Math.floor((rateBps * transport.jitterUs) / microsecondsPerSecond / packetBits);
};

export const replayWindowTooSmall = defineRule({
  id: 'replay-window-too-small',
  title: 'The replay window is wider than the transport’s paths differ',
  severity: 'degrading',
  looksAt: ['associations', 'landings', 'transports', 'gateways', 'sites'],
  why: 'Over several paths packets overtake each other. One that arrives after more others than the window holds is taken for a replay and dropped.',
  seen: 'Losses under load that no port counts, while the replay counter of the receiving gateway rises; TCP stays slow.',
  sources: [{ document: 'RFC 4303', clause: 'section 3.4.3' }],
  messages: {
    small: {
      words: 'replay window small',
      sentence: (v: { readonly windowPackets: number; readonly place: string; readonly packets: number }) =>
        `Replay window ${v.windowPackets} at ${v.place}, but ${v.packets} packets may overtake`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.associations).flatMap(([id, association]) => {
      const places = associationPlaces(design, association);
      return ends.flatMap((end) => {
        const { replayWindow } = association[end];
        // Zero is no window at all, which another check tells.
        if (replayWindow === undefined || replayWindow === 0) return [];
        const packets = overtaking(network, id, end);
        if (packets === undefined || packets < replayWindow) return [];
        const ref = { collection: 'associations', id } as const;
        return [
          {
            message: 'small',
            values: { windowPackets: replayWindow, place: places[end], packets },
            elements: [ref],
            identity: [id, end],
            properties: [{ ref, path: [end, 'replayWindow'] }],
            basis: [replayWindow, packets],
          },
        ];
      });
    });
  },
  fixes: ({ identity, values }) => {
    const [id, end] = identity as readonly [string, string];
    const window = 2 ** Math.ceil(Math.log2(values.packets + 1));
    return window > largestWindow
      ? []
      : [
          {
            id: 'widen',
            label: `Window of ${window} packets`,
            sentence: `Sets the replay window at ${values.place} to ${window} packets; see that the gateway can.`,
            patch: { associations: { [id]: { [end]: { replayWindow: window } } } },
          },
        ];
  },
});
