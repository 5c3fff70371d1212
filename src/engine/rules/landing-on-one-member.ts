import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { associationPath, bareTunnelPath, landingOf } from '../network/association-path.ts';
import type { End, Network } from '../network/network.ts';
import { ends, entryOf, otherEnd } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationRunner, bareTunnelRunner, type Runner } from './other-path.ts';

/** What loses its path when the member that alone is plugged in gives up the active role. */
const stranded = (network: Network): ReadonlyMap<Id, readonly Runner[]> => {
  const { design } = network;
  const runners = [
    ...Object.keys(design.associations).map((id) => ({
      runner: associationRunner(network, id),
      path: associationPath(network, id),
    })),
    ...Object.keys(design.tunnels)
      .filter((id) => design.tunnels[id]!.association === undefined)
      .map((id) => ({ runner: bareTunnelRunner(network, id), path: bareTunnelPath(network, id) })),
  ];
  const mayUse = (runner: Runner, end: End): readonly Id[] => {
    const named = Object.values(runner.ends[end].via ?? {}).map(({ landing }) => landing);
    return named.length > 0 ? named : (network.landingsByDevice.get(runner.ends[end].device) ?? []);
  };
  const byLanding = new Map<Id, Runner[]>();
  for (const { runner, path } of runners) {
    if (!path.ok) continue;
    const used = { a: path.landingA, b: path.landingB };
    for (const end of ends) {
      const { device, members } = landingOf(network, used[end]);
      const pair = entryOf(design.devices, device);
      if (
        pair.kind !== 'ha-pair' ||
        pair.mode === 'active-active' ||
        members === undefined ||
        members === 'both'
      )
        continue;
      const far = new Set(mayUse(runner, otherEnd(end)).map((id) => landingOf(network, id).transport));
      const hasOther = mayUse(runner, end)
        .map((id) => landingOf(network, id))
        .some(
          (landing) => landing.device === device && landing.members !== members && far.has(landing.transport),
        );
      if (!hasOther) byLanding.set(used[end], [...(byLanding.get(used[end]) ?? []), runner]);
    }
  }
  return byLanding;
};

export const landingOnOneMember = defineRule({
  id: 'landing-on-one-member',
  title: 'Both members of an HA pair are plugged into the transport',
  severity: 'blocking',
  looksAt: ['landings', 'gateways', 'carriers', 'associations', 'tunnels', 'endpoints'],
  why: 'The member that takes over has the addresses and the keys, and no line to send them over.',
  seen: 'All is well until the pair fails over; then its outside line is dark and every association over it is down until it fails back.',
  sources: ['common practice, no source'],
  messages: {
    alone: {
      words: 'one member only',
      sentence: (v: { readonly member: string; readonly transport: string; readonly other: string }) =>
        `${v.member} alone lands on ${v.transport}, not ${v.other}`,
    },
  },
  check: (network) =>
    [...stranded(network)]
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .flatMap(([id, runners]) => {
        const { design } = network;
        const { device, members, transport } = landingOf(network, id);
        const pair = entryOf(design.devices, device);
        if (pair.kind !== 'ha-pair') return [];
        const member = members === '2' ? 2 : 1;
        const ref: ElementRef = { collection: 'links', id };
        return [
          {
            message: 'alone',
            values: {
              member: pair.memberNames[member],
              other: pair.memberNames[member === 1 ? 2 : 1],
              transport: entryOf(design.transports, transport).name,
            },
            elements: [
              ref,
              { collection: 'devices', id: device },
              ...runners
                .map((runner): ElementRef => ({ collection: runner.collection, id: runner.id }))
                .sort((a, b) => (`${a.collection} ${a.id}` < `${b.collection} ${b.id}` ? -1 : 1)),
            ],
            identity: [id],
            properties: [{ ref, path: ['members'] }],
            basis: [member],
            severityReason:
              'Nothing is wrong until the pair fails over; then all that runs over this line is down.',
          },
        ];
      }),
  fixes: (fault) => [
    {
      id: 'plug-both',
      label: 'Plug in both members',
      sentence: `Lets ${fault.values.member} and ${fault.values.other} both land on ${fault.values.transport}.`,
      patch: { links: { [fault.elements[0]!.id]: { members: null } } },
    },
  ],
});
