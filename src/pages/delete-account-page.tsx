import { AccountFrame } from '../features/account/account-frame.tsx';
import { DeleteAccountForm } from '../features/account-deletion/delete-account-form.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /account/deletion */
export function DeleteAccountPage() {
  usePageTitle('Delete account');
  return (
    <AccountFrame
      title="Delete account"
      intro="Your e-mail address, password, sessions and tokens go, and you leave every workspace. Your name stays on what you did, so that others can still read who drew, waived or said it. This can’t be undone."
    >
      <DeleteAccountForm />
    </AccountFrame>
  );
}
