import { collections, type Collection, type ElementRef } from '../engine/model/design.ts';

/** Reads an element's key back; undefined when it is none. */
export const refOfKey = (key: string): ElementRef | undefined => {
  const match = /^([a-z]+)\/([^/@]+)(?:\/([^@]+))?(?:@([12]))?$/.exec(key);
  if (match === null || !collections.includes(match[1] as Collection)) return undefined;
  return {
    collection: match[1] as Collection,
    id: match[2]!,
    ...(match[3] === undefined ? {} : { port: match[3] }),
    ...(match[4] === undefined ? {} : { member: Number(match[4]) as 1 | 2 }),
  };
};

/** The element that the pointer is on: the innermost that is marked. A grip stands for its port. */
export const refAt = (target: Element): ElementRef | undefined => {
  const grip = target.closest('.grip:not(.grip-body)');
  const node = grip?.closest('.react-flow__node')?.getAttribute('data-id');
  const handle = grip?.getAttribute('data-handleid');
  if (node != null && handle?.startsWith('port:')) {
    const [port, member] = handle.slice(5).split('@');
    return refOfKey(`${node}/${port}${member === undefined ? '' : `@${member}`}`);
  }
  const key = target.closest('[data-ref]')?.getAttribute('data-ref');
  return key === null || key === undefined ? undefined : refOfKey(key);
};

/** The element whose node or line of the canvas holds a target, where nothing inside it is marked. */
export const elementAt = (target: Element): ElementRef | undefined => {
  const marked = refAt(target);
  if (marked !== undefined) return marked;
  const id = target.closest('.react-flow__node, .react-flow__edge')?.getAttribute('data-id');
  // A cable's second line and the parts of a jacket count on after a '#'.
  return id === null || id === undefined ? undefined : refOfKey(id.split('#')[0]!);
};
