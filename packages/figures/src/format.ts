import type { EnergyUnit } from '@tordial/scan';
import { format } from 'd3-format';

const oneDecimal = format('.1f');
const twoDecimals = format('.2f');

/** An angle as text: one decimal, true minus sign, 180 instead of -180. */
export function degreesText(angle: number): string {
  const text = oneDecimal(angle);
  return `${text === '−180.0' ? '180.0' : text}°`;
}

/** An energy as text: two decimals in kcal/mol, one in kJ/mol. */
export function energyText(energy: number, unit: EnergyUnit): string {
  return unit === 'kcal/mol' ? twoDecimals(energy) : oneDecimal(energy);
}
