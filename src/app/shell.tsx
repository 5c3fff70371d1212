import { Suspense } from 'react';
import { Outlet } from 'react-router-dom';
import { WithBar } from '../components/bar.tsx';
import { AccountMenu } from '../features/account/account-menu.tsx';
import { SecondStepGate } from '../features/account/second-step-gate.tsx';

/** The bar above every page behind the sign-in. */
export function Shell() {
  return (
    <div className="flex h-dvh flex-col">
      <WithBar end={<AccountMenu />}>
        <Suspense
          fallback={
            <p role="status" className="p-28 text-ink-2">
              Loading…
            </p>
          }
        >
          <SecondStepGate>
            <Outlet />
          </SecondStepGate>
        </Suspense>
      </WithBar>
    </div>
  );
}
