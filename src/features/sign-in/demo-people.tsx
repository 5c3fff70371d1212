import type { Role, Session } from '../../contract/session.ts';
import { FieldError } from '../../components/cell.tsx';
import { Icon } from '../../components/icon.tsx';
import { roleWords } from '../../lib/role-words.ts';
import { useDemoSignIn } from '../../lib/session.ts';

const mayDo: Readonly<Record<Role, string>> = {
  owner: 'Everything in the workspace',
  architect: 'Starts engagements, draws and changes designs',
  reviewer: 'Reads every design and its findings, changes none',
  presales: 'Reads every design, starts drafts',
  installer: 'Sees what there is; drafts stay shut',
};

/** The sheet's legend: one press signs in as one of the demo's people. */
export function DemoPeople({ people }: { readonly people: Session['demo'] }) {
  const signIn = useDemoSignIn();
  return (
    <section aria-label="Demo: sign in with one press">
      <div className="flex h-26 items-center gap-14 px-14 text-label text-ink-3">
        <span className="w-80 max-sm:hidden">Role</span>
        <span className="w-120 max-sm:hidden">Name</span>
        <span className="flex-1 max-sm:hidden">May</span>
        <span className="font-medium text-ink-2">Demo: one press signs in</span>
      </div>
      <ul>
        {people.map(({ role, name }) => (
          <li key={role} className="border-t border-ink">
            <button
              type="button"
              disabled={signIn.isPending}
              onClick={() => signIn.mutate(role)}
              className="group flex min-h-34 w-full items-center gap-14 px-14 py-6 text-left text-base -outline-offset-2 hover:bg-blue-wash max-sm:flex-wrap max-sm:gap-y-0 max-sm:py-9"
            >
              <span className="w-80 font-semibold">{roleWords[role]}</span>
              <span className="w-120">{name}</span>
              <span className="flex-1 text-ink-2 max-sm:order-last max-sm:basis-full">{mayDo[role]}</span>
              <span className="text-blue max-sm:ml-auto">
                <Icon name="chevron-right" size={14} />
              </span>
            </button>
          </li>
        ))}
      </ul>
      {signIn.error !== null && (
        <div className="border-t border-ink px-14 pb-8">
          <FieldError>{signIn.error.message}</FieldError>
        </div>
      )}
    </section>
  );
}
