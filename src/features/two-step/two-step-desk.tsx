import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button, buttonClasses } from '../../components/button.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import { showToast } from '../../components/toast.tsx';
import { dateAndTime } from '../../lib/format-time.ts';
import { ProofDialog } from './proof-dialog.tsx';
import { RecoveryCodes } from './recovery-codes.tsx';
import { secondStepQuery, useOffer, useRenewRecoveryCodes, useSwitchOff } from './second-step-query.ts';
import { SetUpForm } from './set-up-form.tsx';

interface TwoStepDeskProps {
  /** Where the reader was asked for it, to go back to. */
  readonly returnTo: string | null;
}

/** Whether signing in asks for a code, and everything to change about it. */
export function TwoStepDesk({ returnTo }: TwoStepDeskProps) {
  const query = useQuery(secondStepQuery);
  const offer = useOffer();
  const renew = useRenewRecoveryCodes();
  const switchOff = useSwitchOff();
  const [dialog, setDialog] = useState<'renew' | 'off'>();
  const [codes, setCodes] = useState<readonly string[]>();
  const state = query.data;
  const close = (): void => {
    setDialog(undefined);
    renew.reset();
    switchOff.reset();
  };

  if (codes !== undefined) {
    return (
      <RecoveryCodes
        codes={codes}
        onKept={() => {
          setCodes(undefined);
          offer.reset();
        }}
      />
    );
  }
  if (state === undefined) return <ReadingState what="Your settings" query={query} />;
  if (!state.isOffered) {
    return (
      <EmptyState title="Not for the people of the demo">
        They sign in with one press. Whoever has an account of their own sets up a second step here.
      </EmptyState>
    );
  }
  const asked = state.askedBy.join(', ');
  if (!state.isOn) {
    if (offer.data !== undefined)
      return <SetUpForm offer={offer.data} onCancel={() => offer.reset()} onDone={setCodes} />;
    return (
      <div className="flex flex-col gap-14">
        <CellGrid>
          <ReadCell label="State">
            <span className="font-semibold">Off</span>: your password alone signs in
          </ReadCell>
        </CellGrid>
        {asked !== '' && (
          <p className="text-base">
            <span className="font-semibold">{asked}</span> {state.askedBy.length === 1 ? 'asks' : 'ask'} for
            it and stay{state.askedBy.length === 1 ? 's' : ''} shut to you until it is on.
          </p>
        )}
        {offer.error !== null && <ErrorNotice>{offer.error.message}</ErrorNotice>}
        <div>
          <Button kind="primary" busy={offer.isPending} onClick={() => offer.mutate()}>
            Set up
          </Button>
        </div>
      </div>
    );
  }
  return (
    <div className="flex flex-col gap-14">
      <CellGrid columns={2} className="max-sm:[&>div:first-child]:grid-cols-1!">
        <ReadCell label="State">
          <span className="font-semibold">On</span>
          {state.since !== null && ` since ${dateAndTime(new Date(state.since))}`}
        </ReadCell>
        <ReadCell label="Recovery codes">{state.recoveryCodesLeft} of 10 unused</ReadCell>
      </CellGrid>
      {state.recoveryCodesLeft < 3 && (
        <p className="text-base font-medium text-degr">
          {state.recoveryCodesLeft === 0 ? 'None is left' : 'Few are left'}: make new ones before the
          authenticator is lost.
        </p>
      )}
      {asked !== '' && (
        <p className="text-base text-ink-2">
          {asked} {state.askedBy.length === 1 ? 'asks' : 'ask'} for it.
        </p>
      )}
      <div className="flex flex-wrap gap-8">
        {returnTo !== null && (
          <Link to={returnTo} className={buttonClasses({ kind: 'primary' })}>
            Go on
          </Link>
        )}
        <Button onClick={() => setDialog('renew')}>New recovery codes…</Button>
        <Button kind="danger" onClick={() => setDialog('off')}>
          Switch off…
        </Button>
      </div>
      {dialog === 'renew' && (
        <ProofDialog
          title="New recovery codes"
          description="The old ones are worth nothing from then on."
          does="Make new codes"
          change={{
            ...renew,
            mutate: (proof) =>
              renew.mutate(proof, {
                onSuccess: (fresh) => {
                  close();
                  setCodes(fresh);
                },
              }),
          }}
          onClose={close}
        />
      )}
      {dialog === 'off' && (
        <ProofDialog
          title="Switch two-step sign-in off"
          description={
            asked === ''
              ? 'Your password alone will sign in again.'
              : `Your password alone will sign in again, and ${asked} will be shut to you.`
          }
          does="Switch off"
          danger
          change={{
            ...switchOff,
            mutate: (proof) =>
              switchOff.mutate(proof, {
                onSuccess: () => {
                  close();
                  showToast({ tone: 'done', text: 'Two-step sign-in is off.' });
                },
              }),
          }}
          onClose={close}
        />
      )}
    </div>
  );
}
