import { queryOptions, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { patchListSchema } from '../../contract/designs.ts';
import { pastDocumentSchema, sittingListSchema, type Revision } from '../../contract/revisions.ts';
import type { MadePatch } from '../../engine/diff/change-makers.ts';
import type { Design } from '../../engine/model/design.ts';
import { withoutIssue } from '../../engine/model/issue.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { parseDesign } from '../../engine/model/parse-design.ts';
import { callApi } from '../../lib/api-client.ts';
import { asApiError } from '../../lib/api-error.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { frozenRevisionQuery } from '../../workspace/revisions-query.ts';
import type { HistoryPoint } from './history-point.ts';

const pathOf = (designId: string): string => `/api/designs/${encodeURIComponent(designId)}`;

/** Who worked on a design when, the newest first. */
export const sittingsQuery = (designId: string) =>
  queryOptions({
    queryKey: ['sittings', designId],
    queryFn: ({ signal }) => callApi(sittingListSchema, `${pathOf(designId)}/sittings`, { signal }),
  });

const pastQuery = (designId: string, sequence: number) =>
  queryOptions({
    queryKey: ['past-document', designId, sequence],
    queryFn: ({ signal }) =>
      callApi(pastDocumentSchema, `${pathOf(designId)}/document?sequence=${sequence}`, { signal }),
    // The log only grows: what was stays.
    staleTime: Infinity,
  });

const patchesQuery = (designId: string, from: number, to: number) =>
  queryOptions({
    queryKey: ['past-patches', designId, from, to],
    queryFn: ({ signal }) =>
      callApi(patchListSchema, `${pathOf(designId)}/patches?after=${from}`, { signal }),
    select: ({ patches }): readonly MadePatch[] =>
      patches
        .filter(({ sequence }) => sequence <= to)
        .map(({ by, at, patch }) => ({ by, at, patch: patch as MergePatch })),
    enabled: to > from,
    staleTime: Infinity,
  });

export interface PastDesign {
  /** Without what its title block says of the issue: that differs by the moment alone. */
  readonly design: Design | undefined;
  readonly sequence: number;
  readonly failure: string | undefined;
}

/** A design at a moment of its life. */
export function usePastDesign(
  designId: string,
  point: HistoryPoint,
  revisions: readonly Revision[],
): PastDesign {
  const now = useOpenState((state) => state.document);
  const sequenceNow = useOpenState((state) => state.sequence);
  const revision =
    point.kind === 'revision' ? revisions.find(({ label }) => label === point.label) : undefined;
  const frozen = useQuery({ ...frozenRevisionQuery(revision?.id ?? ''), enabled: revision !== undefined });
  const sequence =
    point.kind === 'now' ? sequenceNow : point.kind === 'patch' ? point.sequence : (revision?.sequence ?? 0);
  const past = useQuery({ ...pastQuery(designId, sequence), enabled: point.kind === 'patch' });
  const answer = point.kind === 'revision' ? frozen : past;
  const document = answer.data?.document;
  const parsed = useMemo(() => (document === undefined ? undefined : parseDesign(document)), [document]);
  const design = point.kind === 'now' ? now : parsed?.ok === true ? parsed.value : undefined;
  return {
    design: useMemo(() => design && withoutIssue(design), [design]),
    sequence,
    failure:
      point.kind === 'now' || answer.error === null
        ? parsed?.ok === false
          ? 'This state of the design can’t be read by this version of the program; choose another.'
          : undefined
        : asApiError(answer.error).message,
  };
}

/** The patches between two moments, the earlier first; none the other way round. */
export function usePatchesBetween(designId: string, from: number, to: number): readonly MadePatch[] {
  return useQuery(patchesQuery(designId, from, to)).data ?? [];
}
