/** Binary heap of (cost, node); the node number breaks ties. */
export const costHeap = () => {
  let costs = new Float64Array(1024);
  let nodes = new Int32Array(1024);
  let size = 0;
  return {
    clear: (): void => {
      size = 0;
    },
    isEmpty: (): boolean => size === 0,
    push: (cost: number, node: number): void => {
      if (size === costs.length) {
        const [moreCosts, moreNodes] = [new Float64Array(2 * size), new Int32Array(2 * size)];
        moreCosts.set(costs);
        moreNodes.set(nodes);
        [costs, nodes] = [moreCosts, moreNodes];
      }
      let i = size;
      size += 1;
      while (i > 0) {
        const parent = (i - 1) >> 1;
        const above = costs[parent]!;
        if (above < cost || (above === cost && nodes[parent]! <= node)) break;
        costs[i] = above;
        nodes[i] = nodes[parent]!;
        i = parent;
      }
      costs[i] = cost;
      nodes[i] = node;
    },
    pop: (): number => {
      const top = nodes[0]!;
      size -= 1;
      const cost = costs[size]!;
      const node = nodes[size]!;
      let i = 0;
      for (let left = 1; left < size; left = 2 * i + 1) {
        const beside = left + 1;
        const isBesideLess =
          beside < size &&
          (costs[beside]! < costs[left]! ||
            (costs[beside]! === costs[left]! && nodes[beside]! < nodes[left]!));
        const child = isBesideLess ? beside : left;
        const below = costs[child]!;
        if (below > cost || (below === cost && nodes[child]! >= node)) break;
        costs[i] = below;
        nodes[i] = nodes[child]!;
        i = child;
      }
      costs[i] = cost;
      nodes[i] = node;
      return top;
    },
  };
};
