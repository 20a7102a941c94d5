/**
 * Places boxes in a row without overlap, in order, as close to where each wants to be as the sum of squares allows.
 *
 * With the half widths taken out the task is an isotonic regression, solved by pooling adjacent violators
 * (M. Ayer, H. D. Brunk, G. M. Ewing, W. T. Reid and E. Silverman, Ann. Math. Stat. 26, 641 (1955)).
 *
 * `wanted` are the wished centres, ascending, `widths` the boxes' widths; returns the centres, within [from, to] where the boxes fit into it.
 */
export function spread(wanted: readonly number[], widths: readonly number[], from: number, to: number): number[] {
  const offsets: number[] = [];
  let taken = 0;
  for (const width of widths) {
    offsets.push(taken + width / 2);
    taken += width;
  }
  const pools: { sum: number; count: number }[] = [];
  wanted.forEach((centre, n) => {
    let pool = { sum: centre - offsets[n], count: 1 };
    for (let last = pools.at(-1); last && last.sum / last.count > pool.sum / pool.count; last = pools.at(-1)) {
      pool = { sum: pool.sum + last.sum, count: pool.count + last.count };
      pools.pop();
    }
    pools.push(pool);
  });
  const highest = Math.max(from, to - taken);
  return pools
    .flatMap(({ sum, count }) => new Array<number>(count).fill(Math.min(highest, Math.max(from, sum / count))))
    .map((shift, n) => shift + offsets[n]);
}
