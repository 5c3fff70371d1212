import { compareDesigns } from '../../engine/diff/compare-designs.ts';
import type { Told } from '../../workspace/meet-others.ts';

/** What two people's work on the same things comes to, in a sentence or two; undefined where both meant the same. */
export const toldWords = (told: Told): string | undefined => {
  if (told.kind === 'taken-over')
    return `Nothing taken back: ${told.by} has since changed what '${told.label}' did.`;
  const [first, ...more] = compareDesigns(told.before, told.after).changes;
  if (first === undefined) return undefined;
  const what = `${first.sentence}${more.length === 0 ? '' : `, and ${more.length} more`}`;
  return told.stands === 'theirs'
    ? `${told.by} changed the same after you. ${what}.`
    : `${told.by} changed the same just before you; yours stands. ${what}.`;
};
