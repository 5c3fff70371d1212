import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { CheckCell, InputCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { revisionStateWords, type Revision } from '../../contract/revisions.ts';
import { asApiError } from '../../lib/api-error.ts';
import { dayByUtc } from '../../lib/format-time.ts';
import { lastDayFrom, proposedDay, shareProblems } from './share-problems.ts';
import { useCreateShare } from './shares-query.ts';

interface ShareDialogProps {
  readonly designId: string;
  /** What may be shared, the newest first; at least one. */
  readonly revisions: readonly Revision[];
  /** Which of them was asked for. */
  readonly revisionId?: string | undefined;
  readonly now: Date;
  readonly onMade: (link: string) => void;
  readonly onClose: () => void;
}

/** Who is to see which revision, until when, and what is left out. */
export function ShareDialog({ designId, revisions, revisionId, now, onMade, onClose }: ShareDialogProps) {
  const asked = revisions.find(({ id }) => id === revisionId) ?? revisions[0];
  const [chosen, setChosen] = useState(asked?.id ?? '');
  const [label, setLabel] = useState('');
  const [expiresOn, setExpiresOn] = useState(proposedDay(now));
  const [passphrase, setPassphrase] = useState('');
  const [showsAddresses, setShowsAddresses] = useState(false);
  const [showsFindings, setShowsFindings] = useState(true);
  const [tellsMaker, setTellsMaker] = useState(false);
  const [tried, setTried] = useState(false);
  const create = useCreateShare(designId);
  const refusal = create.error === null ? null : asApiError(create.error);
  const found = shareProblems({ label, expiresOn, passphrase }, now);
  const problems = tried ? found : {};
  const submit = (): void => {
    setTried(true);
    if (Object.keys(found).length > 0) return;
    create.mutate(
      {
        revisionId: chosen,
        label: label.trim(),
        expiresOn,
        ...(passphrase === '' ? {} : { passphrase }),
        showsAddresses,
        showsFindings,
        tellsMaker,
      },
      { onSuccess: ({ link }) => onMade(link) },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title="New link"
      description="Whoever has the link sees this one revision, its sheet and its summary, without signing in. It shows nothing else of the workspace."
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={create.isPending}>
            Make the link
          </Button>
        </>
      }
    >
      <CellGrid columns={2}>
        <SelectCell
          label="Revision"
          value={chosen}
          options={revisions.map(({ id, label: name, state }) => ({
            value: id,
            label: `${name}, ${revisionStateWords[state].toLowerCase()}`,
          }))}
          onChange={setChosen}
        />
        <InputCell
          label="Last day"
          type="date"
          min={dayByUtc(now)}
          max={lastDayFrom(now)}
          value={expiresOn}
          onChange={(event) => setExpiresOn(event.target.value)}
          error={problems.expiresOn}
        />
        <InputCell
          span={2}
          label="For"
          placeholder="Saltmarsh Ferries, operations"
          value={label}
          onChange={(event) => setLabel(event.target.value)}
          error={problems.label}
        />
        <InputCell
          span={2}
          label="Passphrase, if one is to be asked for"
          autoComplete="off"
          hint="Send the passphrase another way than the link."
          value={passphrase}
          onChange={(event) => setPassphrase(event.target.value)}
          error={problems.passphrase}
        />
        <CheckCell
          label="Addresses"
          words={['shown', 'left out']}
          checked={showsAddresses}
          onChange={setShowsAddresses}
        />
        <CheckCell
          label="Findings and waivers"
          words={['shown', 'left out']}
          checked={showsFindings}
          onChange={setShowsFindings}
        />
        <CheckCell
          span={2}
          label="When it is opened"
          words={['mail me', 'count it only']}
          checked={tellsMaker}
          onChange={setTellsMaker}
        />
      </CellGrid>
      {refusal !== null && <ErrorNotice className="mt-14">{refusal.message}</ErrorNotice>}
    </Dialog>
  );
}
