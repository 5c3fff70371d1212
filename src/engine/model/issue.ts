import type { Design } from './design.ts';
import type { MergePatch } from './merge-patch.ts';
import { applyPatch } from './merge-patch.ts';

/** What a title block says of an issue (data fields of ISO 7200:2004, from memory): not the author's to write. */
export interface Issue {
  readonly revision: string;
  readonly status: string;
  readonly approvedBy?: string;
  /** Such as 2027-03-31. */
  readonly dateOfIssue?: string;
}

const issueFields = ['revision', 'status', 'approvedBy', 'dateOfIssue'] as const;

/** The patch that makes a design's title block say this of its issue, and nothing else of it. */
export const issuePatch = (issue: Issue): MergePatch => ({
  meta: Object.fromEntries(issueFields.map((field) => [field, issue[field] ?? null])),
});

/** The design with the title block of an issue. */
export const asIssued = (design: Design, issue: Issue): Design => applyPatch(design, issuePatch(issue));

/** The design without anything of an issue, for telling whether two drawings are the same. */
export const withoutIssue = (design: Design): Design =>
  applyPatch(design, { meta: Object.fromEntries(issueFields.map((field) => [field, null])) });

/** A design with the title block that another one has of its issue. */
export const withIssueOf = (design: Design, { meta }: Pick<Design, 'meta'>): Design =>
  applyPatch(design, { meta: Object.fromEntries(issueFields.map((field) => [field, meta[field] ?? null])) });
