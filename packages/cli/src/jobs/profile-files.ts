/** The files of one profile, by name: the document, a table, the figure, and the relaxed geometries. */
import { profilePlot } from '@tordial/figures';
import { type Molecule, writeSdf, writeXyz } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';

export function profileFiles(molecule: Molecule, document: ProfileDocument): Record<string, string> {
  return {
    'profile.json': `${JSON.stringify(document)}\n`,
    'profile.csv': csv(document),
    'profile.svg': profilePlot(document),
    'frames.xyz': document.points
      .map((point) => writeXyz(molecule, Float64Array.from(point.coordinates), comment(document, point)))
      .join(''),
    'frames.sdf': writeSdf(
      document.points.map((point) => ({
        molecule,
        coordinates: Float64Array.from(point.coordinates),
        properties: new Map([
          ['torsion angle (degree)', fixed(point.angle)],
          [`energy (${document.unit})`, fixed(point.energy)],
          [`relative energy (${document.unit})`, fixed(point.relativeEnergy)],
        ]),
      })),
    ),
  };
}

function csv({ unit, points }: ProfileDocument): string {
  const header = `angle (degree),energy (${unit}),relative energy (${unit}),torque (${unit}/radian),converged,branch changes after`;
  const rows = points.map(({ angle, energy, relativeEnergy, torque, converged, breakAfter }) =>
    [fixed(angle), fixed(energy), fixed(relativeEnergy), fixed(torque), converged ? 'yes' : 'no', breakAfter ? 'yes' : 'no'].join(','),
  );
  return `${[header, ...rows].join('\n')}\n`;
}

function comment({ rotor, unit, provenance }: ProfileDocument, point: ProfileDocument['points'][number]): string {
  return `torsion ${rotor.torsion.join('-')} ${fixed(point.angle)} degree; ${provenance.potential} energy ${fixed(point.energy)} ${unit}; relative energy ${fixed(point.relativeEnergy)} ${unit}`;
}

const fixed = (value: number): string => value.toFixed(6);
