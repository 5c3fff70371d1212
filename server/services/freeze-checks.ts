import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Design } from '#engine/model/design.ts';
import { compareFindings } from '#engine/rules/finding.ts';
import type { Finding } from '#engine/rules/finding.ts';
import { countBySeverity } from '#engine/rules/run-rules.ts';
import type { FrozenChecks } from '../repositories/revisions.ts';
import type { CheckFacts } from './check-facts.ts';
import { findingsBy } from './check-facts.ts';
import { waiverOf } from './waivers.ts';

const manifest = JSON.parse(readFileSync(join(import.meta.dirname, '..', '..', 'package.json'), 'utf8')) as {
  readonly version: string;
};

/** What the checks say of a document now, to be kept with its revision; and the findings that no waiver covers. */
export function freezeChecks(
  document: Design,
  facts: CheckFacts,
): { readonly checks: FrozenChecks; readonly open: readonly Finding[] } {
  const { open, covered } = findingsBy(document, facts);
  return {
    open,
    checks: {
      engineVersion: manifest.version,
      counts: countBySeverity(open),
      findings: [...open, ...covered.map(({ finding }) => finding)].sort(compareFindings),
      waivers: covered.map(({ waiver }) => waiverOf(waiver)),
    },
  };
}
