import { ErrorNotice } from '../../components/notice.tsx';
import type { Revision } from '../../contract/revisions.ts';
import { stepsOf } from './revision-words.ts';

/** Under the bar of a frozen revision: what became of it, and a warning where it is not to be built from. */
export function RevisionNote({ revision }: { readonly revision: Revision }) {
  const isToBuildFrom = revision.state === 'approved' || revision.state === 'built';
  const last = `Revision ${revision.label}. ${stepsOf(revision).at(-1) ?? ''}`;
  if (isToBuildFrom)
    return (
      <p className="shrink-0 border-b border-rule-2 bg-ok-wash px-14 py-6 text-base text-ink">
        {last}. Frozen: findings, waivers and values are those of the approval.
      </p>
    );
  return (
    <ErrorNotice className="shrink-0 rounded-none border-x-0 border-t-0">
      {last}. Not to be built from.
    </ErrorNotice>
  );
}
