import { AccountFrame } from '../features/account/account-frame.tsx';
import { MailSettingsDesk } from '../features/mail-settings/mail-settings-desk.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /account/mail: what the reader is told by mail, and when. */
export function MailSettingsPage() {
  usePageTitle('Mail');
  return (
    <AccountFrame
      title="Mail"
      intro="Invitations and links for a new password come in any case. Everything else is up to you; it stands in the application too."
    >
      <MailSettingsDesk />
    </AccountFrame>
  );
}
