/**
 * Places things in a row, in order and at least `distances[n]` between the n-th and the next, as close to where each wants to be as the sum of
 * squares allows, within [from, to] where they fit into it.
 *
 * With the distances taken out the task is an isotonic regression, solved by pooling adjacent violators
 * (M. Ayer, H. D. Brunk, G. M. Ewing, W. T. Reid and E. Silverman, Ann. Math. Stat. 26, 641 (1955)).
 *
 * `wanted` are the wished places, ascending; `distances` has one entry less. Returns the places.
 */
export function spread(wanted: readonly number[], distances: readonly number[], from: number, to: number): number[] {
  const offsets = [0];
  for (const distance of distances) offsets.push(offsets[offsets.length - 1] + distance);
  const pools: { sum: number; count: number }[] = [];
  wanted.forEach((place, n) => {
    let pool = { sum: place - offsets[n], count: 1 };
    for (let last = pools.at(-1); last && last.sum / last.count > pool.sum / pool.count; last = pools.at(-1)) {
      pool = { sum: pool.sum + last.sum, count: pool.count + last.count };
      pools.pop();
    }
    pools.push(pool);
  });
  const highest = Math.max(from, to - offsets[offsets.length - 1]);
  return pools
    .flatMap(({ sum, count }) => new Array<number>(count).fill(Math.min(highest, Math.max(from, sum / count))))
    .map((shift, n) => shift + offsets[n]);
}
