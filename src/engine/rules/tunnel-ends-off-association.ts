import type { End } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { associationPlaces, tunnelDevices } from './places.ts';
import { listed } from './wording.ts';

export const tunnelEndsOffAssociation = defineRule({
  id: 'tunnel-ends-off-association',
  title: 'A tunnel ends on the two devices that its association joins',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'associations', 'gateways', 'sites', 'landings', 'carriers'],
  why: 'An association carries packets between its two devices only. A tunnel that ends elsewhere finds no way into it and leaves unprotected, or not at all.',
  seen: 'The association is up and idle; the tunnel’s packets are missing from it and may turn up in clear on the WAN port.',
  sources: [{ document: 'RFC 4301', clause: 'section 4.4.1' }],
  messages: {
    oneOff: {
      words: 'ends off association',
      sentence: (v: {
        readonly tunnel: string;
        readonly device: string;
        readonly association: string;
        readonly placeA: string;
        readonly placeB: string;
      }) => `${v.tunnel} ends on ${v.device}, off ${v.association}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...tunnelStates(network)].flatMap(([id, { reasons }]) => {
      const tunnel = design.tunnels[id]!;
      if (tunnel.association === undefined) return [];
      const association = design.associations[tunnel.association]!;
      const devices = tunnelDevices(design, tunnel);
      const off = reasons.flatMap((reason): readonly End[] => {
        if (reason.code === 'ends-off-association') return reason.ends;
        if (reason.code !== 'ends-on-one-device') return [];
        return [association.a.device, association.b.device].includes(reason.device) ? ['b'] : ends;
      });
      if (off.length === 0) return [];
      const places = associationPlaces(design, association);
      const ref = { collection: 'tunnels', id } as const;
      return [
        {
          message: 'oneOff',
          values: {
            tunnel: tunnel.name,
            device: listed([...new Set(off.map((end) => design.devices[devices[end]]!.name))]),
            association: association.name,
            placeA: places.a,
            placeB: places.b,
          },
          elements: [ref, { collection: 'associations', id: tunnel.association }],
          identity: [id],
          properties: [
            { ref, path: ['association'] },
            ...off.map((end) => ({ ref, path: [end, 'endpoint'] })),
          ],
          basis: [tunnel.association, devices.a, devices.b],
          mark: { kind: 'cut', tunnel: id },
        },
      ];
    });
  },
  fixes: (fault, { design, endpointsByDevice }) => {
    const id = fault.elements[0]!.id;
    const tunnel = design.tunnels[id]!;
    const devices = tunnelDevices(design, tunnel);
    const fixes: Fix[] = Object.entries(design.associations)
      .filter(
        ([, { a, b }]) =>
          (a.device === devices.a && b.device === devices.b) ||
          (a.device === devices.b && b.device === devices.a),
      )
      .map(([association, { name }]) => ({
        id: `use-${association}`,
        label: `Use ${name}`,
        sentence: `Lets ${name}, which joins the devices of ${tunnel.name}, protect it.`,
        patch: { tunnels: { [id]: { association } } },
      }));
    const { a, b } = design.associations[tunnel.association!]!;
    const joined = [a.device, b.device];
    const isOff = (end: End): boolean =>
      fault.properties?.some(({ path }) => path[0] === end && path[1] === 'endpoint') === true;
    for (const end of ends.filter(isOff)) {
      const far = devices[otherEnd(end)];
      const target = joined.find((device) => device !== far);
      if (!joined.includes(far) || target === undefined) continue;
      for (const endpoint of endpointsByDevice.get(target) ?? [])
        fixes.push({
          id: `end-${end}-on-${endpoint}`,
          label: `End it at ${design.endpoints[endpoint]!.name}`,
          sentence: `Moves the end of ${tunnel.name} from ${design.devices[devices[end]]!.name} to ${design.endpoints[endpoint]!.name} on ${design.devices[target]!.name}.`,
          patch: { tunnels: { [id]: { [end]: { endpoint } } } },
        });
    }
    return fixes;
  },
});
