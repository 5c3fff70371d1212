import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { useParams } from 'react-router-dom';
import { issueOf, type FrozenRevision } from '../contract/revisions.ts';
import type { Design } from '../engine/model/design.ts';
import { asIssued } from '../engine/model/issue.ts';
import { parseDesign } from '../engine/model/parse-design.ts';
import { RevisionBar } from '../features/revisions/revision-bar.tsx';
import { RevisionNote } from '../features/revisions/revision-note.tsx';
import { asApiError } from '../lib/api-error.ts';
import { FrozenChecksProvider } from '../workspace/checks-context.tsx';
import { DesignPlaceProvider, type DesignPlace } from '../workspace/design-place.tsx';
import { FrozenDesign } from '../workspace/frozen-design.tsx';
import { frozenRevisionQuery } from '../workspace/revisions-query.ts';
import { WorkspaceProfilesProvider } from '../workspace/workspace-profiles.tsx';
import { CannotOpen, Opening } from './design-desk.tsx';
import { FrozenSheet } from './frozen-sheet.tsx';

/** /designs/:designId/revisions/:revisionId: a frozen revision, to be read, followed, exported and built from. */
export function RevisionPage() {
  const { revisionId = '' } = useParams();
  const answer = useQuery(frozenRevisionQuery(revisionId));
  if (answer.error !== null)
    return <CannotOpen message={asApiError(answer.error).message} onRetry={() => void answer.refetch()} />;
  if (answer.data === undefined) return <Opening />;
  return <ReadRevision frozen={answer.data} />;
}

function ReadRevision({ frozen }: { readonly frozen: FrozenRevision }) {
  const { revision, document } = frozen;
  const parsed = useMemo(() => parseDesign(document), [document]);
  const issued = useMemo(
    () => (parsed.ok ? asIssued(parsed.value, issueOf(revision)) : undefined),
    [parsed, revision],
  );
  if (!parsed.ok || issued === undefined)
    return (
      <CannotOpen
        message={`Revision ${revision.label} can’t be read by this version of the program. Nothing of it is lost; ask whoever runs it for the version that wrote it.`}
        onRetry={() => location.reload()}
      />
    );
  // Another state has another title block: the sheet is opened anew with it.
  return <Desk key={`${revision.id} ${revision.state}`} frozen={frozen} document={issued} />;
}

function Desk({ frozen, document }: { readonly frozen: FrozenRevision; readonly document: Design }) {
  const { revision, workspaceId, findings, waivers } = frozen;
  const place = useMemo(
    (): DesignPlace => ({
      designId: revision.designId,
      workspaceId,
      actions: ['revision.read'],
      sheetPath: `/api/revisions/${encodeURIComponent(revision.id)}/sheet`,
    }),
    [revision.designId, revision.id, workspaceId],
  );
  return (
    <DesignPlaceProvider place={place}>
      <FrozenDesign document={document} sequence={revision.sequence}>
        <FrozenChecksProvider findings={findings} waivers={waivers}>
          <RevisionBar frozen={frozen} />
          <RevisionNote revision={revision} />
          <WorkspaceProfilesProvider>
            <FrozenSheet title={`${document.meta.title}, revision ${revision.label}`} />
          </WorkspaceProfilesProvider>
        </FrozenChecksProvider>
      </FrozenDesign>
    </DesignPlaceProvider>
  );
}
