/**
 * Sets of items that belong together because each shares a mark with another, directly or through others. Items without
 * company are left out. Sets and their items are in order of text.
 */
export const sharedSets = (
  marked: Iterable<readonly [mark: string, item: string]>,
): readonly (readonly string[])[] => {
  const parent = new Map<string, string>();
  const root = (item: string): string => {
    let at = item;
    while (parent.get(at) !== at) at = parent.get(at)!;
    // Shortens the way for the next one who asks.
    for (let step = item; step !== at;) {
      const next = parent.get(step)!;
      parent.set(step, at);
      step = next;
    }
    return at;
  };
  const firstByMark = new Map<string, string>();
  for (const [mark, item] of marked) {
    if (!parent.has(item)) parent.set(item, item);
    const first = firstByMark.get(mark);
    if (first === undefined) firstByMark.set(mark, item);
    else parent.set(root(item), root(first));
  }
  const sets = new Map<string, string[]>();
  for (const item of [...parent.keys()].sort()) {
    const set = sets.get(root(item));
    if (set === undefined) sets.set(root(item), [item]);
    else set.push(item);
  }
  return [...sets.values()].filter((set) => set.length > 1);
};
