import { ends, otherEnd } from '../network/network.ts';
import { tunnelFamily } from '../network/selectors-cover.ts';
import { defineRule } from './define-rule.ts';
import { tunnelPlaces } from './places.ts';

export const zeroChecksumRefused = defineRule({
  id: 'zero-checksum-refused',
  title: 'Over IPv6 an end that sends no UDP checksum meets one that takes such packets',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'gateways', 'sites'],
  why: 'Over IPv6 a UDP checksum of zero is an error unless the receiver was told to take it for this port.',
  seen: 'Packets arrive and are counted as checksum errors; nothing comes out of the tunnel in this direction.',
  sources: [
    { document: 'RFC 6935', clause: 'section 5' },
    { document: 'RFC 6936', clause: 'section 4' },
  ],
  messages: {
    refused: {
      words: 'checksum refused',
      sentence: (v: { readonly sender: string; readonly receiver: string }) =>
        `Zero UDP checksum from ${v.sender}, refused at ${v.receiver}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.tunnels).flatMap(([id, tunnel]) => {
      if (tunnelFamily(network, tunnel) !== 6) return [];
      const places = tunnelPlaces(design, tunnel);
      return ends.flatMap((end) => {
        const far = otherEnd(end);
        if (tunnel[end].udpChecksum !== 'zero' || tunnel[far].takesZeroChecksum !== false) return [];
        const ref = { collection: 'tunnels', id } as const;
        return [
          {
            message: 'refused',
            values: { sender: places[end], receiver: places[far] },
            elements: [ref],
            identity: [id, end],
            properties: [
              { ref, path: [end, 'udpChecksum'] },
              { ref, path: [far, 'takesZeroChecksum'] },
            ],
          },
        ];
      });
    });
  },
  fixes: (fault) => {
    const [id, end] = fault.identity as readonly [string, 'a' | 'b'];
    const { sender, receiver } = fault.values;
    return [
      {
        id: 'take',
        label: `Take it at ${receiver}`,
        sentence: `Lets ${receiver} take packets whose UDP checksum is zero.`,
        patch: { tunnels: { [id]: { [otherEnd(end)]: { takesZeroChecksum: true } } } },
      },
      {
        id: 'compute',
        label: `Compute it at ${sender}`,
        sentence: `Lets ${sender} compute UDP checksums.`,
        patch: { tunnels: { [id]: { [end]: { udpChecksum: 'computed' } } } },
      },
    ];
  },
});
