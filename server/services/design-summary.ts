import type { Counts, DesignSummary } from '#contract/designs.ts';
import type { Design } from '#engine/model/design.ts';
import { countBySeverity, runRules } from '#engine/rules/run-rules.ts';
import type { DesignRow, DocumentSummary } from '../repositories/designs.ts';

/** What lists show of a document: words of its title block, and how many findings the checks have. */
export function summarise(document: Design): DocumentSummary {
  const { title, identification, revision } = document.meta;
  return {
    title,
    identification: identification ?? null,
    revision: revision ?? null,
    counts: countFindings(document),
  };
}

export function countFindings(document: Design): Counts {
  return countBySeverity(runRules(document));
}

export function summaryOf(row: DesignRow): DesignSummary {
  return {
    id: row.id,
    engagementId: row.engagementId,
    title: row.title,
    identification: row.identification,
    revision: row.revision,
    state: row.state,
    counts: row.counts,
    sequence: row.sequence,
    changedAt: row.changedAt.toISOString(),
    changedBy: row.changedBy,
    archivedAt: row.archivedAt?.toISOString() ?? null,
  };
}
