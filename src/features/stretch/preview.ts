import type { SheetGeometry } from '../../drawing/geometry.ts';
import { noDecorations } from '../../drawing/decorations.ts';
import { drawSheet, sheetOfDesign } from '../../drawing/sheets/draw-sheet.ts';
import { sheetFacts } from '../../drawing/sheets/sheet-facts.ts';
import { sheetShapes } from '../../drawing/svg/sheet-shapes.ts';
import type { Layer } from '../../drawing/svg/standalone-svg.ts';
import { tidy } from '../../drawing/tidy/tidy.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design } from '../../engine/model/design.ts';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import type { Finding } from '../../engine/rules/finding.ts';
import { runRules } from '../../engine/rules/run-rules.ts';
import { stretch } from '../../engine/stretch/stretch.ts';
import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import type { Problem } from '../../engine/wire/problem.ts';
import { endOf, type Progress } from '../../lib/worker-run.ts';

/** What a form would put on the sheet. */
export type Preview =
  | { readonly ok: false; readonly problems: readonly Problem[] }
  | {
      readonly ok: true;
      readonly design: Design;
      readonly sheet: SheetGeometry['sheet'];
      readonly layers: readonly Layer[];
      readonly findings: readonly Finding[];
    };

/** What a preview is made of. */
export interface PreviewRequest {
  readonly form: StretchForm;
  readonly design: Design;
  readonly numbering: NumberingContext;
}

/** What a preview is doing at each of its steps. */
export const previewSteps = ['Numbering', 'Laying out', 'Drawing', 'Checking'] as const;

/** Builds, lays out, draws and checks what a form describes, on a design that stays as it is. */
export function* previewRun({
  form,
  design: start,
  numbering,
}: PreviewRequest): Generator<Progress, Preview> {
  const at = (done: number): Progress => ({ done, total: previewSteps.length });
  yield at(0);
  const answer = stretch(form, { design: start, newId: (stem) => stem, numbering });
  if (!answer.ok) return answer;
  const built = applyPatch(start, answer.patch);
  yield at(1);
  const design = applyPatch(built, tidy(built));
  yield at(2);
  const geometry = drawSheet(design);
  const layers = sheetShapes(geometry, {
    level: 'plan',
    decorations: noDecorations,
    facts: sheetFacts(sheetOfDesign(design), tunnelSegments(indexNetwork(design))),
  });
  yield at(3);
  return {
    ok: true,
    design,
    sheet: geometry.sheet,
    layers,
    findings: runRules(design, numbering),
  };
}

export const previewOf = (request: PreviewRequest): Preview => endOf(previewRun(request));
