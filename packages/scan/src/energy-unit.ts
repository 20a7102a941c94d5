/** Units of energy that results are given in; inside, everything is kcal/mol. */
export type EnergyUnit = 'kcal/mol' | 'kJ/mol';

/** How much of the unit one kcal/mol is; exact, the thermochemical calorie is 4.184 J. */
export function perKcal(unit: EnergyUnit): number {
  return unit === 'kJ/mol' ? 4.184 : 1;
}
