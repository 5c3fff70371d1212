import type { Design } from '#engine/model/design.ts';
import type { KnownFinding } from '#engine/trace/explanations.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { HopRow } from '../../../src/features/trace/hop-rows.ts';
import type { TraceQuestion } from '../../../src/features/trace/trace-question.ts';
import { answerQuestion, type TraceResult } from '../../../src/features/trace/trace-result.ts';

/** What comes of a question that can be answered. */
export const resultOf = (
  design: Design,
  question: TraceQuestion,
  findings: readonly KnownFinding[] = runRules(design),
): TraceResult => {
  const answer = answerQuestion(design, findings, question);
  if (answer?.ok !== true) throw new Error(JSON.stringify(answer ?? 'an end is missing'));
  return answer.result;
};

/** From the head office's host to the first spoke's. */
export const toFirstSpoke = (change: Partial<TraceQuestion> = {}): TraceQuestion => ({
  send: 'tcp-full-size',
  from: { host: 'h-s0-a' },
  to: 'h-s1-a',
  ...change,
});

export const titled = ({ hops }: TraceResult, title: string): HopRow => {
  const row = hops.find((one) => one.title === title);
  if (row === undefined) throw new Error(`${title} is none of ${hops.map((one) => one.title).join('; ')}`);
  return row;
};
