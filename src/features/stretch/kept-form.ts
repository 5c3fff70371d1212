import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import { stretchFormSchema } from '../../engine/stretch/stretch-form.ts';

const storageKey = (designId: string): string => `longpatch.stretch.${designId}`;

/** The form that somebody left unfinished for a design in this tab; undefined where there is none. */
export const keptForm = (designId: string): StretchForm | undefined => {
  try {
    const text = sessionStorage.getItem(storageKey(designId));
    if (text === null) return undefined;
    const form: unknown = JSON.parse(text);
    // Values may still be wrong, as whoever types is not done; the shape has to be the form's.
    const read = stretchFormSchema.safeParse(form);
    return read.success || isForm(form) ? (form as StretchForm) : undefined;
  } catch {
    return undefined;
  }
};

const isForm = (form: unknown): boolean =>
  typeof form === 'object' &&
  form !== null &&
  ['sites', 'transports', 'segments'].every(
    (list) => Array.isArray((form as Record<string, unknown>)[list]) && (form as never)[list] !== undefined,
  ) &&
  'topology' in form;

export const keepForm = (designId: string, form: StretchForm | undefined): void => {
  try {
    if (form === undefined) sessionStorage.removeItem(storageKey(designId));
    else sessionStorage.setItem(storageKey(designId), JSON.stringify(form));
  } catch {
    // Without storage the form lasts as long as the page.
  }
};
