import { useQuery } from '@tanstack/react-query';
import { Navigate, useSearchParams } from 'react-router-dom';
import { Cautions } from '../features/sign-in/cautions.tsx';
import { CordInTheGround, workingLine } from '../features/sign-in/cord-in-the-ground.tsx';
import { DemoPeople } from '../features/sign-in/demo-people.tsx';
import { SecondStepForm } from '../features/sign-in/second-step-form.tsx';
import { SheetFrame } from '../features/sign-in/sheet-frame.tsx';
import { SignInForm } from '../features/sign-in/sign-in-form.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { safeReturnPath } from '../lib/return-path.ts';
import { sessionQuery } from '../lib/session.ts';

/** /sign-in?return=…: an empty sheet with the cord in the ground; its title block is the form. */
export function SignInPage() {
  usePageTitle('Sign in');
  const { data: session } = useQuery(sessionQuery);
  const [search] = useSearchParams();
  if (session !== undefined && session.person !== null) {
    return <Navigate to={safeReturnPath(search.get('return'))} replace />;
  }
  const people = session?.demo ?? [];
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-dvh flex-col p-28 outline-none max-lg:p-12 max-sm:p-0"
    >
      <SheetFrame>
        <div className="relative max-lg:order-2 max-lg:overflow-hidden max-lg:border-t max-lg:border-ink">
          {/* On wide screens the drawing has the line in it, so that it keeps clear of the cord at any size. */}
          <p className="mx-auto max-w-310 px-14 pt-24 pb-16 text-center text-[22px]/28 font-medium text-balance lg:sr-only">
            {workingLine.join(' ')}
          </p>
          <CordInTheGround
            view="whole"
            className="mx-auto block max-h-[max(320px,calc(100dvh-480px))] w-full overflow-visible max-lg:hidden"
          />
          <CordInTheGround
            view="break"
            className="mx-auto block w-full max-w-540 overflow-visible lg:hidden"
          />
        </div>
        <div className="mt-auto flex items-end justify-between gap-28 pt-16 max-lg:order-1 max-lg:mt-0 max-lg:flex-col max-lg:pt-0 max-lg:items-stretch max-lg:gap-0">
          <div className="flex min-w-0 flex-1 flex-col gap-18 max-lg:order-2 max-lg:gap-0">
            <div className="px-28 max-lg:order-2 max-lg:border-t max-lg:border-ink max-lg:px-14 max-lg:py-20">
              <Cautions />
            </div>
            {people.length > 0 && (
              <div className="border-t-[2.4px] border-r-[2.4px] border-ink max-lg:border-0">
                <DemoPeople people={people} />
              </div>
            )}
          </div>
          <div className="w-570 shrink-0 border-t-[2.4px] border-l-[2.4px] border-ink max-lg:order-1 max-lg:w-auto max-lg:border-0 max-lg:border-b-[2.4px]">
            {session?.secondStepAsked === true ? <SecondStepForm /> : <SignInForm />}
          </div>
        </div>
      </SheetFrame>
    </main>
  );
}
