import { associationPath, landingOf } from '../network/association-path.ts';
import { defineRule } from './define-rule.ts';
import { counted, listed } from './wording.ts';

export const activeActiveSharesAssociation = defineRule({
  id: 'active-active-shares-association',
  title: 'Only one member of a pair sends under the keys of an association',
  severity: 'blocking',
  looksAt: ['gateways', 'associations', 'landings', 'carriers'],
  why: 'Both members count packets from their own last number. The peer takes the slower one’s packets for replays, and with counter-based encryption the same number under the same key gives both packets away.',
  seen: 'About half of the traffic is missing, and the peer’s replay counter rises with every packet of one member.',
  sources: [
    { document: 'RFC 4303', clause: 'section 2.2' },
    { document: 'RFC 6027', clause: 'section 3.7' },
    { document: 'RFC 6311', clause: 'section 3.4' },
  ],
  messages: {
    shared: {
      words: 'keys shared',
      sentence: (v: { readonly pair: string; readonly associations: string }) =>
        `Both members of ${v.pair} send on ${v.associations}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return network.deviceIds.flatMap((id) => {
      const device = design.devices[id]!;
      if (device.kind !== 'ha-pair' || device.mode !== 'active-active') return [];
      const shared = (network.associationsByDevice.get(id) ?? []).filter(({ association, end }) => {
        const path = associationPath(network, association);
        if (!path.ok) return false;
        const { members } = landingOf(network, end === 'a' ? path.landingA : path.landingB);
        return members === undefined || members === 'both';
      });
      if (shared.length === 0) return [];
      const ref = { collection: 'devices', id } as const;
      const refs = shared.map(({ association }) => ({
        collection: 'associations' as const,
        id: association,
      }));
      return [
        {
          message: 'shared',
          values: {
            pair: device.name,
            associations:
              refs.length > 2
                ? counted(refs.length, 'association', 'associations')
                : listed(refs.map((each) => design.associations[each.id]!.name)),
          },
          elements: [ref, ...refs],
          identity: [id],
          properties: [{ ref, path: ['mode'] }],
          basis: refs.map((each) => each.id),
        },
      ];
    });
  },
  fixes: ({ elements, values }) => [
    {
      id: 'standby',
      label: 'One active member',
      sentence: `Lets one member of ${values.pair} forward while the other stands by.`,
      patch: { devices: { [elements[0]!.id]: { mode: 'active-standby' } } },
    },
  ],
});
