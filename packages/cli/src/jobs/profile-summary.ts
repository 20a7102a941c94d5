/** The stationary points of a profile as a table for people. */
import { klynePrelogName, type ProfileDocument } from '@tordial/scan';
import { table } from './table.js';

export function profileSummary({ molecule, rotor, unit, stationaryPoints, provenance }: ProfileDocument): string {
  const heading = `${molecule.name || molecule.smiles}  torsion ${rotor.torsion.join('-')}  ${rotor.kind}  ${provenance.potential}\n`;
  const rows = stationaryPoints.map(({ kind, angle, relativeEnergy, converged }) => [
    kind,
    angle.toFixed(1),
    relativeEnergy.toFixed(2),
    `${kind === 'well' ? klynePrelogName(angle) : ''}${converged ? '' : ' (not converged)'}`,
  ]);
  return `${heading}${table(['point', 'angle (deg)', `energy (${unit})`, 'name'], rows)}`;
}
