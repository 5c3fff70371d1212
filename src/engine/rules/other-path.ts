import type { Entry } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankBetween } from '../model/rank.ts';
import type { Path } from '../network/association-path.ts';
import { landingFamilies, landingOf, landingSpeaks } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends } from '../network/network.ts';
import type { Fix } from './finding.ts';

type Via = Entry<'tunnels'>['a']['via'];
/** What has a path: an association, or a tunnel outside IPsec. */
export interface Runner {
  readonly collection: 'associations' | 'tunnels';
  readonly id: string;
  readonly name: string;
  readonly ends: { readonly [E in End]: { readonly device: string; readonly via: Via } };
}
type Landings = { readonly a: string; readonly b: string };

/** True when nobody outside can send this landing a first packet. */
export const isHidden = (network: Network, landing: string): boolean => {
  const { dynamic, dynamicName, nat } = landingOf(network, landing);
  return (dynamic === true && dynamicName === undefined) || (nat !== undefined && nat.forwarded !== true);
};

const meets = (network: Network, { a, b }: Landings): boolean =>
  landingOf(network, a).transport === landingOf(network, b).transport &&
  landingFamilies(network, a).some((family) => landingFamilies(network, b).includes(family));

const putFirst = (via: Via, landing: string): MergePatch => {
  const steps = inRankOrder(via);
  const first = steps[0]?.[1].rank;
  const known = steps.find(([, step]) => step.landing === landing);
  if (known !== undefined && known === steps[0]) return {};
  const rank = rankBetween(undefined, first);
  const id =
    known?.[0] ??
    Array.from({ length: steps.length + 1 }, (_, n) => `step-${n + 1}`).find(
      (free) => !Object.hasOwn(via ?? {}, free),
    )!;
  return { via: { [id]: { rank, landing } } };
};

/** Changes that lead an association or tunnel over other landings that meet, where `suits` holds of them. */
export const otherPathFixes = (
  network: Network,
  runner: Runner,
  current: Path,
  suits: (landings: Landings) => boolean = () => true,
): readonly Fix[] => {
  const at = (end: End): readonly string[] =>
    (network.landingsByDevice.get(runner.ends[end].device) ?? []).filter((id) => landingSpeaks(network, id));
  return at('a').flatMap((a) =>
    at('b')
      .map((b): Landings => ({ a, b }))
      .filter((pair) => !(current.ok && current.landingA === pair.a && current.landingB === pair.b))
      .filter((pair) => meets(network, pair) && suits(pair))
      .map((pair): Fix => {
        const transport = network.design.transports[landingOf(network, pair.a).transport]!;
        const ports = ends.map((end) => {
          const { device, port } = landingOf(network, pair[end]);
          const entry = network.design.devices[device]!;
          return `${entry.ports[port]!.name ?? `port ${entry.ports[port]!.number}`} of ${entry.name}`;
        });
        return {
          id: `via-${pair.a}-${pair.b}`,
          label: `Use ${transport.name}`,
          sentence: `Leads ${runner.name} over ${transport.name}, from ${ports[0]!} to ${ports[1]!}.`,
          patch: {
            [runner.collection]: {
              [runner.id]: {
                a: putFirst(runner.ends.a.via, pair.a),
                b: putFirst(runner.ends.b.via, pair.b),
              },
            },
          },
        };
      }),
  );
};

export const associationRunner = ({ design }: Network, id: string): Runner => {
  const { name, a, b } = design.associations[id]!;
  return {
    collection: 'associations',
    id,
    name,
    ends: { a: { device: a.device, via: a.via }, b: { device: b.device, via: b.via } },
  };
};

export const bareTunnelRunner = ({ design }: Network, id: string): Runner => {
  const { name, a, b } = design.tunnels[id]!;
  return {
    collection: 'tunnels',
    id,
    name,
    ends: {
      a: { device: design.endpoints[a.endpoint]!.device, via: a.via },
      b: { device: design.endpoints[b.endpoint]!.device, via: b.via },
    },
  };
};
