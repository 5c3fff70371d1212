import { Link } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import type { DesignSummary } from '../../contract/designs.ts';
import { dayInWords } from '../../lib/format-time.ts';
import { revisionPath } from '../../lib/workspace-path.ts';
import type { Release } from './use-release.tsx';

interface StateBarProps {
  readonly summary: Pick<DesignSummary, 'id' | 'state'>;
  readonly release: Release;
}

/** Over every page of a design that can't be edited for its state: why, and the step that helps. */
export function StateBar({ summary: { id, state }, release: { commands, revision } }: StateBarProps) {
  if (state === 'draft') return null;
  const label = revision === undefined ? 'A revision' : `Revision ${revision.label}`;
  const by = revision?.decidedBy == null ? '' : ` by ${revision.decidedBy.name}`;
  const words = {
    'in-review': `${label} is in review${revision === undefined ? '' : `, asked for by ${revision.askedBy.name}`}. The drawing stays as its reviewers see it until it is decided or taken back.`,
    approved: `${label} was approved${by}. It stays as it is; changes go into the next revision.`,
    built: `${label} is built${revision?.builtOn == null ? '' : `, on ${dayInWords(revision.builtOn)}`}. It stays as it is; changes go into the next revision.`,
    superseded: 'The last revision is superseded and not to be built from. Changes go into the next one.',
  };
  return (
    <section
      aria-label="State of the design"
      className="flex min-h-36 shrink-0 flex-wrap items-center gap-x-16 gap-y-6 border-b-1.5 border-ink bg-raise px-14 py-4 text-base"
    >
      <p className="min-w-0 flex-1 basis-280">
        {words[state]}{' '}
        {revision !== undefined && state !== 'superseded' && (
          <Link to={revisionPath(id, revision.id)} className="whitespace-nowrap text-blue underline">
            Open revision {revision.label}
          </Link>
        )}
      </p>
      <div className="flex flex-wrap gap-8">
        {commands.map(({ label: name, run, primary = false, busy = false }) => (
          <Button key={name} small kind={primary ? 'primary' : 'secondary'} busy={busy} onClick={run}>
            {name}
          </Button>
        ))}
      </div>
    </section>
  );
}
