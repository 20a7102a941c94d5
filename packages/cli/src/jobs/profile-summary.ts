/** A profile as tables for people: its stationary points, and what follows from them at room temperature. */
import { klynePrelogName, type ProfileDocument } from '@tordial/scan';
import type { DocumentAnalysis } from '../profile-analysis.js';
import { analysisTables } from './analysis-tables.js';
import { table } from './table.js';

export function profileSummary(document: ProfileDocument, analysis: DocumentAnalysis | null): string {
  const { molecule, rotor, unit, stationaryPoints, provenance } = document;
  const heading = `${molecule.name || molecule.smiles}  torsion ${rotor.torsion.join('-')}  ${rotor.kind}  ${provenance.potential}\n`;
  const rows = stationaryPoints.map(({ kind, angle, relativeEnergy, converged }) => [
    kind,
    angle.toFixed(1),
    relativeEnergy.toFixed(2),
    `${kind === 'well' ? klynePrelogName(angle) : ''}${converged ? '' : ' (not converged)'}`,
  ]);
  const points = table(['point', 'angle (deg)', `energy (${unit})`, 'name'], rows);
  return `${heading}${points}${analysis ? `\n${analysisTables(document, analysis, unit)}` : ''}`;
}
