import { showToast } from '../../components/toast.tsx';
import { deletedForDays, type DesignSummary, type Engagement } from '../../contract/designs.ts';
import { useChangeDesign, useChangeEngagement } from './engagements-query.ts';

interface Archiving {
  readonly archiveEngagement: (engagement: Engagement, archived: boolean) => void;
  readonly archiveDesign: (design: DesignSummary, archived: boolean) => void;
  readonly deleteDesign: (design: DesignSummary) => void;
}

/** Archives, deletes and restores. Nothing is lost for weeks, so it is done at once and can be undone. */
export function useArchiving(): Archiving {
  const engagements = useChangeEngagement();
  const designs = useChangeDesign();
  const say = (title: string, archived: boolean, back: () => void) => ({
    onSuccess: () => {
      showToast({
        tone: 'done',
        text: archived ? `${title} is in the archive.` : `${title} is back.`,
        action: { label: 'Undo', onSelect: back },
      });
    },
    onError: (error: Error) =>
      void showToast({
        tone: 'failed',
        text: `${title} was not ${archived ? 'archived' : 'restored'}. ${error.message}`,
      }),
  });
  const archiveEngagement: Archiving['archiveEngagement'] = (engagement, archived) =>
    engagements.mutate(
      { id: engagement.id, archived },
      say(engagement.name, archived, () => archiveEngagement(engagement, !archived)),
    );
  const archiveDesign: Archiving['archiveDesign'] = (design, archived) =>
    designs.mutate(
      { id: design.id, archived },
      say(design.title, archived, () => archiveDesign(design, !archived)),
    );
  const deleteDesign: Archiving['deleteDesign'] = ({ id, title, archivedAt }) =>
    designs.mutate(
      { id, deleted: true },
      {
        onSuccess: () =>
          void showToast({
            tone: 'done',
            text: `${title} is deleted. It can be restored for ${deletedForDays} days, under Show archived.`,
            action: {
              label: 'Undo',
              onSelect: () =>
                designs.mutate(archivedAt === null ? { id, deleted: false } : { id, archived: true }),
            },
          }),
        onError: (error) =>
          void showToast({ tone: 'failed', text: `${title} was not deleted. ${error.message}` }),
      },
    );
  return { archiveEngagement, archiveDesign, deleteDesign };
}
