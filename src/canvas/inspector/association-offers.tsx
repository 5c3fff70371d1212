import { Button } from '../../components/button.tsx';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import { negotiate, type Agreement } from '../../engine/network/negotiate.ts';
import { ends, otherEnd, type End } from '../../engine/network/network.ts';
import { proposalName, type EspProposal, type IkeProposal } from '../../engine/rules/algorithm-names.ts';
import { listed } from '../../engine/rules/wording.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { useNetwork } from './carried-segments.tsx';
import type { EndHead } from './mirror.tsx';
import { ProposalList } from './proposal-list.tsx';
import { Section } from './section.tsx';
import { SelectorList } from './selector-list.tsx';
import { useCommit, useEditable } from './use-field.ts';

export type Heads = { readonly [E in End]: EndHead };

const agreementWords = (agreement: Agreement<IkeProposal | EspProposal>): string => {
  if (agreement.state === 'agreed') return `Both ends settle on ${proposalName(agreement.proposal)}.`;
  if (agreement.state === 'unknown') return 'An end does not say what it proposes.';
  return agreement.parts.length === 0
    ? 'No proposal of one end fits one of the other as a whole.'
    : `The ends have no ${listed(agreement.parts)} in common.`;
};

export function Proposals({
  id,
  layer,
  heads,
}: {
  readonly id: string;
  readonly layer: 'ike' | 'esp';
  readonly heads: Heads;
}) {
  const document = useOpenState((state) => state.document);
  const editable = useEditable();
  const commit = useCommit();
  const association = document.associations[id];
  if (association === undefined) return null;
  const field = layer === 'ike' ? 'ikeProposals' : 'espProposals';
  const word = layer === 'ike' ? 'IKE' : 'ESP';
  const agreement = negotiate(association)[layer];
  return (
    <Section
      title={`${word} proposals`}
      open={agreement.state === 'differ'}
      about={ends.map((end) => ['associations', id, end, field])}
    >
      <p className={agreement.state === 'differ' ? 'text-note text-red' : 'text-note text-ink-2'}>
        {agreementWords(agreement)}
      </p>
      {ends.map((end) => (
        <div key={end} className="flex flex-col gap-4">
          <h4 className="text-note text-ink-2">{heads[end].place}</h4>
          <ProposalList path={['associations', id, end, field]} layer={layer} place={heads[end].place} />
          {editable && association[otherEnd(end)][field] !== undefined && (
            <Button
              kind="quiet"
              small
              className="self-start"
              onClick={() =>
                commit(
                  `${word} proposals of ${association.name} at ${heads[end].place}`,
                  joinPatches(document, [
                    patchAt(['associations', id, end, field], null),
                    patchAt(['associations', id, end, field], association[otherEnd(end)][field]),
                  ]),
                )
              }
            >
              Take over from {heads[otherEnd(end)].place}
            </Button>
          )}
        </div>
      ))}
    </Section>
  );
}

export function Selectors({ id, heads }: { readonly id: string; readonly heads: Heads }) {
  const network = useNetwork();
  const association = network.design.associations[id]!;
  const loopback = (device: string): string => {
    const endpoint = network.design.endpoints[network.endpointsByDevice.get(device)?.[0] ?? ''];
    return endpoint?.ipv4 ?? endpoint?.ipv6 ?? '0.0.0.0/0';
  };
  return (
    <Section title="Selectors" open={false} about={ends.map((end) => ['associations', id, end, 'selectors'])}>
      {ends.map((end) => (
        <div key={end} className="flex flex-col gap-4">
          <h4 className="text-note text-ink-2">{heads[end].place}</h4>
          <SelectorList
            path={['associations', id, end, 'selectors']}
            place={heads[end].place}
            suggested={{
              local: loopback(association[end].device),
              remote: loopback(association[otherEnd(end)].device),
            }}
          />
        </div>
      ))}
    </Section>
  );
}
