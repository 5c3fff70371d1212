import { useQuery } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';
import { showToast } from '../../components/toast.tsx';
import type { DesignSummary } from '../../contract/designs.ts';
import type { Revision } from '../../contract/revisions.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useMayHere } from '../../workspace/design-place.tsx';
import {
  revisionsQuery,
  useDecide,
  useStartNextRevision,
  useSupersede,
  useTakeBack,
} from '../../workspace/revisions-query.ts';
import { ApproveDialog } from './approve-dialog.tsx';
import { AskDialog } from './ask-dialog.tsx';
import { BuiltDialog } from './built-dialog.tsx';
import { ReasonDialog } from './reason-dialog.tsx';

/** A step that moves a design from one state to the next. */
export interface ReleaseCommand {
  readonly label: string;
  readonly run: () => void;
  /** The step that the reader most likely came for. */
  readonly primary?: boolean;
  readonly busy?: boolean;
}

export interface Release {
  /** What the reader may do with the design as it stands now. */
  readonly commands: readonly ReleaseCommand[];
  /** The revision in review, or the one that was approved last and holds. */
  readonly revision: Revision | undefined;
  /** The dialog of the command that was chosen. */
  readonly dialog: ReactNode;
}

type Asked = 'ask' | 'approve' | 'send-back' | 'built' | 'supersede';

/** The commands of a design's state by what the reader may do, and their dialogs. */
export function useRelease({
  id,
  state,
  archivedAt,
}: Pick<DesignSummary, 'id' | 'state' | 'archivedAt'>): Release {
  const [asked, setAsked] = useState<Asked>();
  const { data: revisions = [] } = useQuery(revisionsQuery(id));
  const mayAsk = useMayHere('review.ask');
  const mayDecide = useMayHere('review.decide');
  const mayBuild = useMayHere('design.build');
  const takeBack = useTakeBack(id);
  const decide = useDecide(id);
  const supersede = useSupersede(id);
  const next = useStartNextRevision(id);
  const inReview = revisions.find((revision) => revision.state === 'in-review');
  const issued = revisions.find((revision) => revision.state === 'approved' || revision.state === 'built');
  const failed = (error: Error): void => void showToast({ tone: 'failed', text: asApiError(error).message });
  const close = (): void => setAsked(undefined);

  const commands = ((): readonly ReleaseCommand[] => {
    if (archivedAt !== null) return [];
    switch (state) {
      case 'draft':
        return mayAsk ? [{ label: 'Ask for review…', run: () => setAsked('ask'), primary: true }] : [];
      case 'in-review':
        if (inReview === undefined) return [];
        return [
          ...(mayAsk
            ? [
                {
                  label: 'Take it back',
                  busy: takeBack.isPending,
                  run: () =>
                    takeBack.mutate(inReview.id, {
                      onSuccess: () =>
                        showToast({ tone: 'done', text: 'Taken back: the design is a draft again.' }),
                      onError: failed,
                    }),
                },
              ]
            : []),
          ...(mayDecide
            ? [
                { label: 'Send back…', run: () => setAsked('send-back') },
                { label: 'Approve…', run: () => setAsked('approve'), primary: true },
              ]
            : []),
        ];
      default:
        return [
          ...(mayBuild && issued !== undefined
            ? [{ label: 'Mark as superseded…', run: () => setAsked('supersede') }]
            : []),
          ...(mayBuild && issued?.state === 'approved'
            ? [{ label: 'Mark as built…', run: () => setAsked('built') }]
            : []),
          ...(mayAsk
            ? [
                {
                  label: 'Start the next revision',
                  primary: true,
                  busy: next.isPending,
                  run: () => next.mutate(undefined, { onError: failed }),
                },
              ]
            : []),
        ];
    }
  })();

  const dialog = ((): ReactNode => {
    if (asked === 'ask') return <AskDialog onClose={close} />;
    if (asked === 'approve' && inReview !== undefined)
      return <ApproveDialog revision={inReview} onClose={close} />;
    if (asked === 'built' && issued !== undefined) return <BuiltDialog revision={issued} onClose={close} />;
    if (asked === 'send-back' && inReview !== undefined)
      return (
        <ReasonDialog
          title={`Send revision ${inReview.label} back`}
          description="The design becomes a draft again; who asked is told why by e-mail."
          action="Send back"
          placeholder="The tunnel to Skerry needs a second path before this can go out"
          why="Say what has to be mended."
          done={`Revision ${inReview.label} is sent back.`}
          run={(note) => decide.mutateAsync({ revisionId: inReview.id, decision: 'send-back', note })}
          onClose={close}
        />
      );
    if (asked === 'supersede' && issued !== undefined)
      return (
        <ReasonDialog
          title={`Mark revision ${issued.label} as superseded`}
          description="Nobody is to build from it any more, though no other revision takes its place. The approval of the next one does this by itself."
          action="Mark as superseded"
          placeholder="The customer gave up the site at Skerry"
          why="Say why it is not to be built from."
          done={`Revision ${issued.label} is superseded.`}
          run={(reason) => supersede.mutateAsync({ revisionId: issued.id, reason })}
          onClose={close}
        />
      );
    return null;
  })();

  return { commands, revision: inReview ?? issued, dialog };
}
