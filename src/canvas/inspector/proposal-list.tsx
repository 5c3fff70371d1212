import { CellGrid } from '../../components/cell.tsx';
import type { DeepReadonly } from '../../engine/model/design.ts';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import {
  espEncryptions,
  integrities,
  keyExchangeGroups,
  prfs,
  type EspProposal,
  type IkeProposal,
} from '../../engine/model/overlay.ts';
import { espTransforms } from '../../engine/reference/esp.ts';
import { keyExchangeGroupNames } from '../../engine/reference/key-exchange-groups.ts';
import { encryptionName, integrityName, prfName, proposalName } from '../../engine/rules/algorithm-names.ts';
import { strongEspProposal, strongIkeProposal } from '../../engine/rules/strong-suite.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import type { FieldPath } from './field-marks.ts';
import { SelectField } from './fields.tsx';
import { OrderedList } from './ordered-list.tsx';
import { useCommit } from './use-field.ts';

type Encryption = IkeProposal['encryption'];
type Proposal = DeepReadonly<IkeProposal | EspProposal>;

const groupLabel = (group: number): string => `${group}: ${keyExchangeGroupNames[group] ?? ''}`;

const encryptionChoices = espEncryptions.map((value) => ({ value, label: encryptionName(value) }));
const integrityChoices = integrities.map((value) => ({ value, label: integrityName(value) }));
const prfChoices = prfs.map((value) => ({ value, label: prfName(value) }));
const groupChoices = keyExchangeGroups.map((value) => ({ value, label: groupLabel(value) }));

/** What one end of an association proposes, in its order of preference. */
export function ProposalList({
  path,
  layer,
  place,
}: {
  readonly path: FieldPath;
  readonly layer: 'ike' | 'esp';
  readonly place: string;
}) {
  const isIke = layer === 'ike';
  return (
    <OrderedList<Proposal>
      path={path}
      noun={isIke ? 'IKE proposal' : 'ESP proposal'}
      of={place}
      empty="not stated"
      titleOf={(proposal) => proposalName(proposal)}
      fresh={[
        {
          label: 'Add a proposal',
          entry: () => (isIke ? strongIkeProposal : strongEspProposal),
        },
      ]}
    >
      {(proposal, _id, at) => <ProposalFields proposal={proposal} path={at} isIke={isIke} place={place} />}
    </OrderedList>
  );
}

function ProposalFields({
  proposal,
  path,
  isIke,
  place,
}: {
  readonly proposal: Proposal;
  readonly path: FieldPath;
  readonly isIke: boolean;
  readonly place: string;
}) {
  const document = useOpenState((state) => state.document);
  const commit = useCommit();
  const { aead, keyBits } = espTransforms[proposal.encryption];
  const keyChoices = ([128, 192, 256] as const).filter((bits) =>
    (keyBits as readonly number[]).includes(bits),
  );
  const chooseEncryption = (encryption: Encryption | undefined): void => {
    if (encryption === undefined) return;
    const next = espTransforms[encryption];
    const keyFits = (next.keyBits as readonly number[]).includes(proposal.keyBits ?? 0);
    commit(
      `Encryption at ${place}`,
      joinPatches(document, [
        patchAt([...path, 'encryption'], encryption),
        ...(keyFits ? [] : [patchAt([...path, 'keyBits'], null)]),
        // A combined-mode transform protects integrity itself.
        ...(next.aead ? [patchAt([...path, 'integrity'], null)] : []),
      ]),
    );
  };
  const at = (field: string) => [...path, field];
  return (
    <CellGrid columns="minmax(0, 2fr) minmax(0, 1fr)">
      <SelectField
        label="Encryption"
        place={place}
        path={at('encryption')}
        span={keyChoices.length > 0 ? 1 : 2}
        required
        choices={encryptionChoices}
        onChoose={chooseEncryption}
      />
      {keyChoices.length > 0 && (
        <SelectField
          label="Key"
          place={place}
          path={at('keyBits')}
          choices={keyChoices.map((bits) => ({ value: bits, label: `${bits} bits` }))}
        />
      )}
      {!aead && (
        <SelectField
          label="Integrity"
          span={2}
          place={place}
          path={at('integrity')}
          choices={integrityChoices}
        />
      )}
      {isIke && <SelectField label="PRF" span={2} place={place} path={at('prf')} choices={prfChoices} />}
      <SelectField
        label="Group"
        place={place}
        path={at('group')}
        span={2}
        required={isIke}
        choices={groupChoices}
        emptyWord="no exchange of its own"
      />
    </CellGrid>
  );
}
