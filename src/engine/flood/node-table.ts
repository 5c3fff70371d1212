import type { Tags } from '../network/frame-tags.ts';
import type { Direction } from './places.ts';

export interface NodeTable {
  /** By node: what it crosses. */
  readonly element: readonly number[];
  readonly direction: readonly Direction[];
  readonly tags: readonly Tags[];
  /** The node of a crossing, or -1. */
  readonly find: (element: number, direction: Direction, tags: Tags) => number;
  /** The node of a crossing, the next number if it has none yet. */
  readonly numberOf: (element: number, direction: Direction, tags: Tags) => number;
}

const leastSlots = 1 << 12;

/** Numbers crossings in the order in which they are met: a hash table of numbers alone, since a design has very many. */
export const nodeTable = (): NodeTable => {
  const element: number[] = [];
  const direction: Direction[] = [];
  const tags: Tags[] = [];
  // Nodes by the hash of their crossing, or in the next free slot after it; never more than half full.
  let slots = new Int32Array(leastSlots).fill(-1);

  const slotFor = (crossed: number, way: Direction, wire: Tags): number => {
    const mask = slots.length - 1;
    const mixed = Math.imul(crossed * 2 + way, 0x9e3779b1) ^ Math.imul(wire, 0x85ebca6b);
    let slot = (mixed ^ (mixed >>> 15)) & mask;
    for (let node = slots[slot]!; node >= 0; node = slots[slot]!) {
      if (element[node] === crossed && tags[node] === wire && direction[node] === way) return slot;
      slot = (slot + 1) & mask;
    }
    return slot;
  };
  const grow = (): void => {
    slots = new Int32Array(slots.length * 2).fill(-1);
    for (let node = 0; node < element.length; node += 1)
      slots[slotFor(element[node]!, direction[node]!, tags[node]!)] = node;
  };

  return {
    element,
    direction,
    tags,
    find: (crossed, way, wire) => slots[slotFor(crossed, way, wire)]!,
    numberOf: (crossed, way, wire) => {
      const slot = slotFor(crossed, way, wire);
      const known = slots[slot]!;
      if (known >= 0) return known;
      const fresh = element.length;
      element.push(crossed);
      direction.push(way);
      tags.push(wire);
      slots[slot] = fresh;
      if (element.length * 2 > slots.length) grow();
      return fresh;
    },
  };
};
