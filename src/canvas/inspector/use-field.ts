import { showToast } from '../../components/toast.tsx';
import type { CellMark } from '../../components/cell.tsx';
import type { Collection, Design } from '../../engine/model/design.ts';
import { applyPatch, diffPatch, patchAt, type MergePatch } from '../../engine/model/merge-patch.ts';
import { changedProblems } from '../../engine/model/parse-design.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { markAt, type FieldPath } from './field-marks.ts';

type Bag = { readonly [key: string]: unknown };
const isBag = (value: unknown): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

export const valueAt = (document: object, path: FieldPath): unknown =>
  path.reduce<unknown>((at, key) => (isBag(at) && Object.hasOwn(at, key) ? at[key] : undefined), document);

/** The patch that puts a value at a path, whole: what an object there had and the new one lacks goes. */
export const replacePatch = (document: object, path: FieldPath, next: unknown): MergePatch => {
  const before = valueAt(document, path);
  return patchAt(path, isBag(before) && isBag(next) ? diffPatch(before, next) : next);
};

/** What an undo step calls a change: the field and whose it is. */
const changeLabel = (design: Design, label: string, path: FieldPath): string => {
  const [collection, id, inside, port] = path;
  if (collection === 'meta' || collection === 'layout' || id === undefined) return label;
  const ref = { collection: collection as Collection, id };
  return `${label} of ${nameOf(design, inside === 'ports' && port !== undefined ? { ...ref, port } : ref)}`;
};

/** Why the model refuses a patch, as the way out: 'type a VLAN from 1 to 4094; 4095 is reserved'. */
const wayOutOf = (document: Design, patch: MergePatch): string | undefined => {
  const problem = changedProblems(document, applyPatch(document, patch))[0];
  return problem?.expected.replace(/^expected /, 'type ');
};

/** A sentence that names the field, what was typed and the way out. */
export const refusalSentence = (label: string, text: string, wayOut: string): string =>
  text === '' ? `${label} is empty: ${wayOut}.` : `${label} ${text} does not fit: ${wayOut}.`;

/** Applies a change as one undo step. What the model refuses is said in a toast and changes nothing. */
export const useCommit = (): ((label: string, patch: MergePatch) => boolean) => {
  const design = useOpenDesign();
  return (label, patch) => {
    const committed = design.commit(label, patch);
    if (committed.ok) return true;
    const [problem] = committed.problems;
    showToast({
      tone: 'failed',
      text: `${label} was not changed: ${problem === undefined ? 'the design has moved on' : problem.expected}.`,
    });
    return false;
  };
};

export interface Field<T> {
  /** Undefined while it is unknown. */
  readonly value: T | undefined;
  readonly marked: CellMark | undefined;
  readonly editable: boolean;
  /** Why a value can't stand here, in a sentence; undefined when it can. */
  readonly refusal: (label: string, text: string, next: T | undefined) => string | undefined;
  /** Sets the value, or makes it unknown; one undo step. */
  readonly commit: (label: string, next: T | undefined) => void;
}

/** Binds one place of the open design to a cell. */
export const useField = <T>(path: FieldPath): Field<T> => {
  const design = useOpenDesign();
  const commit = useCommit();
  const value = useOpenState((state) => valueAt(state.document, path)) as T | undefined;
  const editable = useOpenState((state) => state.editable);
  const { openFindings } = useChecks();
  const patchOf = (next: T | undefined): MergePatch =>
    replacePatch(design.store.getState().document, path, next);
  return {
    value,
    marked: markAt(openFindings, path),
    editable,
    refusal: (label, text, next) => {
      const wayOut = wayOutOf(design.store.getState().document, patchOf(next));
      return wayOut === undefined ? undefined : refusalSentence(label, text, wayOut);
    },
    commit: (label, next) => {
      commit(changeLabel(design.store.getState().document, label, path), patchOf(next));
    },
  };
};

/** The document's part at a path, followed as it changes; undefined where there is nothing. */
export const useAt = <T>(path: FieldPath): T | undefined =>
  useOpenState((state) => valueAt(state.document, path)) as T | undefined;

export const useEditable = (): boolean => useOpenState((state) => state.editable);
