import { type EnergyUnit, perKcal } from '@tordial/scan';

/** Factor that takes an energy in `unit` to kcal/mol. */
export function kcalPer(unit: EnergyUnit): number {
  return 1 / perKcal(unit);
}
