import { useEffect, useMemo, useState } from 'react';
import type { Design } from '../../engine/model/design.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import { useWorkerRun } from '../../lib/use-worker-run.ts';
import { previewOf, previewSteps, type Preview, type PreviewRequest } from './preview.ts';
import { startPreviewWorker } from './start-preview-worker.ts';

/** Typing goes on undisturbed: a preview waits for a pause. */
const pauseMs = 120;
/** A plan of so many sites is drawn before anybody feels it. */
const atOnceUpTo = 16;

export interface ShownPreview {
  /** Absent until the first is there. */
  readonly preview: Preview | undefined;
  /** The form has changed since. */
  readonly behind: boolean;
  /** What is being done, while that takes its time. */
  readonly doing: string | undefined;
  readonly failed: string | undefined;
}

/** What the form comes to, a moment after its last change; a large plan in a worker, each change ending the run before. */
export function usePreview(form: StretchForm, design: Design, numbering: NumberingContext): ShownPreview {
  const [request, setRequest] = useState<PreviewRequest>({ form, design, numbering });
  const isAsked = request.form === form && request.numbering === numbering;
  useEffect(() => {
    if (isAsked) return;
    const timer = setTimeout(() => setRequest({ form, design, numbering }), pauseMs);
    return () => clearTimeout(timer);
  }, [isAsked, form, design, numbering]);
  const isLarge = request.form.sites.length > atOnceUpTo;
  const here = useMemo(() => (isLarge ? undefined : previewOf(request)), [isLarge, request]);
  const run = useWorkerRun<PreviewRequest, Preview>(startPreviewWorker, isLarge ? request : undefined);
  if (!isLarge) return { preview: here, behind: !isAsked, doing: undefined, failed: undefined };
  return {
    preview: run.result,
    behind: !isAsked || run.of !== request,
    doing: run.progress && previewSteps[Math.min(run.progress.done, previewSteps.length - 1)],
    failed: run.failed,
  };
}
