import { createHash } from 'node:crypto';
import type { DesignSummary } from '#contract/designs.ts';
import { profileIdOf } from '#contract/profiles.ts';
import type { Design } from '#engine/model/design.ts';
import { numbersOf } from '#engine/numbering/numbers-of.ts';
import { countBySeverity } from '#engine/rules/run-rules.ts';
import type { DesignRow, DocumentSummary, OpenCounts, ProfileCopies } from '../repositories/designs.ts';
import type { CheckFacts } from './check-facts.ts';
import { findingsBy, nothingKnown } from './check-facts.ts';

/** What lists show of a document, and what the workspace's other designs need to know of it. */
export function summarise(document: Design, facts: CheckFacts = nothingKnown): DocumentSummary {
  const { title, identification, revision } = document.meta;
  return {
    title,
    identification: identification ?? null,
    revision: revision ?? null,
    ...countOpen(document, facts),
    numbers: numbersOf(document),
    profileCopies: profileCopiesIn(document),
  };
}

/** How many findings no waiver covers, and until when that is so: the first of those waivers to end ends it. */
export function countOpen(document: Design, facts: CheckFacts): OpenCounts {
  const { open, covered } = findingsBy(document, facts);
  const [countsUntil = null] = covered.map(({ waiver }) => waiver.expiresOn).sort();
  return { counts: countBySeverity(open), countsUntil };
}

function profileCopiesIn(document: Design): ProfileCopies {
  const devices = Object.values(document.devices);
  return Object.fromEntries(
    Object.entries(document.profiles)
      .filter(([id]) => profileIdOf(id) !== undefined)
      .map(([id, profile]) => [
        id,
        { digest: digestOf(profile), devices: devices.filter((device) => device.profile === id).length },
      ]),
  );
}

/** A short text that is the same for JSON values that say the same, whatever the order of their keys. */
export function digestOf(value: unknown): string {
  return createHash('sha256').update(JSON.stringify(value, sortedKeys)).digest('base64url');
}

function sortedKeys(_key: string, value: unknown): unknown {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return value;
  return Object.fromEntries(Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1)));
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
    deletedAt: row.deletedAt?.toISOString() ?? null,
    issued: row.issued,
  };
}
