import { Button } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';
import { Icon } from '../../components/icon.tsx';
import { LabelHolder } from '../../components/label-holder.tsx';
import { Menu, type MenuAction } from '../../components/menu.tsx';
import type { DesignSummary, Engagement } from '../../contract/designs.ts';
import type { Membership } from '../../contract/session.ts';
import { may } from '../../lib/session.ts';
import { DesignCard } from './design-card.tsx';

/** What a list asks of the page that shows it. */
export interface EngagementActions {
  readonly onNewDesign: (engagement: Engagement) => void;
  readonly onCopyDesign: (design: DesignSummary, engagement: Engagement) => void;
  readonly onEditEngagement: (engagement: Engagement) => void;
  readonly onArchiveEngagement: (engagement: Engagement, archived: boolean) => void;
  readonly onRenameDesign: (design: DesignSummary) => void;
  readonly onArchiveDesign: (design: DesignSummary, archived: boolean) => void;
  readonly onDeleteDesign: (design: DesignSummary) => void;
}

interface EngagementRowProps extends EngagementActions {
  readonly engagement: Engagement;
  readonly membership: Membership | undefined;
}

export function EngagementRow({ engagement, membership, ...ask }: EngagementRowProps) {
  const archived = engagement.archivedAt !== null;
  const mayCreate = may(membership, 'design.create') && !archived;
  const mayEditEngagement = may(membership, 'engagement.edit');
  const engagementActions: MenuAction[] = [
    { label: 'Rename or describe…', onSelect: () => ask.onEditEngagement(engagement) },
    {
      label: archived ? 'Restore' : 'Archive',
      onSelect: () => ask.onArchiveEngagement(engagement, !archived),
    },
  ];
  return (
    <section
      aria-labelledby={`engagement-${engagement.id}`}
      className="flex gap-24 border-t border-ink pt-16 pb-24 max-sm:flex-col max-sm:gap-14"
    >
      <div className="w-196 shrink-0 max-sm:w-full">
        <LabelHolder
          title={<h2 id={`engagement-${engagement.id}`}>{engagement.name}</h2>}
          note={engagement.summary}
        />
        {archived && <p className="mt-8 text-note font-medium text-ink-2">Archived</p>}
        <div className="mt-8 flex items-center gap-4">
          {mayCreate && (
            <Button
              kind="quiet"
              icon={<Icon name="plus" />}
              className="px-4!"
              onClick={() => ask.onNewDesign(engagement)}
            >
              New design
            </Button>
          )}
          {mayEditEngagement && (
            <Menu
              groups={[{ actions: engagementActions }]}
              trigger={
                <Button
                  kind="quiet"
                  iconOnly
                  aria-label={`What to do with ${engagement.name}`}
                  icon={<Icon name="more" />}
                />
              }
            />
          )}
        </div>
      </div>
      {engagement.designs.length === 0 ? (
        <EmptyState title="No design yet" className="min-h-150 w-424 max-w-full justify-center max-sm:w-full">
          {mayCreate
            ? 'Start on an empty sheet, from the demo, from a copy of another design, or from a design’s own file.'
            : 'Designs of this engagement will stand here.'}
        </EmptyState>
      ) : (
        <ul className="flex min-w-0 flex-1 flex-wrap gap-20 max-sm:grid max-sm:grid-cols-2 max-sm:gap-12">
          {engagement.designs.map((design) => (
            <li key={design.id} className="flex min-w-0">
              <DesignCard
                design={design}
                canOpen={may(membership, 'design.read')}
                actions={designActions(design, engagement, membership, ask)}
              />
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}

function designActions(
  design: DesignSummary,
  engagement: Engagement,
  membership: Membership | undefined,
  ask: EngagementActions,
): readonly MenuAction[] {
  const archived = design.archivedAt !== null;
  const actions: MenuAction[] = [];
  if (may(membership, 'design.edit') && !archived) {
    actions.push({ label: 'Rename…', onSelect: () => ask.onRenameDesign(design) });
  }
  if (may(membership, 'design.create') && engagement.archivedAt === null) {
    actions.push({ label: 'Copy…', onSelect: () => ask.onCopyDesign(design, engagement) });
  }
  if (may(membership, 'design.archive')) {
    actions.push({
      label: archived ? 'Restore' : 'Archive',
      onSelect: () => ask.onArchiveDesign(design, !archived),
    });
    if (design.deletedAt === null)
      actions.push({ label: 'Delete', danger: true, onSelect: () => ask.onDeleteDesign(design) });
  }
  return actions;
}
