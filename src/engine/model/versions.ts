import { designFormat } from './design.ts';

type Document = { readonly [key: string]: unknown };
/** How to bring a document of one version to the next; keyed by the version it starts from. */
export type Upgrades = { readonly [format: string]: (document: Document) => Document };

const upgrades: Upgrades = {};

/** Brings an older document to the current version; not ok when its format is none that was ever written. */
export const upgradeDesign = (
  input: unknown,
  steps: Upgrades = upgrades,
): { readonly ok: true; readonly value: unknown } | { readonly ok: false } => {
  if (typeof input !== 'object' || input === null || Array.isArray(input)) return { ok: false };
  let document = input as Document;
  for (let guard = 0; guard <= Object.keys(steps).length; guard += 1) {
    if (document.format === designFormat) return { ok: true, value: document };
    const step =
      typeof document.format === 'string' && Object.hasOwn(steps, document.format)
        ? steps[document.format]
        : undefined;
    if (step === undefined) return { ok: false };
    document = step(document);
  }
  return { ok: false };
};
