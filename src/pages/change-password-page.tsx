import { useNavigate } from 'react-router-dom';
import { showToast } from '../components/toast.tsx';
import { MainBar } from '../features/account/main-bar.tsx';
import { ChangePasswordForm } from '../features/account/change-password-form.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /account/password */
export function ChangePasswordPage() {
  usePageTitle('Change password');
  const navigate = useNavigate();
  return (
    <>
      <MainBar />
      <main id="main" tabIndex={-1} className="min-h-0 flex-1 overflow-y-auto p-28 outline-none max-md:p-14">
        <div className="mx-auto max-w-460">
          <h1 className="mb-14 text-page font-semibold">Change password</h1>
          <ChangePasswordForm
            onDone={() => {
              showToast({ tone: 'done', text: 'Your password is changed. Your other sessions have ended.' });
              void navigate('/');
            }}
          />
        </div>
      </main>
    </>
  );
}
