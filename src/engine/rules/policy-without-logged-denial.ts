import type { Entry } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { inRankOrder, rankAtEnd } from '../model/rank.ts';
import { defineRule } from './define-rule.ts';
import { permittedCrossConnectFacts, permittedCrossConnects } from './permitted-cross-connects.ts';
import { siteNameOf } from './places.ts';
import { unusedId } from './unused-id.ts';
import { counted, sentenceCase } from './wording.ts';

/** Whether what no other rule permits is denied by a rule that writes it down. */
const endsLogged = (policy: Entry<'forwarders'>['policy']): boolean => {
  const last = inRankOrder(policy).at(-1)?.[1];
  return (
    last?.action === 'deny' &&
    last.log === true &&
    last.direction === 'both' &&
    last.frames === 'any' &&
    last.sources === undefined &&
    last.destinations === undefined &&
    last.protocol === undefined &&
    last.ports === undefined
  );
};

export const policyWithoutLoggedDenial = defineRule({
  id: 'policy-without-logged-denial',
  title: 'A policy ends with a denial that is logged',
  severity: 'advisory',
  looksAt: permittedCrossConnectFacts,
  why: 'What no rule permits is dropped anyway. Only a last rule that logs shows what it was.',
  seen: 'Something doesn’t work across the tunnel, and no log tells whether the filter dropped it.',
  sources: ['common practice, no source'],
  messages: {
    unlogged: {
      words: 'drops not logged',
      sentence: (v: { readonly count: number; readonly forwarder: string; readonly place: string }) =>
        v.count === 1
          ? `${v.forwarder} at ${v.place} drops the rest without a log`
          : `${sentenceCase(counted(v.count, 'policy drops', 'policies drop'))} the rest without a log`,
    },
  },
  check: (network) => {
    const all = permittedCrossConnects(network).filter(({ forwarder }) => !endsLogged(forwarder.policy));
    const [first] = all;
    if (first === undefined) return [];
    const refs = all.map(({ id }) => ({ collection: 'forwarders' as const, id }));
    return [
      {
        message: 'unlogged',
        values: {
          count: all.length,
          forwarder: first.forwarder.name,
          place: siteNameOf(network.design, first.forwarder.device),
        },
        elements: refs,
        identity: ['design'],
        properties: refs.map((ref) => ({ ref, path: ['policy'] })),
        basis: refs.map(({ id }) => id),
      },
    ];
  },
  fixes: (fault, { design }) => [
    {
      id: 'deny-rest',
      label: 'Deny and log the rest',
      sentence: 'Ends each of these policies with a rule that denies and logs everything else.',
      patch: {
        forwarders: Object.fromEntries(
          fault.elements.map(({ id }) => {
            const { policy } = design.forwarders[id]!;
            const rest: MergePatch = {
              rank: rankAtEnd(policy),
              name: 'Everything else',
              action: 'deny',
              direction: 'both',
              frames: 'any',
              log: true,
            };
            return [id, { policy: { [unusedId(policy ?? {}, 'rest')]: rest } }];
          }),
        ),
      },
    },
  ],
});
