/**
 * One search of the matching algorithm of J. Edmonds, Can. J. Math. 17, 449 (1965): looks for an alternating path from the unmatched
 * vertex `root` to another unmatched vertex, contracting odd cycles on the way.
 *
 * `around` holds the neighbours of each vertex; `mate` the partner of each vertex or -1, and is changed when a path is found.
 * Returns whether the root found a partner.
 */
export function augment(root: number, around: readonly (readonly number[])[], mate: Int32Array): boolean {
  const count = mate.length;
  const parent = new Int32Array(count).fill(-1);
  const base = Int32Array.from({ length: count }, (_, i) => i);
  const outer = new Uint8Array(count);
  const queue = [root];
  outer[root] = 1;
  for (const v of queue)
    for (const to of around[v]) {
      if (base[v] === base[to] || mate[v] === to) continue;
      if (to === root || (mate[to] >= 0 && parent[mate[to]] >= 0)) contract(v, to);
      else if (parent[to] < 0) {
        parent[to] = v;
        if (mate[to] < 0) {
          flip(to);
          return true;
        }
        outer[mate[to]] = 1;
        queue.push(mate[to]);
      }
    }
  return false;

  function flip(end: number): void {
    for (let v = end; v >= 0; ) {
      const before = parent[v];
      const next = mate[before];
      mate[v] = before;
      mate[before] = v;
      v = next;
    }
  }

  function contract(v: number, to: number): void {
    const top = commonBase(v, to);
    const blossom = new Uint8Array(count);
    markPath(v, top, to, blossom);
    markPath(to, top, v, blossom);
    for (let i = 0; i < count; i++)
      if (blossom[base[i]]) {
        base[i] = top;
        if (!outer[i]) {
          outer[i] = 1;
          queue.push(i);
        }
      }
  }

  function commonBase(p: number, q: number): number {
    const seen = new Uint8Array(count);
    for (let i = base[p]; ; i = base[parent[mate[i]]]) {
      seen[i] = 1;
      if (mate[i] < 0) break;
    }
    let j = base[q];
    while (!seen[j]) j = base[parent[mate[j]]];
    return j;
  }

  function markPath(from: number, top: number, child: number, blossom: Uint8Array): void {
    let below = child;
    for (let v = from; base[v] !== top; v = parent[mate[v]]) {
      blossom[base[v]] = 1;
      blossom[base[mate[v]]] = 1;
      parent[v] = below;
      below = mate[v];
    }
  }
}
