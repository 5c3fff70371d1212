import type { Severity } from '../../components/severity-mark.tsx';

/** A change that cures a finding, as a button and a sentence. */
export interface FindingFix {
  readonly id: string;
  readonly label: string;
  readonly sentence: string;
}

/** Who accepted a finding, until when and why. */
export interface WaiverWords {
  readonly id: string;
  readonly by: string | null;
  /** In words: '31 March 2027'. */
  readonly until: string;
  readonly reason: string;
}

/** A finding as the list shows it. */
export interface FindingItem {
  readonly key: string;
  /** Also in the balloon on the sheet. */
  readonly number: number;
  readonly severity: Severity;
  /** Why this one is milder or harder than usual. */
  readonly severityReason?: string;
  /** Without a final stop. */
  readonly sentence: string;
  /** The names of what it is about, such as 'vms-1, fw-ho-1'. */
  readonly elements: string;
  /** Where on the sheet, such as 'B5' or 'C5–E8'; absent when nothing of it is placed. */
  readonly zone?: string;
  readonly why: string;
  readonly seen: string;
  /** Document and clause, each as one text. */
  readonly sources: readonly string[];
  /** Undefined until they have been worked out. */
  readonly fixes: readonly FindingFix[] | undefined;
  /** While it is accepted. */
  readonly waiver?: WaiverWords;
}
