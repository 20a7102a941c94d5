/** `tordial strain`: what the angles of given geometries cost. */
import { hydrogenBondCaution, type TorsionalStrain, torsionalStrain } from '@tordial/analysis';
import { type Coordinates, geometriesFor, type MolecularRecord, type Note, TordialError } from '@tordial/geometry';
import { findRotors, type ProfileDocument, perKcal } from '@tordial/scan';
import type { StrainFlags } from '../commands/strain.js';
import { torsionProfile } from '../torsion-profile.js';
import { cautionLines } from './analysis-tables.js';
import { eachRecord, tell } from './each-record.js';
import { readFrames } from './input.js';
import { variantOf } from './potential.js';
import { progress } from './progress.js';
import { shownAngle } from './shown-angle.js';
import { table } from './table.js';

const ESTIMATE: Note = {
  code: 'caution/estimate',
  message:
    'Strains come from a force field for an isolated molecule: no solvent, no partner that holds the geometry. Rank with them; decide with experiment.',
};

export function listStrains(argument: string, flags: StrainFlags): Promise<number> {
  return eachRecord(argument, flags, async (record, { index, label }) => {
    for (const [frame, x] of geometriesOf(record, flags).entries()) {
      const documents = await profilesOf(record, x, flags, label);
      tell(record.notes, label);
      const strain = torsionalStrain(x, documents);
      const hydrogenBond = hydrogenBondCaution(record.molecule, [x], flags.dielectric);
      const notes = [ESTIMATE, ...strain.notes, ...(hydrogenBond ? [hydrogenBond] : [])];
      if (flags.json)
        process.stdout.write(`${JSON.stringify(inUnit(strain, flags, { name: record.molecule.name, index, frame, notes }))}\n`);
      else process.stdout.write(strainTable(label, strain, flags) + cautionLines(notes));
    }
  });
}

function geometriesOf({ molecule, coordinates }: MolecularRecord, { geometry }: StrainFlags): readonly Coordinates[] {
  if (geometry) return geometriesFor(molecule, readFrames(geometry));
  if (coordinates) return [coordinates];
  throw new TordialError(
    'usage/geometry',
    'strain is that of a given geometry: the record has no 3D coordinates; give an SDF with them, or --geometry FILE.xyz',
  );
}

async function profilesOf({ molecule }: MolecularRecord, x: Coordinates, flags: StrainFlags, label: string): Promise<ProfileDocument[]> {
  const rotors = findRotors(molecule);
  if (rotors.length === 0) throw new TordialError('torsion/none', 'the molecule has no bond that turns');
  const shown = progress(label);
  try {
    const documents: ProfileDocument[] = [];
    for (const { torsion } of rotors) {
      shown.update(documents.length, rotors.length);
      documents.push(
        await torsionProfile(molecule, torsion, {
          forceField: variantOf(flags),
          dielectric: flags.dielectric,
          step: flags.step,
          conformers: flags.conformers,
          starts: [x],
          seed: flags.seed,
        }),
      );
    }
    return documents;
  } finally {
    shown.stop();
  }
}

function inUnit({ rotors, total }: TorsionalStrain, { unit }: StrainFlags, about: object): object {
  const factor = perKcal(unit);
  return { ...about, unit, total: total * factor, rotors: rotors.map((rotor) => ({ ...rotor, energy: rotor.energy * factor })) };
}

function strainTable(label: string, { rotors, total }: TorsionalStrain, { unit }: StrainFlags): string {
  const factor = perKcal(unit);
  const rows = rotors.map(({ torsion, kind, angle, energy }) => [torsion.join(','), kind, shownAngle(angle), (energy * factor).toFixed(2)]);
  return `${label}: torsional strain ${(total * factor).toFixed(2)} ${unit}\n${table(['torsion', 'kind', 'angle (deg)', `strain (${unit})`], rows)}`;
}
