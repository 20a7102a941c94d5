/** Conformation names of Klyne and Prelog for a torsion angle. */

export type KlynePrelogName = 'sp' | '+sp' | '-sp' | '+sc' | '-sc' | '+ac' | '-ac' | 'ap' | '+ap' | '-ap';

/** Degrees within which an angle counts as exactly 0 or 180. */
const EXACT = 1e-6;

/**
 * The name of a torsion angle (degrees, any turn): synperiplanar below 30, synclinal from 30, anticlinal from 90, antiperiplanar from
 * 150 degrees, with the angle's sign, none at 0 and at 180.
 *
 * Source: W. Klyne and V. Prelog, Experientia 16, 521 (1960); IUPAC, Basic terminology of stereochemistry (1996), "torsion angle".
 */
export function klynePrelogName(angle: number): KlynePrelogName {
  const wrapped = angle - 360 * Math.round(angle / 360);
  const size = Math.abs(wrapped);
  if (size < EXACT) return 'sp';
  if (size > 180 - EXACT) return 'ap';
  const sign = wrapped < 0 ? '-' : '+';
  if (size < 30) return `${sign}sp`;
  if (size < 90) return `${sign}sc`;
  if (size < 150) return `${sign}ac`;
  return `${sign}ap`;
}
