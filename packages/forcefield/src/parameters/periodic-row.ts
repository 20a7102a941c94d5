/** Row of the periodic table of an element as the empirical rules count them: H and He 0, Li to Ne 1, Na to Ar 2, K to Kr 3, Rb to Xe 4, Cs to Rn 5. */
export function periodicRow(element: number): number {
  if (element <= 2) return 0;
  if (element <= 10) return 1;
  if (element <= 18) return 2;
  if (element <= 36) return 3;
  return element <= 54 ? 4 : 5;
}
