import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { z } from 'zod';
import type { checkAnswerSchema } from '#contract/engine.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { fixesFor } from '#engine/rules/fixes-for.ts';
import { countBySeverity, runRules } from '#engine/rules/run-rules.ts';
import { computeWire } from '#engine/wire/compute-wire.ts';
import type { WireRequest } from '#engine/wire/wire-request.ts';
import { Refusal } from '../errors.ts';
import { limits } from './limits.ts';
import { countEntries } from './settle-edits.ts';

const manifest = JSON.parse(readFileSync(join(import.meta.dirname, '..', '..', 'package.json'), 'utf8')) as {
  readonly version: string;
};

const mostProblemsShown = 200;

/** Checks a design that is not stored. The work is bounded by the number of its entries. */
export function checkDesign(input: unknown, withFixes: boolean): z.infer<typeof checkAnswerSchema> {
  const parsed = parseDesign(input);
  if (!parsed.ok) {
    throw new Refusal('invalid-design', `The design has problems: ${parsed.problems.length}.`, {
      details: parsed.problems.slice(0, mostProblemsShown).map((problem) => ({
        ...problem,
        path: problem.path === '' ? 'design' : `design.${problem.path}`,
      })),
    });
  }
  const entries = countEntries(parsed.value);
  const most = withFixes ? limits.checkedEntriesWithFixes : limits.checkedEntries;
  if (entries > most) {
    throw new Refusal(
      'too-large',
      `The design has ${entries} entries; at most ${most} are checked here${withFixes ? ' with fixes, more without' : ''}.`,
    );
  }
  const findings = runRules(parsed.value);
  return {
    engineVersion: manifest.version,
    counts: countBySeverity(findings),
    findings: findings.map((finding, index) =>
      withFixes && index < limits.findingsWithFixes
        ? { ...finding, fixes: fixesFor(parsed.value, finding) }
        : { ...finding },
    ),
  };
}

/** The bytes of a stack of headers, with their working. */
export function wireAnswer(request: WireRequest): object {
  const answer = computeWire(request);
  if (answer.ok) {
    const { ok: _ok, ...result } = answer;
    return { engineVersion: manifest.version, ...result };
  }
  throw new Refusal('invalid-request', 'These figures do not go together.', {
    details: answer.problems.map(({ field, value, expected }) => ({
      path: field,
      value: value === undefined ? 'missing' : (JSON.stringify(value) ?? String(value)),
      expected: `expected ${expected}`,
    })),
  });
}
