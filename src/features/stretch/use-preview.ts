import { useEffect, useState } from 'react';
import type { Design } from '../../engine/model/design.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import type { Preview } from './preview.ts';
import { previewOf } from './preview.ts';

/** Typing goes on undisturbed: a large plan waits for a longer pause. */
const pauseMs = ({ sites }: StretchForm): number => (sites.length > 16 ? 700 : 120);

interface Shown {
  readonly of: StretchForm;
  readonly preview: Preview;
}

/** What the form comes to, a moment after its last change; `behind` while that is still to be worked out. */
export function usePreview(
  form: StretchForm,
  design: Design,
  numbering: NumberingContext,
): { readonly preview: Preview; readonly behind: boolean } {
  const [shown, setShown] = useState<Shown>(() => ({
    of: form,
    preview: previewOf(form, design, numbering),
  }));
  useEffect(() => {
    if (shown.of === form) return;
    const timer = setTimeout(
      () => setShown({ of: form, preview: previewOf(form, design, numbering) }),
      pauseMs(form),
    );
    return () => clearTimeout(timer);
  }, [form, shown.of, design, numbering]);
  return { preview: shown.preview, behind: shown.of !== form };
}
