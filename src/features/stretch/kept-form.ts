import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import { stretchFormSchema } from '../../engine/stretch/stretch-form.ts';

const storageKey = (designId: string): string => `longpatch.stretch.${designId}`;

/** Values may be wrong where somebody was still typing; what the form is made of may not. */
const isHalfDone = ({
  code,
  path,
}: {
  readonly code?: string;
  readonly path: readonly PropertyKey[];
}): boolean =>
  ['too_small', 'too_big', 'invalid_format', 'custom'].includes(code ?? '') ||
  (code === 'invalid_union' && path.at(-1) === 'address');

/** The form that somebody left unfinished for a design in this tab; undefined where there is none. */
export const keptForm = (designId: string): StretchForm | undefined => {
  try {
    const form: unknown = JSON.parse(sessionStorage.getItem(storageKey(designId)) ?? 'null');
    const read = stretchFormSchema.safeParse(form);
    return read.success || read.error.issues.every(isHalfDone) ? (form as StretchForm) : undefined;
  } catch {
    return undefined;
  }
};

export const keepForm = (designId: string, form: StretchForm | undefined): void => {
  try {
    if (form === undefined) sessionStorage.removeItem(storageKey(designId));
    else sessionStorage.setItem(storageKey(designId), JSON.stringify(form));
  } catch {
    // Without storage the form lasts as long as the page.
  }
};
