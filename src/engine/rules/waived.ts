import type { Finding } from './finding.ts';

/** What the checks need to know of a waiver: which finding it is bound to, and until when. */
export interface WaiverTerms {
  readonly findingKey: string;
  /** Of the finding as it was when somebody looked at it. */
  readonly fingerprint: string;
  /** The last day on which it holds, such as 2027-03-31. */
  readonly expiresOn: string;
  /** When it was taken back; null while it stands. */
  readonly withdrawnAt: string | null;
}

/** Why a waiver no longer holds: its day is past, the finding's values changed, or the design no longer has the finding. */
export type Lapse = 'expired' | 'changed' | 'gone';

export interface Waived<W extends WaiverTerms> {
  /** Findings that no waiver covers, in their order. */
  readonly open: readonly Finding[];
  /** Findings that are accepted for the time being, in their order. */
  readonly covered: readonly { readonly finding: Finding; readonly waiver: W }[];
  /** Waivers that hold no longer and were not taken back, in their order; with the finding where it is still there. */
  readonly lapsed: readonly { readonly waiver: W; readonly why: Lapse; readonly finding?: Finding }[];
}

const lapseOf = (waiver: WaiverTerms, finding: Finding | undefined, today: string): Lapse | undefined => {
  if (finding === undefined) return 'gone';
  if (finding.fingerprint !== waiver.fingerprint) return 'changed';
  // Dates of one form compare as text.
  return waiver.expiresOn < today ? 'expired' : undefined;
};

/**
 * Which findings are waived on a day. A waiver holds up to and with its last day while the finding has the key and the
 * fingerprint that it was given for; of several the first counts.
 */
export const applyWaivers = <W extends WaiverTerms>(
  findings: readonly Finding[],
  waivers: readonly W[],
  today: string,
): Waived<W> => {
  const standing = waivers.filter(({ withdrawnAt }) => withdrawnAt === null);
  if (standing.length === 0) return { open: findings, covered: [], lapsed: [] };
  const byKey = new Map(findings.map((finding) => [finding.key, finding]));
  const waiverOf = new Map<string, W>();
  const lapsed: { waiver: W; why: Lapse; finding?: Finding }[] = [];
  for (const waiver of standing) {
    const finding = byKey.get(waiver.findingKey);
    const why = lapseOf(waiver, finding, today);
    if (why !== undefined) lapsed.push({ waiver, why, ...(finding === undefined ? {} : { finding }) });
    else if (!waiverOf.has(waiver.findingKey)) waiverOf.set(waiver.findingKey, waiver);
  }
  return {
    open: findings.filter(({ key }) => !waiverOf.has(key)),
    covered: findings.flatMap((finding) => {
      const waiver = waiverOf.get(finding.key);
      return waiver === undefined ? [] : [{ finding, waiver }];
    }),
    // One that was given anew needs no words about the old one.
    lapsed: lapsed.filter(({ waiver }) => !waiverOf.has(waiver.findingKey)),
  };
};
