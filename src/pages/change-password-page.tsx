import { useNavigate } from 'react-router-dom';
import { showToast } from '../components/toast.tsx';
import { AccountFrame } from '../features/account/account-frame.tsx';
import { ChangePasswordForm } from '../features/account/change-password-form.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /account/password */
export function ChangePasswordPage() {
  usePageTitle('Change password');
  const navigate = useNavigate();
  return (
    <AccountFrame title="Change password">
      <ChangePasswordForm
        onDone={() => {
          showToast({ tone: 'done', text: 'Your password is changed. Your other sessions have ended.' });
          void navigate('/');
        }}
      />
    </AccountFrame>
  );
}
