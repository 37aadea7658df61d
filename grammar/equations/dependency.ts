/**
 * Strongly connected groups of a directed graph, each after those that it depends on (R. E. Tarjan, Depth-first
 * search and linear graph algorithms, SIAM Journal on Computing 1, 1972; reference from memory). Without recursion.
 */
export function connectedGroups(count: number, edges: (vertex: number) => readonly number[]): number[][] {
  const index = new Int32Array(count).fill(-1);
  const low = new Int32Array(count);
  const onStack = new Uint8Array(count);
  const stack: number[] = [];
  const groups: number[][] = [];
  const path: number[] = [];
  const lists: (readonly number[])[] = [];
  const next: number[] = [];
  let counter = 0;
  const enter = (vertex: number) => {
    index[vertex] = low[vertex] = counter;
    counter += 1;
    stack.push(vertex);
    onStack[vertex] = 1;
    path.push(vertex);
    lists.push(edges(vertex));
    next.push(0);
  };
  for (let root = 0; root < count; root += 1) {
    if (index[root] !== -1) continue;
    enter(root);
    while (path.length > 0) {
      const top = path.length - 1;
      const vertex = path[top];
      if (next[top] < lists[top].length) {
        const to = lists[top][next[top]];
        next[top] += 1;
        if (index[to] === -1) enter(to);
        else if (onStack[to] === 1) low[vertex] = Math.min(low[vertex], index[to]);
        continue;
      }
      path.pop();
      lists.pop();
      next.pop();
      if (path.length > 0) low[path[top - 1]] = Math.min(low[path[top - 1]], low[vertex]);
      if (low[vertex] === index[vertex]) groups.push(takeGroup(stack, onStack, vertex));
    }
  }
  return groups;
}

function takeGroup(stack: number[], onStack: Uint8Array, root: number): number[] {
  const group: number[] = [];
  for (;;) {
    const vertex = stack.pop() as number;
    onStack[vertex] = 0;
    group.push(vertex);
    if (vertex === root) return group;
  }
}
