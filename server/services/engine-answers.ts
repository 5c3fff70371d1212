import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { z } from 'zod';
import type {
  checkAnswerSchema,
  loadRequestSchema,
  outageRequestSchema,
  rulesAnswerSchema,
  rulesRequestSchema,
} from '#contract/engine.ts';
import { loadOf } from '#engine/load/load-of.ts';
import type { Design } from '#engine/model/design.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { outage } from '#engine/outage/outage.ts';
import type { Finding } from '#engine/rules/finding.ts';
import { fixesFor } from '#engine/rules/fixes-for.ts';
import { rules } from '#engine/rules/index.ts';
import { ruleReference } from '#engine/rules/rule-reference.ts';
import { countBySeverity, runRules, runTheseRules } from '#engine/rules/run-rules.ts';
import type { Probe } from '#engine/trace/probe.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import type { Problem } from '#engine/wire/problem.ts';
import { computeWire } from '#engine/wire/compute-wire.ts';
import type { WireRequest } from '#engine/wire/wire-request.ts';
import { Refusal } from '../errors.ts';
import { limits } from './limits.ts';
import { countEntries } from './settle-edits.ts';

const manifest = JSON.parse(readFileSync(join(import.meta.dirname, '..', '..', 'package.json'), 'utf8')) as {
  readonly version: string;
};

const mostProblemsShown = 200;

/** A design that is not stored; refuses what is none, and more entries than the work on it may have. */
function readDesign(input: unknown, most: number, howToHaveMore: string): Design {
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
  if (entries > most) {
    throw new Refusal(
      'too-large',
      `The design has ${entries} entries; at most ${most} are checked here${howToHaveMore}.`,
    );
  }
  return parsed.value;
}

/** Checks a design that is not stored. The work is bounded by the number of its entries. */
export function checkDesign(input: unknown, withFixes: boolean): z.infer<typeof checkAnswerSchema> {
  const design = withFixes
    ? readDesign(input, limits.checkedEntriesWithFixes, ' with fixes, more without')
    : readDesign(input, limits.checkedEntries, '');
  const findings = runRules(design);
  return {
    engineVersion: manifest.version,
    counts: countBySeverity(findings),
    findings: findings.map((finding, index) =>
      withFixes && index < limits.findingsWithFixes
        ? { ...finding, fixes: fixesFor(design, finding) }
        : { ...finding },
    ),
  };
}

const refusalOf = (message: string, problems: readonly Problem[]): Refusal =>
  new Refusal('invalid-request', message, {
    details: problems.map(({ field, value, expected }) => ({
      path: field,
      value: value === undefined ? 'missing' : (JSON.stringify(value) ?? String(value)),
      expected: `expected ${expected}`,
    })),
  });

type RulesAnswer = z.infer<typeof rulesAnswerSchema>;

/** The checks that a request asks for and, where it brings a design, what each of them finds there. */
export function rulesAnswer(request: z.infer<typeof rulesRequestSchema>): RulesAnswer {
  const { severities, collections, ids } = request;
  const known = new Set(rules.map(({ id }) => id));
  const unknown = (ids ?? []).flatMap((id, index) =>
    known.has(id) ? [] : [{ field: `ids.${index}`, value: id, expected: 'the id of a check' }],
  );
  if (unknown.length > 0)
    throw refusalOf('There is no such check; a request without ids lists them all.', unknown);
  const asked = ruleReference().filter(
    ({ id, severity, looksAt }) =>
      (ids?.includes(id) ?? true) &&
      (severities?.includes(severity) ?? true) &&
      (collections === undefined || looksAt.some((fact) => collections.includes(fact))),
  );
  const answer = (findings?: readonly Finding[]): RulesAnswer['rules'] =>
    asked.map((rule) => ({
      ...rule,
      sources: [...rule.sources],
      messages: [...rule.messages],
      looksAt: [...rule.looksAt],
      ...(findings === undefined
        ? {}
        : {
            findings: findings
              .filter((finding) => finding.rule === rule.id)
              .map((finding) => ({ ...finding })),
          }),
    }));
  if (request.design === undefined) return { engineVersion: manifest.version, rules: answer() };
  const design = readDesign(request.design, limits.checkedEntries, '');
  const wanted = new Set(asked.map(({ id }) => id));
  const findings = runTheseRules(
    rules.filter(({ id }) => wanted.has(id)),
    design,
  );
  return {
    engineVersion: manifest.version,
    counts: countBySeverity(findings),
    rules: answer(findings),
  };
}

/** The bytes of a stack of headers, with their working. */
export function wireAnswer(request: WireRequest): object {
  const answer = computeWire(request);
  if (!answer.ok) throw refusalOf('These figures do not go together.', answer.problems);
  const { ok: _ok, ...result } = answer;
  return { engineVersion: manifest.version, ...result };
}

/** What happens to one frame in a design that is not stored, with the findings that would have told. */
export function traceAnswer(input: unknown, probe: Probe): object {
  const design = readDesign(input, limits.checkedEntries, '');
  const answer = traceFrame(design, probe, { findings: runRules(design) });
  if (!answer.ok) throw refusalOf('The design does not hold what the probe names.', answer.problems);
  const { ok: _ok, ...result } = answer;
  return { engineVersion: manifest.version, ...result };
}

/** What a design's demands put on it. */
export function loadAnswer({ design, ...options }: z.infer<typeof loadRequestSchema>): object {
  const answer = loadOf(readDesign(design, limits.followedEntries, ' for load'), options);
  if (!answer.ok) throw refusalOf('The load can’t be worked out.', answer.problems);
  const { ok: _ok, ...report } = answer;
  return { engineVersion: manifest.version, ...report };
}

/** What a design loses with some of its elements. */
export function outageAnswer({ design, failed, pairs }: z.infer<typeof outageRequestSchema>): object {
  const read =
    pairs === true
      ? readDesign(design, limits.followedEntriesWithPairs, ' for an outage with its pairs, more without')
      : readDesign(design, limits.followedEntries, ' for an outage');
  const answer = outage(read, failed, { pairs });
  if (!answer.ok) throw refusalOf('The design does not hold what is to fail.', answer.problems);
  const { ok: _ok, ...report } = answer;
  return { engineVersion: manifest.version, ...report };
}
