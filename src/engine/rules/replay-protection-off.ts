import { associationPath } from '../network/association-path.ts';
import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';
import { isTrusted } from './trusted-transport.ts';

// RFC 4303 section 3.4.3: a window of 64 is preferred and should be the default; twice that gives queues some room.
const usualWindow = 128;

export const replayProtectionOff = defineRule({
  id: 'replay-protection-off',
  title: 'Gateways drop packets that they have seen before',
  severity: 'advisory',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'Whoever recorded a packet can send it again, and it is taken for new: frames enter the segment twice, or later when they fit the attacker.',
  seen: 'Nothing on site; hosts act on old commands, and nothing tells why.',
  sources: [{ document: 'RFC 4303', clause: 'section 3.4.3' }],
  messages: {
    off: {
      words: 'no replay check',
      sentence: (v: { readonly places: string; readonly association: string }) =>
        `No replay check on ${v.association} at ${v.places}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.associations).flatMap(([id, association]) => {
      const off = ends.filter((end) => association[end].replayWindow === 0);
      if (off.length === 0) return [];
      const places = associationPlaces(design, association);
      const path = associationPath(network, id);
      const isExposed = path.ok && !isTrusted(design.transports[path.transport]!);
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'off',
          values: {
            association: association.name,
            places: off.length === 2 ? 'both ends' : places[off[0]!],
          },
          elements: [ref],
          properties: off.map((end) => ({ ref, path: [end, 'replayWindow'] })),
          basis: off,
          ...(isExposed
            ? {
                severity: 'degrading' as const,
                severityReason: 'Strangers can record packets on this transport.',
              }
            : {}),
        },
      ];
    });
  },
  fixes: (fault, { design }) => {
    const { id } = fault.elements[0]!;
    const off = ends.filter((end) => design.associations[id]![end].replayWindow === 0);
    const known = ends
      .map((end) => design.associations[id]![end].replayWindow ?? 0)
      .find((window) => window > 0);
    const window = known ?? usualWindow;
    return [
      {
        id: 'on',
        label: `Window of ${window} packets`,
        sentence: `Lets ${fault.values.places} drop what was seen among the last ${window} packets.`,
        patch: {
          associations: { [id]: Object.fromEntries(off.map((end) => [end, { replayWindow: window }])) },
        },
      },
    ];
  },
});
