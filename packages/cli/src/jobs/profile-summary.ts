/** A profile as tables for people: its stationary points, and what follows from them at room temperature. */
import { rotamerLabel } from '@tordial/analysis';
import { klynePrelogName, type ProfileDocument } from '@tordial/scan';
import type { DocumentAnalysis } from '../profile-analysis.js';
import { shortTables } from './analysis-tables.js';
import { shownAngle } from './shown-angle.js';
import { table } from './table.js';

export function profileSummary(document: ProfileDocument, analysis: DocumentAnalysis | null): string {
  const { molecule, rotor, unit, stationaryPoints, provenance } = document;
  const heading = `${molecule.name || molecule.smiles}  torsion ${rotor.torsion.join('-')}  ${rotor.kind}  ${provenance.potential}\n`;
  const rows = stationaryPoints.map(({ kind, angle, relativeEnergy, converged }) => [
    kind,
    shownAngle(angle),
    relativeEnergy.toFixed(2),
    `${kind === 'well' ? klynePrelogName(Number(shownAngle(angle))) : ''}${converged ? '' : ' (not converged)'}`,
  ]);
  const points = table(['point', 'angle (deg)', `energy (${unit})`, 'name'], rows);
  return `${heading}${served(rotor)}${points}${analysis ? merged(document, analysis) : ''}${analysis ? `\n${shortTables(document, analysis, unit)}` : ''}`;
}

/** Which other rotors the profile stands for. */
function served({ serves = [] }: ProfileDocument['rotor']): string {
  if (serves.length === 0) return '';
  const rotors = serves.map(({ torsion, mirrored }) => `${torsion.join('-')}${mirrored ? ' (at the opposite angle)' : ''}`);
  return `stands for the equivalent ${rotors.length === 1 ? 'rotor' : 'rotors'} ${rotors.join(', ')} too\n`;
}

/** Wells that are one with equal atoms exchanged, or mirror images, merged with their number. */
function merged({ stationaryPoints, unit }: ProfileDocument, { electronic: { rotamers } }: DocumentAnalysis): string {
  const species = new Map<number, (typeof rotamers)[number][]>();
  for (const well of rotamers) species.set(well.species, [...(species.get(well.species) ?? []), well]);
  if (species.size === rotamers.length) return '';
  const rows = [...species.values()].map((wells) => {
    const [first] = wells;
    const names = new Set(wells.map((well) => rotamerLabel(well, true)));
    return [
      [...names].join(', '),
      `${wells.length}`,
      stationaryPoints[first.stationaryPoints[0]].relativeEnergy.toFixed(2),
      wells.map(({ angle }) => shownAngle(angle)).join(', '),
    ];
  });
  return `\n${table(['distinct well', 'degeneracy', `energy (${unit})`, 'angles (deg)'], rows)}`;
}
