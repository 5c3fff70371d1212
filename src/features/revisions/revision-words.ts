import type { StampState } from '../../components/stamp.tsx';
import type { Revision } from '../../contract/revisions.ts';
import { dateAndTime, dayInWords } from '../../lib/format-time.ts';

/** The stamp of a revision: what was taken back or sent back bears none but a draft's, being no more than that. */
export const stampOf = (state: Revision['state']): StampState =>
  state === 'withdrawn' || state === 'sent-back' ? 'draft' : state;

const at = (moment: string | null): string => (moment === null ? '' : `, ${dateAndTime(new Date(moment))}`);

/** What became of a revision, step by step, each in a sentence without a final stop. */
export const stepsOf = ({
  askedBy,
  askedAt,
  state,
  decidedBy,
  decidedAt,
  builtBy,
  builtOn,
  supersededBy,
  supersededAt,
  supersededNote,
}: Revision): readonly string[] => {
  const by = decidedBy?.name ?? '';
  const decision =
    state === 'in-review'
      ? []
      : state === 'withdrawn'
        ? [`Taken back by ${by}${at(decidedAt)}`]
        : state === 'sent-back'
          ? [`Sent back by ${by}${at(decidedAt)}`]
          : [`Approved by ${by}${at(decidedAt)}`];
  return [
    `Review asked for by ${askedBy.name}${at(askedAt)}`,
    ...decision,
    ...(builtOn === null || builtBy === null
      ? []
      : [`Built on ${dayInWords(builtOn)}, said ${builtBy.name}`]),
    ...(supersededAt === null
      ? []
      : [
          `Superseded${supersededBy === null ? '' : ` by ${supersededBy.name}`}${at(supersededAt)}: ${supersededNote}`,
        ]),
  ];
};
