import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { useLocation, useNavigate } from 'react-router-dom';
import { KeysDialog } from '../canvas/commands/keys-dialog.tsx';
import { useFindKeys } from '../canvas/commands/use-find-keys.ts';
import { useDesk } from '../canvas/desk-state.ts';
import { FindDialog } from '../canvas/find-dialog.tsx';
import type { NamedCommand } from '../canvas/named-command.ts';
import { designPages } from '../features/design-bar/design-pages.ts';
import { engagementsQuery } from '../features/engagements/engagements-query.ts';
import { designPath, engagementsPath } from '../lib/workspace-path.ts';
import { useDesignPlace } from '../workspace/design-place.tsx';
import { useOpenDesign } from '../workspace/open-design-context.tsx';

/** Search and the list of keys on every page of a design: its pages, the workspace's other designs, its elements. */
export function FindAnywhere() {
  const { designId, workspaceId } = useDesignPlace();
  const open = useOpenDesign();
  const navigate = useNavigate();
  const pathname = useLocation().pathname.replace(/\/$/, '');
  const searching = useDesk((state) => state.searching);
  const { data: engagements } = useQuery({ ...engagementsQuery(workspaceId, false), enabled: searching });
  useFindKeys();
  const destinations = useMemo((): readonly NamedCommand[] => {
    const goTo = (path: string) => () => void navigate(path);
    return [
      ...designPages(designId)
        .filter(({ to }) => to !== pathname)
        .map(({ to, label }) => ({ name: label, kind: 'Page', detail: '', run: goTo(to) })),
      { name: 'Engagements', kind: 'Page', detail: '', run: goTo(engagementsPath(workspaceId)) },
      ...(engagements ?? []).flatMap(({ name, designs }) =>
        designs
          .filter(({ id }) => id !== designId)
          .map(({ id, title }) => ({ name: title, kind: 'Design', detail: name, run: goTo(designPath(id)) })),
      ),
    ];
  }, [designId, workspaceId, pathname, engagements, navigate]);
  return (
    <>
      <FindDialog
        destinations={destinations}
        onGoTo={(ref) => {
          open.select([ref]);
          void navigate(designPath(designId));
        }}
      />
      <KeysDialog />
    </>
  );
}
