import type { Thread } from '../../contract/comments.ts';
import type { Decorations } from '../../drawing/decorations.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { refOfPin } from './filter-threads.ts';
import { isThere } from './pin-words.ts';

/** The slips of open threads: one at each element that has some. */
export const commentFlags = (
  threads: readonly Thread[],
  design: Design,
): NonNullable<Decorations['flags']> => {
  const byPlace = new Map<string, { readonly at: ElementRef; readonly threads: Thread[] }>();
  for (const thread of threads) {
    const at = refOfPin(thread.pin);
    if (thread.resolvedAt !== null || at === undefined || !isThere(design, at)) continue;
    const place = byPlace.get(elementKey(at));
    if (place === undefined) byPlace.set(elementKey(at), { at, threads: [thread] });
    else place.threads.push(thread);
  }
  return [...byPlace.values()].map(({ at, threads: here }) => ({
    at,
    count: here.length,
    suggests: here.some(({ comments }) =>
      comments.some(({ suggestion }) => suggestion !== null && suggestion.appliedAt === null),
    ),
  }));
};
