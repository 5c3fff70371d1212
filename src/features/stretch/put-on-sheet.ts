import { layOut } from '../../canvas/elk/lay-out.ts';
import { tidyHere, tidyInWorker } from '../../canvas/tidy-in-worker.ts';
import { tidyOneSite, tidySheet } from '../../canvas/tidy-sheet.ts';
import type { Design } from '../../engine/model/design.ts';
import { applyPatch, joinPatches } from '../../engine/model/merge-patch.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import type { OpenDesign } from '../../workspace/open-design.ts';

// A small sheet is laid out sooner than a worker is fetched.
const isLarge = ({ sites }: Design): boolean => Object.keys(sites).length > 16;

/**
 * Commits what an assistant made, laid out, as one step: the whole sheet anew, or only the site that got something. Answers
 * why not, in words for the person.
 */
export const putOnSheet = async (
  open: OpenDesign,
  label: string,
  facts: MergePatch,
  site?: string,
): Promise<string | undefined> => {
  const { document } = open.store.getState();
  const built = applyPatch(document, facts);
  let layout: MergePatch;
  try {
    layout =
      site === undefined
        ? await tidySheet(built, layOut, isLarge(built) ? tidyInWorker : tidyHere)
        : await tidyOneSite(built, site, layOut);
  } catch {
    return 'The layout could not be worked out. Check your connection and try again.';
  }
  if (open.store.getState().document !== document)
    return 'The design changed meanwhile. Look at the form once more and try again.';
  const done = open.commit(label, joinPatches(document, [facts, layout]));
  return done.ok ? undefined : done.problems.map(({ path, expected }) => `${path}: ${expected}`).join('; ');
};
