import type { Entry } from '../../engine/model/design.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { associationPath } from '../../engine/network/association-path.ts';
import { canComeUp } from '../../engine/network/can-come-up.ts';
import { ends, otherEnd, type End } from '../../engine/network/network.ts';
import { Proposals, Selectors, type Heads } from './association-offers.tsx';
import { usualLiveness } from '../../engine/rules/strong-suite.ts';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { useNetwork } from './carried-segments.tsx';
import { lifetime } from '../../lib/duration-text.ts';
import { ElementLink, ElementList } from './element-link.tsx';
import { endHeads } from './end-heads.ts';
import { LongTextField, SelectField, TextField, Unknown, YesNoField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { Mirror, MirrorRow } from './mirror.tsx';
import { PanelHead } from './panel-head.tsx';
import { Section } from './section.tsx';
import { useCommit } from './use-field.ts';
import { ViaList } from './via-list.tsx';
import { wholeNumber } from '../../lib/written-value.ts';

type Association = Entry<'associations'>;

const count = wholeNumber();
const ikeVersions = [
  { value: 2, label: 'IKEv2' },
  { value: 1, label: 'IKEv1' },
] as const;
const methods = [
  { value: 'certificate', label: 'certificate' },
  { value: 'pre-shared-key', label: 'shared key' },
] as const;
const starts = [
  { value: 'starts', label: 'starts' },
  { value: 'on-traffic', label: 'on traffic' },
  { value: 'answers', label: 'answers' },
] as const;
const modes = [
  { value: 'tunnel', label: 'tunnel' },
  { value: 'transport', label: 'transport' },
] as const;
const outerDf = [
  { value: 'set', label: 'set' },
  { value: 'clear', label: 'clear' },
  { value: 'copy', label: 'copied' },
] as const;
const whenDown = [
  { value: 'drop', label: 'dropped' },
  { value: 'clear', label: 'in clear' },
] as const;
const livenessStates = [
  { value: 'on', label: 'checked' },
  { value: 'off', label: 'off' },
] as const;

const renewalFields = [
  'liveness',
  'ikeLifetimeSeconds',
  'childLifetimeSeconds',
  'perfectForwardSecrecy',
  'extendedSequence',
  'replayWindow',
  'natKeepaliveSeconds',
] as const;

/** An IPsec association: whether it can come up, both ends side by side, proposals, selectors and its tunnels. */
export function AssociationPanel({ id }: { readonly id: string }) {
  const network = useNetwork();
  const association = network.design.associations[id];
  if (association === undefined) return null;
  const ref = { collection: 'associations', id } as const;
  const heads = endHeads(network.design, association.a.device, association.b.device);
  const tunnels = network.tunnelsByAssociation.get(id) ?? [];
  return (
    <>
      <PanelHead of={ref} namePath={['associations', id, 'name']} />
      <Outcome id={id} />
      <Mirror label="Both ends" entry={['associations', id]} heads={heads}>
        <IdentityRows id={id} association={association} heads={heads} />
      </Mirror>
      <p className="text-note text-ink-2">
        IKE fragmentation: IKE cuts its long messages itself, so that none crosses as IP fragments. While
        down: what becomes of the tunnels’ packets while there are no keys.
      </p>
      <Identities id={id} association={association} heads={heads} />
      <FindingBoxes about={ref} />
      <Section title={`Tunnels (${tunnels.length})`}>
        <ElementList
          of={tunnels.map((tunnel) => ({ collection: 'tunnels', id: tunnel }))}
          empty="It carries none yet."
        />
      </Section>
      <Proposals id={id} layer="ike" heads={heads} />
      <Proposals id={id} layer="esp" heads={heads} />
      <Selectors id={id} heads={heads} />
      <Section title="Ways out" open={false} about={ends.map((end) => ['associations', id, end, 'via'])}>
        <p className="text-note text-ink-2">
          The first pair of landings on one transport carries the association; the others stand by.
        </p>
        {ends.map((end) => (
          <ViaList
            key={end}
            path={['associations', id, end, 'via']}
            device={association[end].device}
            place={heads[end].place}
          />
        ))}
      </Section>
      <Section
        title="Keeping alive and renewing"
        open={false}
        about={ends.flatMap((end) => renewalFields.map((field) => ['associations', id, end, field]))}
      >
        <Mirror label="Keeping alive and renewing" entry={['associations', id]} heads={heads}>
          <RenewalRows id={id} association={association} heads={heads} />
        </Mirror>
      </Section>
      <Section title="Notes" open={association.notes !== undefined}>
        <CellGrid>
          <LongTextField label="Notes" path={['associations', id, 'notes']} />
        </CellGrid>
      </Section>
    </>
  );
}

function Outcome({ id }: { readonly id: string }) {
  const network = useNetwork();
  const path = associationPath(network, id);
  const { up } = canComeUp(network, { collection: 'associations', id });
  return (
    <CellGrid columns={2}>
      <ReadCell label="Over">
        {path.ok ? (
          <ElementLink to={{ collection: 'transports', id: path.transport }} />
        ) : (
          <Unknown word="no common way" />
        )}
      </ReadCell>
      <ReadCell label="As designed">
        {up ? 'can come up' : <span className="font-semibold text-red">can’t come up</span>}
      </ReadCell>
    </CellGrid>
  );
}

interface RowsProps {
  readonly id: string;
  readonly association: Association;
  readonly heads: Heads;
}

function IdentityRows({ id, association, heads }: RowsProps) {
  const commit = useCommit();
  const { name } = association;
  const setMethod = (end: End, method: 'certificate' | 'pre-shared-key' | undefined): void => {
    const far = association[otherEnd(end)].authentication;
    const vaultEntry = far?.method === 'pre-shared-key' ? far.vaultEntry : `ipsec ${name}`;
    const next =
      method === undefined
        ? null
        : method === 'certificate'
          ? { method, vaultEntry: null }
          : { method, vaultEntry };
    commit(
      `Authentication of ${name} at ${heads[end].place}`,
      patchAt(['associations', id, end, 'authentication'], next),
    );
  };
  return (
    <>
      <MirrorRow field={['ikeVersion']} agree="must">
        {({ end: _end, ...cell }) => <SelectField label="IKE" {...cell} choices={ikeVersions} />}
      </MirrorRow>
      <MirrorRow field={['authentication', 'method']} agree="must">
        {({ end, ...cell }) => (
          <SelectField
            label="Authenticated by"
            {...cell}
            choices={methods}
            onChoose={(method) => setMethod(end, method)}
          />
        )}
      </MirrorRow>
      <MirrorRow field={['ikeFragmentation']} agree="should">
        {({ end: _end, ...cell }) => <YesNoField label="IKE fragmentation" {...cell} words={['on', 'off']} />}
      </MirrorRow>
      <MirrorRow field={['start']} agree="free">
        {({ end: _end, ...cell }) => <SelectField label="Set-up" {...cell} choices={starts} />}
      </MirrorRow>
      <MirrorRow field={['mode']} agree="must">
        {({ end: _end, ...cell }) => <SelectField label="Mode" {...cell} choices={modes} />}
      </MirrorRow>
      <MirrorRow field={['outerDf']} agree="should">
        {({ end: _end, ...cell }) => <SelectField label="Outer DF" {...cell} choices={outerDf} />}
      </MirrorRow>
      <MirrorRow field={['whenDown']} agree="should">
        {({ end: _end, ...cell }) => <SelectField label="While down" {...cell} choices={whenDown} />}
      </MirrorRow>
    </>
  );
}

/** What each end calls itself and proves itself by; whole lines, since names are long. */
function Identities({ id, association, heads }: RowsProps) {
  const withKeys = ends.filter((end) => association[end].authentication?.method === 'pre-shared-key');
  const at = (end: End, ...field: string[]) => ['associations', id, end, ...field];
  return (
    <>
      <CellGrid>
        {ends.map((end) => (
          <TextField key={end} label={`Identity of ${heads[end].place}`} path={at(end, 'identity')} />
        ))}
        {withKeys.map((end) => (
          <TextField
            key={end}
            label={`Key’s name in the vault of ${heads[end].place}`}
            path={at(end, 'authentication', 'vaultEntry')}
            required
          />
        ))}
      </CellGrid>
      {withKeys.length > 0 && (
        <p className="text-note text-degr">
          Keys are never stored here: type the name under which your team’s vault keeps the key, not the key.
        </p>
      )}
    </>
  );
}

const livenessState = (stored: unknown): 'on' | 'off' | undefined =>
  stored === undefined ? undefined : stored === 'off' ? 'off' : 'on';

function RenewalRows({ id, association, heads }: RowsProps) {
  const commit = useCommit();
  const checksSomewhere = ends.some((end) => livenessState(association[end].liveness) === 'on');
  const livenessCell = (field: 'intervalSeconds' | 'tries', label: string) => (
    <MirrorRow field={['liveness', field]} agree="should">
      {({ end, ...cell }) =>
        livenessState(association[end].liveness) === 'on' ? (
          <TextField label={label} {...cell} writing={field === 'tries' ? count : lifetime} required />
        ) : (
          <ReadCell label={label} place={cell.place} alignRight={cell.alignRight}>
            <Unknown word="does not ask" />
          </ReadCell>
        )
      }
    </MirrorRow>
  );
  return (
    <>
      <MirrorRow field={['liveness']} agree="should">
        {({ end, ...cell }) => (
          <SelectField
            label="Peer’s liveness"
            {...cell}
            choices={livenessStates}
            read={livenessState}
            onChoose={(state) =>
              commit(
                `Liveness of ${association.name} at ${heads[end].place}`,
                patchAt(
                  ['associations', id, end, 'liveness'],
                  state === 'on' ? usualLiveness : state === 'off' ? 'off' : null,
                ),
              )
            }
          />
        )}
      </MirrorRow>
      {checksSomewhere && livenessCell('intervalSeconds', 'Asks every')}
      {checksSomewhere && livenessCell('tries', 'Tries')}
      <MirrorRow field={['ikeLifetimeSeconds']} agree="should">
        {({ end: _end, ...cell }) => <TextField label="IKE lifetime" {...cell} writing={lifetime} />}
      </MirrorRow>
      <MirrorRow field={['childLifetimeSeconds']} agree="should">
        {({ end: _end, ...cell }) => <TextField label="Child lifetime" {...cell} writing={lifetime} />}
      </MirrorRow>
      <MirrorRow field={['perfectForwardSecrecy']} agree="should">
        {({ end: _end, ...cell }) => <YesNoField label="Forward secrecy" {...cell} words={['on', 'off']} />}
      </MirrorRow>
      <MirrorRow field={['extendedSequence']} agree="should">
        {({ end: _end, ...cell }) => <YesNoField label="64-bit sequence" {...cell} words={['on', 'off']} />}
      </MirrorRow>
      <MirrorRow field={['replayWindow']} agree="should">
        {({ end: _end, ...cell }) => <TextField label="Replay window" {...cell} writing={count} />}
      </MirrorRow>
      <MirrorRow field={['natKeepaliveSeconds']} agree="should">
        {({ end: _end, ...cell }) => <TextField label="NAT keepalive" {...cell} writing={lifetime} />}
      </MirrorRow>
    </>
  );
}
