import { AskForResetForm } from '../features/sign-in/ask-for-reset-form.tsx';
import { FrontSheet } from '../features/sign-in/front-sheet.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /reset: for who has lost their password. */
export function AskForResetPage() {
  usePageTitle('New password');
  return (
    <FrontSheet beside="With two-step sign-in you will still be asked for a code: a new password takes the place of the old one, of nothing else.">
      <AskForResetForm />
    </FrontSheet>
  );
}
