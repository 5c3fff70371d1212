import { inRankOrder } from '../model/rank.ts';
import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { childGroups, hasForwardSecrecy } from './forward-secrecy.ts';
import { strongEspProposal } from './strong-suite.ts';

export const forwardSecrecyOff = defineRule({
  id: 'forward-secrecy-off',
  title: 'Child keys are renewed by an exchange of their own',
  severity: 'advisory',
  looksAt: ['associations'],
  why: 'Without it every child key comes from the one IKE key: whoever learns that reads all that was recorded under it.',
  seen: 'Nothing on site; recorded traffic becomes readable if a gateway’s memory is ever read out.',
  // RFC 7296 section 2.12: new exchanges limit what a lost key gives away.
  sources: [{ document: 'RFC 7296', clause: 'section 2.12' }],
  messages: {
    off: {
      words: 'no forward secrecy',
      sentence: (v: { readonly association: string }) =>
        `${v.association} renews child keys without forward secrecy`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.associations).flatMap(([id, association]) => {
      if (!ends.every((end) => hasForwardSecrecy(association, end) === false)) return [];
      const ref = { collection: 'associations', id } as const;
      return [
        {
          message: 'off',
          values: { association: association.name },
          elements: [ref],
          properties: ends.map((end) => ({ ref, path: [end, 'perfectForwardSecrecy'] })),
        },
      ];
    }),
  fixes: ({ elements, values }, { design }) => {
    const { id } = elements[0]!;
    const association = design.associations[id]!;
    const group =
      childGroups(association, 'a').find((each) => childGroups(association, 'b').includes(each)) ??
      strongEspProposal.group;
    return [
      {
        id: 'on',
        label: 'Turn it on at both ends',
        sentence: `Lets both ends of ${values.association} renew child keys with group ${group}.`,
        patch: {
          associations: {
            [id]: Object.fromEntries(
              ends.map((end) => [
                end,
                {
                  perfectForwardSecrecy: true,
                  espProposals: Object.fromEntries(
                    inRankOrder(association[end].espProposals).map(([proposal]) => [proposal, { group }]),
                  ),
                },
              ]),
            ),
          },
        },
      },
    ];
  },
});
