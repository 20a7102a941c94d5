/** `tordial build`: 3D structures into a file. */
import { extname } from 'node:path';
import {
  type Coordinates,
  embedMany,
  type Molecule,
  type Note,
  openStereo,
  type SdfEntry,
  TordialError,
  writeSdf,
  writeXyz,
} from '@tordial/geometry';
import { conformers, perKcal } from '@tordial/scan';
import type { BuildFlags } from '../commands/build.js';
import { eachRecord, tell } from './each-record.js';
import { prepareFile, writeWhole } from './output.js';
import { potentialOf } from './potential.js';

interface Structure {
  readonly coordinates: Coordinates;
  /** Fields of an SDF record. */
  readonly properties: ReadonlyMap<string, string>;
}

export async function buildStructures(argument: string, flags: BuildFlags): Promise<number> {
  const format = extname(flags.output).toLowerCase();
  if (format !== '.sdf' && format !== '.xyz')
    throw new TordialError('usage/format', `${flags.output} ends neither in .sdf nor in .xyz, the formats that can be written`, {
      file: flags.output,
    });
  prepareFile(flags.output);

  const entries: SdfEntry[] = [];
  const exitCode = await eachRecord(argument, flags, (record, { label }) => {
    const { structures, notes } = structuresOf(record.molecule, flags);
    tell([...record.notes, ...notes], label);
    for (const { coordinates, properties } of structures)
      entries.push({ molecule: record.molecule, coordinates, properties: new Map([...record.properties, ...properties]) });
  });
  if (entries.length === 0) return exitCode;
  const xyz = (): string =>
    entries
      .map(({ molecule, coordinates, properties }) => writeXyz(molecule, coordinates, comment(molecule, properties ?? new Map())))
      .join('');
  writeWhole(flags.output, format === '.sdf' ? writeSdf(entries) : xyz());
  process.stderr.write(`${flags.output}: ${entries.length} structure${entries.length === 1 ? '' : 's'}\n`);
  if (flags.json) process.stdout.write(`${JSON.stringify({ file: flags.output, structures: entries.length })}\n`);
  return exitCode;
}

function structuresOf(molecule: Molecule, flags: BuildFlags): { structures: Structure[]; notes: readonly Note[] } {
  if (!flags.relax) {
    const structures = embedMany(molecule, flags.conformers, { seed: flags.seed }).map((coordinates) => ({
      coordinates,
      properties: new Map<string, string>(),
    }));
    return { structures, notes: openStereo(molecule) };
  }
  const potential = potentialOf(molecule, flags);
  const found = conformers(molecule, potential, { count: flags.conformers, seed: flags.seed });
  const factor = perKcal(flags.unit);
  const structures = found.conformers.map(({ coordinates, energy, relativeEnergy }) => ({
    coordinates,
    properties: new Map([
      [`${potential.label} energy (${flags.unit})`, (energy * factor).toFixed(6)],
      [`relative energy (${flags.unit})`, (relativeEnergy * factor).toFixed(6)],
    ]),
  }));
  return { structures, notes: found.notes };
}

function comment(molecule: Molecule, properties: ReadonlyMap<string, string>): string {
  return [molecule.name, ...Array.from(properties, ([name, value]) => `${name}: ${value}`)].filter((part) => part !== '').join('; ');
}
