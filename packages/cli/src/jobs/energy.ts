/** `tordial energy`: the energy of given or built structures, and its terms. */
import type { EnergyTerms } from '@tordial/forcefield';
import { type Coordinates, embed, type Note, openStereo } from '@tordial/geometry';
import { relax } from '@tordial/scan';
import type { EnergyFlags } from '../commands/energy.js';
import { eachRecord, tell } from './each-record.js';
import { potentialOf, unitFactor } from './potential.js';
import { table } from './table.js';

const TERMS = ['bondStretching', 'angleBending', 'stretchBend', 'outOfPlane', 'torsion', 'vanDerWaals', 'electrostatic'] as const;
const COLUMNS = ['stretching', 'bending', 'stretch-bend', 'out-of-plane', 'torsion', 'vdW', 'electrostatic'];

interface EnergyLine {
  name: string;
  index: number;
  atoms: number;
  energy: number;
  terms: EnergyTerms;
  unit: string;
  notes?: readonly Note[];
  atomTypes?: number[];
  partialCharges?: number[];
}

export async function listEnergies(argument: string, flags: EnergyFlags): Promise<number> {
  const rows: string[][] = [];
  const factor = unitFactor(flags.unit);
  const exitCode = await eachRecord(
    argument,
    flags,
    (record, { index, label }) => {
      const { molecule } = record;
      const potential = potentialOf(molecule, flags);
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
        const line: EnergyLine = { name: molecule.name, index, atoms: molecule.atomCount, energy, terms: scaled, unit: flags.unit };
        if (notes.length > 0) line.notes = notes;
        if (flags.atomTypes) {
          line.atomTypes = Array.from(potential.parameters.atomTypes);
          line.partialCharges = Array.from(potential.parameters.partialCharges, rounded);
        }
        process.stdout.write(`${JSON.stringify(line)}\n`);
        return;
      }
      rows.push([label, `${molecule.atomCount}`, energy.toFixed(4), ...TERMS.map((term) => scaled[term].toFixed(4))]);
      if (flags.atomTypes) {
        const { atomTypes, symbolicTypes, partialCharges } = potential.parameters;
        const types = Array.from(atomTypes, (type, atom) => [`${atom}`, symbolicTypes[atom], `${type}`, partialCharges[atom].toFixed(4)]);
        process.stdout.write(`${label}\n${table(['atom', 'type', 'number', 'charge (e)'], types)}`);
      }
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
}

/** To 1e-6, without a negative zero. */
function rounded(value: number): number {
  return Math.round(value * 1e6) / 1e6 + 0;
}
