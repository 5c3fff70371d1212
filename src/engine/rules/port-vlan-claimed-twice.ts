import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { CircuitAt, Network, PortCircuit } from '../network/network.ts';
import { entryOf, portKey } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { portLabel, portRef } from './port-label.ts';
import { listed } from './wording.ts';

interface Claim {
  readonly at: CircuitAt;
  readonly circuit: PortCircuit;
}
/** Two circuits that both take some frames of a port. */
interface Clash {
  readonly device: Id;
  readonly port: Id;
  readonly first: Claim;
  readonly second: Claim;
  readonly shared: 'all' | 'untagged' | readonly number[];
}

const sharedBy = (a: PortCircuit['vlans'], b: PortCircuit['vlans']): Clash['shared'] | undefined => {
  if (a === 'all') return b;
  if (b === 'all') return a;
  if (a === 'untagged' || b === 'untagged') return a === b ? 'untagged' : undefined;
  const both = [...new Set(a)].filter((vlan) => b.includes(vlan)).sort((x, y) => x - y);
  return both.length > 0 ? both : undefined;
};

/** Ports of an aggregate are one port. */
const claimsByPort = (network: Network): ReadonlyMap<string, readonly Claim[]> => {
  const byPort = new Map<string, Claim[]>();
  for (const claims of network.circuitsByPort.values())
    for (const at of claims) {
      if (at.circuit.kind !== 'port') continue;
      const { aggregation } = entryOf(network.design.devices, at.device).ports[at.circuit.port]!;
      const key =
        aggregation === undefined ? portKey(at.device, at.circuit.port) : `${at.device} ${aggregation}`;
      const list = byPort.get(key);
      if (list === undefined) byPort.set(key, [{ at, circuit: at.circuit }]);
      else list.push({ at, circuit: at.circuit });
    }
  return byPort;
};

const clashesOf = (network: Network): readonly Clash[] =>
  [...claimsByPort(network).values()].flatMap((claims) =>
    claims.flatMap((first, i) =>
      claims.slice(i + 1).flatMap((second) => {
        const shared = sharedBy(first.circuit.vlans, second.circuit.vlans);
        const { device } = first.at;
        return shared === undefined ? [] : [{ device, port: first.circuit.port, first, second, shared }];
      }),
    ),
  );

const idsOf = ({ first, second }: Clash): readonly string[] =>
  [first, second].flatMap(({ at }) => [at.forwarder, at.id]);

const framesOf = (shared: Clash['shared']): string =>
  shared === 'all'
    ? 'All frames'
    : shared === 'untagged'
      ? 'Untagged frames'
      : `VLAN${shared.length === 1 ? '' : 's'} ${listed(shared.map(String))}`;

/** What takes the shared frames from a claim; nothing can for a claim on all frames beside one on some. */
const withdrawn = ({ at, circuit }: Claim, shared: Clash['shared']): MergePatch | undefined => {
  if (circuit.vlans === 'all' && shared !== 'all') return undefined;
  const left = Array.isArray(circuit.vlans)
    ? circuit.vlans.filter((vlan) => shared !== 'all' && !shared.includes(vlan as never))
    : [];
  return { [at.forwarder]: { circuits: { [at.id]: left.length === 0 ? null : { vlans: left } } } };
};

export const portVlanClaimedTwice = defineRule({
  id: 'port-vlan-claimed-twice',
  title: 'A VLAN of a port goes to one forwarder',
  severity: 'blocking',
  looksAt: ['forwarders', 'gateways'],
  why: 'A gateway refuses the second claim, or the frames go to one forwarder by chance and to the other not at all; where both get them two networks are merged.',
  seen: 'The device rejects the configuration, or one of the two segments is dead at this site, perhaps after the next restart the other one.',
  sources: ['common practice, no source'],
  messages: {
    forwarders: {
      words: 'claimed twice',
      sentence: (v: {
        readonly frames: string;
        readonly port: string;
        readonly first: string;
        readonly second: string;
        readonly verb: string;
      }) => `${v.frames} at ${v.port} ${v.verb} to both ${v.first} and ${v.second}`,
    },
    circuits: {
      words: 'claimed twice',
      sentence: (v: {
        readonly frames: string;
        readonly port: string;
        readonly first: string;
        readonly verb: string;
      }) => `${v.frames} at ${v.port} ${v.verb} to ${v.first} by two circuits`,
    },
  },
  check: (network) => {
    const { design } = network;
    return clashesOf(network).map((clash) => {
      const { device, port, first, second, shared } = clash;
      const [firstName, secondName] = [first, second].map(
        ({ at }) => entryOf(design.forwarders, at.forwarder).name,
      );
      const isOne = first.at.forwarder === second.at.forwarder;
      const frames = {
        frames: framesOf(shared),
        port: portLabel(design, device, port),
        verb: Array.isArray(shared) && shared.length === 1 ? 'goes' : 'go',
        first: firstName!,
      };
      const body = {
        elements: [
          portRef(device, port),
          ...[...new Set([first.at.forwarder, second.at.forwarder])].map((id) => ({
            collection: 'forwarders' as const,
            id,
          })),
        ],
        identity: idsOf(clash),
        basis: [shared],
        properties: [first, second].map(({ at }) => ({
          ref: { collection: 'forwarders' as const, id: at.forwarder },
          path: ['circuits', at.id, 'vlans'],
        })),
      };
      return isOne
        ? { message: 'circuits' as const, values: frames, ...body }
        : { message: 'forwarders' as const, values: { ...frames, second: secondName! }, ...body };
    });
  },
  fixes: (fault, network) => {
    const { design } = network;
    const clash = clashesOf(network).find((other) => idsOf(other).join(' ') === fault.identity?.join(' '))!;
    const isOne = clash.first.at.forwarder === clash.second.at.forwarder;
    return [
      { id: 'keep-first', keep: clash.first, drop: clash.second },
      { id: 'keep-second', keep: clash.second, drop: clash.first },
    ].flatMap(({ id, keep, drop }): readonly Fix[] => {
      const patch = withdrawn(drop, clash.shared);
      if (patch === undefined || (isOne && id === 'keep-second')) return [];
      const name = entryOf(design.forwarders, keep.at.forwarder).name;
      return [
        {
          id,
          label: isOne ? 'Keep one circuit' : `Leave it to ${name}`,
          sentence: isOne
            ? `Takes the second claim out of ${name}.`
            : `Takes the claim out of ${entryOf(design.forwarders, drop.at.forwarder).name}, so that ${name} alone has these frames.`,
          patch: { forwarders: patch },
        },
      ];
    });
  },
});
