import type { EnergyUnit } from '@tordial/scan';
import { JOULE_PER_CALORIE } from './constants.js';

/** Factor that takes an energy in `unit` to kcal/mol. */
export function kcalPer(unit: EnergyUnit): number {
  return unit === 'kJ/mol' ? 1 / JOULE_PER_CALORIE : 1;
}
