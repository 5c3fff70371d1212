import type { NoPath } from '../network/association-path.ts';
import { landingOf } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import type { JsonValue, Fix } from './finding.ts';
import type { Runner } from './other-path.ts';
import { otherPathFixes } from './other-path.ts';
import { placesOf } from './places.ts';
import { listed } from './wording.ts';

interface AtOneEnd {
  readonly runner: string;
  readonly place: string;
}

/** How the two rules about paths say why there is none. */
export const noPathMessages = {
  noLanding: {
    words: 'no WAN port',
    sentence: (v: AtOneEnd) => `No path: ${v.place} has no WAN port on any transport`,
  },
  offDevice: {
    words: 'no common path',
    sentence: (v: AtOneEnd) => `No path: ${v.place} names only WAN ports of other devices`,
  },
  shut: {
    words: 'WAN port shut',
    sentence: (v: AtOneEnd) => `No path: every WAN port it may use at ${v.place} is shut`,
  },
  standby: {
    words: 'WAN port silent',
    sentence: (v: AtOneEnd) => `No path: the active member at ${v.place} has no open WAN port`,
  },
  noTransport: {
    words: 'no common path',
    sentence: (v: {
      readonly runner: string;
      readonly placeA: string;
      readonly transportsA: string;
      readonly placeB: string;
      readonly transportsB: string;
    }) => `No path: ${v.placeA} on ${v.transportsA}, ${v.placeB} on ${v.transportsB}`,
  },
  noFamily: {
    words: 'no common family',
    sentence: (v: { readonly runner: string; readonly transports: string }) =>
      `No path: no common address family on ${v.transports}`,
  },
} as const;

type Said =
  | {
      readonly message: 'noLanding' | 'offDevice' | 'shut' | 'standby';
      readonly values: AtOneEnd & { readonly [name: string]: JsonValue };
    }
  | {
      readonly message: 'noTransport';
      readonly values: Parameters<(typeof noPathMessages)['noTransport']['sentence']>[0] & {
        readonly [name: string]: JsonValue;
      };
    }
  | {
      readonly message: 'noFamily';
      readonly values: Parameters<(typeof noPathMessages)['noFamily']['sentence']>[0] & {
        readonly [name: string]: JsonValue;
      };
    };

/** Which message says why there is no path, with its values. */
export const sayNoPath = (network: Network, runner: Runner, reason: NoPath): Said => {
  const { design } = network;
  const places = placesOf(design, runner.ends.a.device, runner.ends.b.device);
  const names = (transports: readonly string[]): string =>
    listed(transports.map((id) => design.transports[id]!.name));
  switch (reason.code) {
    case 'no-landing':
      return { message: 'noLanding', values: { runner: runner.name, place: places[reason.end] } };
    case 'via-off-device':
      return { message: 'offDevice', values: { runner: runner.name, place: places[reason.end] } };
    case 'landing-silent': {
      const areShut = reason.landings.every((id) => {
        const { device, port } = landingOf(network, id);
        return design.devices[device]!.ports[port]?.shut === true;
      });
      return {
        message: areShut ? 'shut' : 'standby',
        values: { runner: runner.name, place: places[reason.end] },
      };
    }
    case 'no-common-transport':
      return {
        message: 'noTransport',
        values: {
          runner: runner.name,
          placeA: places.a,
          transportsA: names(reason.a),
          placeB: places.b,
          transportsB: names(reason.b),
        },
      };
    case 'no-common-family':
      return {
        message: 'noFamily',
        values: { runner: runner.name, transports: names(reason.transports) },
      };
  }
};

/** Changes that may give the association or tunnel a path. */
export const noPathFixes = (network: Network, runner: Runner, reason: NoPath): readonly Fix[] => {
  const fixes = otherPathFixes(network, runner, { ok: false, reason });
  if (reason.code !== 'landing-silent') return fixes;
  const { design } = network;
  return [
    ...reason.landings.map((id): Fix => {
      const { device, port } = landingOf(network, id);
      const entry = design.devices[device]!;
      const name = entry.ports[port]!.name ?? `port ${entry.ports[port]!.number}`;
      return entry.ports[port]!.shut === true
        ? {
            id: `open-${id}`,
            label: `Open ${name}`,
            sentence: `Opens ${name} of ${entry.name}.`,
            patch: { devices: { [device]: { ports: { [port]: { shut: null } } } } },
          }
        : {
            id: `plug-${id}`,
            label: 'Plug in both members',
            sentence: `Plugs ${name} of both members of ${entry.name} into the transport.`,
            patch: { links: { [id]: { members: null } } },
          };
    }),
    ...fixes,
  ];
};
