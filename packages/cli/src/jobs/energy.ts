/** `tordial energy`: the energy of given or built structures, and its terms. */
import type { EnergyTerms, Mmff94 } from '@tordial/forcefield';
import {
  type Coordinates,
  embed,
  geometriesFor,
  type MolecularRecord,
  type Note,
  openStereo,
  perceiveStereo,
  TordialError,
} from '@tordial/geometry';
import { keepsStereo, perKcal, relax, rounded } from '@tordial/scan';
import type { EnergyFlags } from '../commands/energy.js';
import { eachRecord, tell } from './each-record.js';
import { readFrames } from './input.js';
import { potentialOf } from './potential.js';
import { table } from './table.js';

const TERMS = ['bondStretching', 'angleBending', 'stretchBend', 'outOfPlane', 'torsion', 'vanDerWaals', 'electrostatic'] as const;
const COLUMNS = ['stretching', 'bending', 'stretch-bend', 'out-of-plane', 'torsion', 'vdW', 'electrostatic'];

interface EnergyLine {
  name: string;
  index: number;
  /** Frame of the geometry file, from 0, and its comment. */
  frame?: number;
  comment?: string;
  atoms: number;
  energy: number;
  terms: EnergyTerms;
  unit: string;
  notes?: readonly Note[];
  atomTypes?: number[];
  partialCharges?: number[];
}

/** One geometry of a record; `coordinates` null where it has none. */
interface Given extends Pick<MolecularRecord, 'molecule' | 'coordinates' | 'notes'> {
  readonly label: string;
  readonly frame?: { readonly frame: number; readonly comment: string };
}

export async function listEnergies(argument: string, flags: EnergyFlags): Promise<number> {
  const rows: string[][] = [];
  const factor = perKcal(flags.unit);
  const frames = flags.geometry === undefined ? null : readFrames(flags.geometry);
  const exitCode = await eachRecord(
    argument,
    flags,
    (record, { index, label: named }) => {
      const given: readonly Given[] = frames
        ? geometriesFor(record.molecule, frames).map((coordinates, frame) => ({
            molecule: record.molecule,
            coordinates,
            notes: frame === 0 ? record.notes : [],
            label: `${named} frame ${frame}`,
            frame: { frame, comment: frames[frame].comment },
          }))
        : [{ ...record, label: named }];
      const potential = potentialOf(record.molecule, flags);
      for (const one of given) line(one, index, potential);
    },
    (error, index, name) => {
      if (flags.json)
        process.stdout.write(
          `${JSON.stringify({ name, index, error: { code: error.code, message: error.message, place: error.place } })}\n`,
        );
    },
  );
  if (rows.length > 0) process.stdout.write(`${table(['record', 'atoms', `energy (${flags.unit})`, ...COLUMNS], rows)}`);
  return exitCode;

  function line({ label, frame, ...record }: Given, index: number, potential: Mmff94): void {
    const { molecule } = record;
    const notes = [...record.notes];
    let x: Coordinates;
    if (record.coordinates) x = record.coordinates;
    else {
      x = embed(molecule, { seed: flags.seed });
      notes.push(...openStereo(molecule), {
        code: 'energy/built',
        message: 'the input has no 3D coordinates; a structure was built and relaxed',
      });
    }
    if (flags.relax || !record.coordinates) {
      const relaxed = relax(molecule, potential, x);
      const stated = record.coordinates ? { ...molecule, stereo: perceiveStereo(molecule, x) } : molecule;
      if (!keepsStereo(stated, relaxed.coordinates))
        throw new TordialError(
          'energy/stereo',
          'the structure lost its configuration while it relaxed: the potential does not hold it, and this would be the energy of another molecule',
        );
      x = relaxed.coordinates;
      if (!relaxed.converged)
        notes.push({
          code: 'energy/convergence',
          message: `the relaxation stopped at a gradient of ${relaxed.gradientMax.toPrecision(3)} kcal/mol/angstrom`,
        });
    }
    const terms = potential.terms(x);
    const scaled = Object.fromEntries(TERMS.map((term) => [term, rounded(terms[term] * factor)])) as unknown as EnergyTerms;
    const energy = rounded(TERMS.reduce((sum, term) => sum + terms[term], 0) * factor);
    tell(notes, label);
    if (flags.json) {
      const written: EnergyLine = {
        name: molecule.name,
        index,
        ...frame,
        atoms: molecule.atomCount,
        energy,
        terms: scaled,
        unit: flags.unit,
      };
      if (notes.length > 0) written.notes = notes;
      if (flags.atomTypes) {
        written.atomTypes = Array.from(potential.parameters.atomTypes);
        written.partialCharges = Array.from(potential.parameters.partialCharges, rounded);
      }
      process.stdout.write(`${JSON.stringify(written)}\n`);
      return;
    }
    rows.push([label, `${molecule.atomCount}`, energy.toFixed(4), ...TERMS.map((term) => scaled[term].toFixed(4))]);
    if (flags.atomTypes) {
      const { atomTypes, symbolicTypes, partialCharges } = potential.parameters;
      const types = Array.from(atomTypes, (type, atom) => [`${atom}`, symbolicTypes[atom], `${type}`, partialCharges[atom].toFixed(4)]);
      process.stdout.write(`${label}\n${table(['atom', 'type', 'number', 'charge (e)'], types)}`);
    }
  }
}
