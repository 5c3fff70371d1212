import { defineRule } from './define-rule.ts';

export const pairWithoutStateSync = defineRule({
  id: 'pair-without-state-sync',
  title: 'The members of an HA pair share the state of its associations',
  severity: 'degrading',
  looksAt: ['gateways', 'associations'],
  why: 'The member that takes over knows no keys. Far ends go on sending into the old ones until they notice that nobody answers; then everything is negotiated anew.',
  seen: 'A failover that should take a second takes as long as the far ends’ liveness checks and a negotiation, for every site at once.',
  sources: [{ document: 'RFC 6027', clause: 'sections 3.2 to 3.5' }, { document: 'RFC 6311' }],
  messages: {
    unshared: {
      words: 'state not shared',
      sentence: (v: { readonly first: string; readonly second: string }) =>
        `${v.first} and ${v.second} don’t share IPsec state`,
    },
  },
  check: ({ design, deviceIds, associationsByDevice }) =>
    deviceIds.flatMap((id) => {
      const pair = design.devices[id]!;
      if (pair.kind !== 'ha-pair' || pair.stateSync !== false || !associationsByDevice.has(id)) return [];
      const ref = { collection: 'devices' as const, id };
      return [
        {
          message: 'unshared',
          values: { first: pair.memberNames[1], second: pair.memberNames[2] },
          elements: [ref],
          properties: [{ ref, path: ['stateSync'] }],
        },
      ];
    }),
  fixes: (fault) => [
    {
      id: 'share',
      label: 'Share the state',
      sentence: `States that ${fault.values.first} and ${fault.values.second} share the state of their associations; set it up at both.`,
      patch: { devices: { [fault.elements[0]!.id]: { stateSync: true } } },
    },
  ],
});
