import { AccountFrame } from '../features/account/account-frame.tsx';
import { SessionsDesk } from '../features/sessions/sessions-desk.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /account/sessions */
export function SessionsPage() {
  usePageTitle('Sessions');
  return (
    <AccountFrame
      title="Sessions"
      wide
      intro="Where you are signed in. End whatever you don’t know or no longer use; change the password if you know one of them not to be yours."
    >
      <SessionsDesk />
    </AccountFrame>
  );
}
