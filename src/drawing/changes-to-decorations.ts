import type { Change } from '../engine/diff/change.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import type { Decorations, Tone } from './decorations.ts';
import { elementKey, noDecorations } from './decorations.ts';

/** What stands for each kind of change on the sheet: a sign beside the element, never its colour alone. */
export const changeSigns: { readonly [kind in Change['kind']]: string } = {
  added: '+',
  removed: '−',
  changed: 'Δ',
};

const strongest = ['added', 'removed', 'changed'] as const;

/** The element that shows a change: what a forwarder does is seen at its device, a port's at the plate that it is on. */
const shownAt = (design: Design, { collection, id }: ElementRef): ElementRef | undefined => {
  if (collection === 'forwarders') {
    const device = design.forwarders[id]?.device;
    return device === undefined ? undefined : { collection: 'devices', id: device };
  }
  return collection === 'segments' || collection === 'demands' || collection === 'profiles'
    ? undefined
    : { collection, id };
};

/**
 * Marks what was added, removed or changed on a drawing of both designs. What merely moved wears no mark; `chosen` is the
 * change that the reader points at.
 */
export const changesToDecorations = (
  both: Design,
  changes: readonly Change[],
  chosen?: Change,
): Decorations => {
  const kinds = new Map<string, { readonly at: ElementRef; readonly kind: Change['kind'] }>();
  for (const { ref, kind, paths } of changes) {
    const movedAlone = paths.every(([root]) => root === 'layout');
    const at = ref === null || movedAlone ? undefined : shownAt(both, ref);
    if (at === undefined || ref === null) continue;
    // A part that came to an element changes that element.
    const isWhole = at.collection === ref.collection && ref.port === undefined && paths[0]?.length === 2;
    const shown = isWhole ? kind : 'changed';
    const key = elementKey(at);
    const before = kinds.get(key)?.kind;
    if (before === undefined || strongest.indexOf(shown) < strongest.indexOf(before))
      kinds.set(key, { at, kind: shown });
  }
  const tones: Record<string, readonly Tone[]> = {};
  for (const [key, { kind }] of kinds) tones[key] = [kind];
  const pointed = chosen?.ref == null ? undefined : shownAt(both, chosen.ref);
  if (pointed !== undefined) {
    const key = elementKey(pointed);
    tones[key] = [...(tones[key] ?? []), 'selected'];
  }
  return {
    ...noDecorations,
    tones,
    tags: [...kinds.values()].map(({ at, kind }) => ({
      at,
      text: changeSigns[kind],
      strong: kind !== 'changed',
    })),
  };
};
