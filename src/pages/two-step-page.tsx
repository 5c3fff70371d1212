import { useSearchParams } from 'react-router-dom';
import { AccountFrame } from '../features/account/account-frame.tsx';
import { TwoStepDesk } from '../features/two-step/two-step-desk.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { safeReturnPath } from '../lib/return-path.ts';

/** /account/two-step?return=…: a code besides the password. */
export function TwoStepPage() {
  usePageTitle('Two-step sign-in');
  const [search] = useSearchParams();
  const asked = search.get('return');
  return (
    <AccountFrame
      title="Two-step sign-in"
      intro="Signing in asks for a code that changes every half minute besides your password: whoever learns the password alone stays out."
    >
      <TwoStepDesk returnTo={asked === null ? null : safeReturnPath(asked)} />
    </AccountFrame>
  );
}
