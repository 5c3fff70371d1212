import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { KnownFinding } from '../../engine/trace/explanations.ts';
import type { ProbeInput } from '../../engine/trace/probe.ts';
import { traceFrame } from '../../engine/trace/trace-frame.ts';
import type { Trace } from '../../engine/trace/trace.ts';
import { unreached } from '../../engine/trace/unreached.ts';
import { whatFits, type WhatFits } from '../../engine/trace/what-fits.ts';
import { hopRows, type HopRow, type StripRow } from './hop-rows.ts';
import { fieldProblem, probeOf, type FieldProblem, type TraceQuestion } from './trace-question.ts';
import { verdictOf, type TraceVerdict } from './trace-verdict.ts';

/** Everything that the strip, the panel and the sheet show of one probe. */
export interface TraceResult {
  readonly probe: ProbeInput;
  readonly trace: Trace;
  readonly rows: readonly StripRow[];
  /** The rows that have a number, in its order. */
  readonly hops: readonly HopRow[];
  readonly verdict: TraceVerdict;
  readonly fits?: WhatFits;
  readonly missed: readonly ElementRef[];
}

export type TraceAnswer =
  | { readonly ok: true; readonly result: TraceResult }
  | { readonly ok: false; readonly problems: readonly FieldProblem[] };

/** Follows the frame of a question; undefined while an end of it is missing. */
export const answerQuestion = (
  design: Design,
  findings: readonly KnownFinding[],
  question: TraceQuestion,
): TraceAnswer | undefined => {
  const probe = probeOf(design, question);
  if (probe === undefined) return undefined;
  const trace = traceFrame(design, probe, { findings });
  if (!trace.ok) return { ok: false, problems: trace.problems.map(fieldProblem) };
  const rows = hopRows(design, probe, trace);
  const fits = whatFits(design, probe);
  return {
    ok: true,
    result: {
      probe,
      trace,
      rows,
      hops: rows.filter((row) => row.kind !== 'branch'),
      verdict: verdictOf(design, probe, trace, rows, fits),
      ...(fits === undefined ? {} : { fits }),
      missed: unreached(design, probe, trace, fits).map((id) => ({ collection: 'devices', id })),
    },
  };
};
