import type { ClassSet } from './frame-classes.ts';
import type { FloodGraph } from './flood-graph.ts';

export interface StrongComponents {
  /** By node. Numbers of components without an edge inside are there, too. */
  readonly componentOf: Int32Array;
  readonly count: number;
  /** Components with an edge inside, each with its nodes in order. */
  readonly cyclic: readonly (readonly number[])[];
}

/**
 * The strongly connected components of the flood graph, over the edges open to any of `classes` and the nodes not left out
 * (Tarjan 1972, without recursion: linear in the edges).
 */
export const strongComponents = (
  graph: FloodGraph,
  classes: ClassSet,
  isLeftOut: (node: number) => boolean = () => false,
): StrongComponents => {
  const { nodeCount, edgeStart, edgeTo, edgeClasses } = graph;
  const order = new Int32Array(nodeCount).fill(-1);
  const low = new Int32Array(nodeCount);
  const componentOf = new Int32Array(nodeCount).fill(-1);
  const nextEdge = new Int32Array(nodeCount);
  const open: number[] = [];
  const path: number[] = [];
  const cyclic: (readonly number[])[] = [];
  let time = 0;
  let count = 0;

  const enter = (node: number): void => {
    order[node] = low[node] = time;
    time += 1;
    nextEdge[node] = edgeStart[node]!;
    open.push(node);
    path.push(node);
  };
  const close = (node: number): void => {
    const members: number[] = [];
    for (;;) {
      const member = open.pop()!;
      componentOf[member] = count;
      members.push(member);
      if (member === node) break;
    }
    count += 1;
    if (members.length > 1 || hasOwnEdge(node)) cyclic.push(members.sort((a, b) => a - b));
  };
  const hasOwnEdge = (node: number): boolean => {
    for (let edge = edgeStart[node]!; edge < edgeStart[node + 1]!; edge += 1)
      if (edgeTo[edge] === node && (edgeClasses[edge]! & classes) !== 0) return true;
    return false;
  };

  for (let root = 0; root < nodeCount; root += 1) {
    if (order[root] !== -1 || isLeftOut(root)) continue;
    enter(root);
    while (path.length > 0) {
      const node = path.at(-1)!;
      const edge = nextEdge[node]!;
      if (edge < edgeStart[node + 1]!) {
        nextEdge[node] = edge + 1;
        const target = edgeTo[edge]!;
        if ((edgeClasses[edge]! & classes) === 0 || isLeftOut(target)) continue;
        if (order[target] === -1) enter(target);
        else if (componentOf[target] === -1) low[node] = Math.min(low[node]!, order[target]!);
      } else {
        path.pop();
        const above = path.at(-1);
        if (above !== undefined) low[above] = Math.min(low[above]!, low[node]!);
        if (low[node] === order[node]) close(node);
      }
    }
  }
  return { componentOf, count, cyclic };
};
