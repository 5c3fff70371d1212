import type { MergePatch } from '../model/merge-patch.ts';
import { applyPatch, joinPatches } from '../model/merge-patch.ts';
import { rankBetween } from '../model/rank.ts';
import { bareTunnelPath } from '../network/association-path.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { End, Network } from '../network/network.ts';
import { otherEnd } from '../network/network.ts';
import { endpointAddress, tunnelFamily } from '../network/selectors-cover.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { isHidden } from './other-path.ts';
import { tunnelDevices } from './places.ts';
import { coverPatch } from './selector-patch.ts';
import { strongEspProposal, strongIkeProposal, usualLiveness } from './strong-suite.ts';
import { isTrusted } from './trusted-transport.ts';

const freeAssociationId = ({ design }: Network, stem: string): string => {
  const base = stem.slice(0, 60);
  for (let n = 1; ; n += 1) {
    const id = n === 1 ? base : `${base}-${n}`;
    if (!Object.hasOwn(design.associations, id)) return id;
  }
};

const newAssociation = (network: Network, id: string): Fix[] => {
  const { design } = network;
  const tunnel = design.tunnels[id]!;
  const path = bareTunnelPath(network, id);
  const family = tunnelFamily(network, tunnel);
  if (!path.ok || family === undefined) return [];
  const devices = tunnelDevices(design, tunnel);
  const landing = { a: path.landingA, b: path.landingB };
  const rank = rankBetween(undefined, undefined);
  // An end that nobody can reach from outside has to send the first packet.
  const starter: End = isHidden(network, landing.b) && !isHidden(network, landing.a) ? 'b' : 'a';
  const bits = family === 4 ? 32 : 128;
  const end = (at: End): MergePatch => ({
    device: devices[at],
    via: { first: { rank, landing: landing[at] } },
    ikeVersion: 2,
    ikeProposals: { strong: strongIkeProposal },
    espProposals: { strong: strongEspProposal },
    selectors: {
      endpoints: {
        rank,
        local: `${endpointAddress(network, tunnel[at].endpoint, family)!}/${bits}`,
        remote: `${endpointAddress(network, tunnel[otherEnd(at)].endpoint, family)!}/${bits}`,
      },
    },
    start: at === starter ? 'starts' : 'answers',
    liveness: usualLiveness,
    perfectForwardSecrecy: true,
    mode: 'tunnel',
    whenDown: 'drop',
  });
  const association = freeAssociationId(network, `as-${devices.a}-${devices.b}`);
  return [
    {
      id: 'new-association',
      label: 'Protect it with IPsec',
      sentence: `Adds an association between ${design.devices[devices.a]!.name} and ${design.devices[devices.b]!.name} over ${design.transports[path.transport]!.name} with AES-GCM, and puts ${tunnel.name} inside; its authentication is left for you to enter.`,
      patch: {
        associations: { [association]: { name: association, a: end('a'), b: end('b') } },
        tunnels: { [id]: { association, a: { via: null }, b: { via: null } } },
      },
    },
  ];
};

export const tunnelBareOnUntrusted = defineRule({
  id: 'tunnel-bare-on-untrusted',
  title: 'Tunnels over transports that are not trusted run inside IPsec',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'landings', 'carriers', 'gateways', 'associations'],
  why: 'VXLAN neither hides nor authenticates anything: whoever is on the path reads every frame and can put more into the segment.',
  seen: 'Frames of the segment can be read in a capture anywhere on the transport; nothing else tells.',
  sources: [{ document: 'RFC 7348', clause: 'section 7' }],
  messages: {
    bare: {
      words: 'not protected',
      sentence: (v: { readonly tunnel: string; readonly transport: string }) =>
        `${v.tunnel} runs outside IPsec over ${v.transport}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.tunnels).flatMap(([id, tunnel]) => {
      if (tunnel.association !== undefined) return [];
      const devices = tunnelDevices(design, tunnel);
      if (devices.a === devices.b) return [];
      const path = bareTunnelPath(network, id);
      if (!path.ok || isTrusted(design.transports[path.transport]!)) return [];
      const ref = { collection: 'tunnels', id } as const;
      return [
        {
          message: 'bare',
          values: { tunnel: tunnel.name, transport: design.transports[path.transport]!.name },
          elements: [ref, { collection: 'transports', id: path.transport }],
          identity: [id],
          properties: [{ ref, path: ['association'] }],
          basis: [path.transport],
        },
      ];
    });
  },
  fixes: (fault, network) => {
    const { design } = network;
    const id = fault.elements[0]!.id;
    const tunnel = design.tunnels[id]!;
    const devices = tunnelDevices(design, tunnel);
    const existing = (network.associationsByDevice.get(devices.a) ?? [])
      .filter(({ association, end }) => design.associations[association]![otherEnd(end)].device === devices.b)
      .map(({ association }): Fix => {
        const { name } = design.associations[association]!;
        const inside: MergePatch = {
          tunnels: { [id]: { association, a: { via: null }, b: { via: null } } },
        };
        const covered = coverPatch(indexNetwork(applyPatch(design, inside)), [id]);
        return {
          id: `use-${association}`,
          label: `Put it inside ${name}`,
          sentence: `Lets ${name} carry ${tunnel.name}, with selectors for its endpoints.`,
          patch: joinPatches(design, [inside, covered]),
        };
      });
    return [...existing, ...newAssociation(network, id)];
  },
});
