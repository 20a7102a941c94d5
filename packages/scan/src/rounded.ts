/** A number as documents hold it: to six decimals, below what a scan resolves, without a negative zero. */
export function rounded(value: number): number {
  return Math.round(value * 1e6) / 1e6 + 0;
}
