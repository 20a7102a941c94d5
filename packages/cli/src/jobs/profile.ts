/** `tordial profile`: scans, and the files that show them. */
import { join } from 'node:path';
import { type EngineConfig, openEngine } from '@tordial/engines';
import { geometriesFor, type MolecularRecord, type Molecule, type Note, TordialError } from '@tordial/geometry';
import { checkTorsion, findRotors, isOpen, type ProfileDocument, torsionOfAxis } from '@tordial/scan';
import type { ProfileFlags } from '../commands/profile.js';
import { engineProfile } from '../engine-profile.js';
import { analyseDocument, type DocumentAnalysis } from '../profile-analysis.js';
import { provedPoints } from '../proved-points.js';
import { torsionProfile } from '../torsion-profile.js';
import { eachRecord, tell } from './each-record.js';
import { readEngineConfig } from './engine-file.js';
import { readFrames } from './input.js';
import { interruptible } from './interruptible.js';
import { prepareFolder, writeFiles } from './output.js';
import { overridesOf, variantOf } from './potential.js';
import { profileFiles } from './profile-files.js';
import { profileSummary } from './profile-summary.js';
import { progress } from './progress.js';

type Torsion = readonly [number, number, number, number];

export async function scanProfiles(argument: string, flags: ProfileFlags): Promise<number> {
  if (!flags.torsion && !flags.rotor && !flags.all)
    throw new TordialError(
      'usage/rotor',
      'name the bond that turns: --torsion A,B,C,D, or --rotor B-C, or --all (tordial rotors lists them)',
    );
  if (!flags.output && !flags.json)
    throw new TordialError('usage/output', 'say where the profile goes: -o FOLDER for files with the figure, --json for standard output');
  if (flags.singlePoints && !flags.engine)
    throw new TordialError('usage/engine', '--single-points says how an engine is used; name one with --engine CONFIG');
  const config = flags.engine === undefined ? undefined : readEngineConfig(flags.engine);
  if (flags.output) prepareFolder(flags.output);

  // each profile gets a folder of its own as soon as there is more than one
  const folders = new Set<string>();
  return eachRecord(argument, flags, async (read, { index, alone, label }) => {
    // a nameless molecule goes by its input, whose order counts its atoms
    const record = read.molecule.name === '' ? { ...read, molecule: { ...read.molecule, name: label } } : read;
    const torsions = torsionsOf(record.molecule, flags);
    const home = alone ? [] : [folderName(read.molecule, index, folders)];
    for (const torsion of torsions) {
      const name = `${label} ${torsion[1]}-${torsion[2]}`;
      const { document, analysis } = await completed(await scan(record, torsion, flags, config, name), flags, name);
      tell(document.notes, label);
      if (flags.json) process.stdout.write(`${JSON.stringify(document)}\n`);
      if (flags.output) {
        const folder = join(flags.output, ...home, flags.all ? `rotor-${torsion[1]}-${torsion[2]}` : '');
        prepareFolder(folder);
        writeFiles(folder, profileFiles(record.molecule, document));
        process.stderr.write(`${profileSummary(document, analysis)}written to ${folder}\n`);
      }
      const interruption = document.notes.find(({ code }) => code === 'usage/interrupted');
      if (interruption) throw new TordialError(interruption.code, interruption.message);
    }
  });
}

/** A scan with its points proved and what follows from it; what forbids either becomes a note, for the profile itself stands. */
async function completed(
  scanned: ProfileDocument,
  flags: ProfileFlags,
  label: string,
): Promise<{ document: ProfileDocument; analysis: DocumentAnalysis | null }> {
  const notes: Note[] = [];
  const attempt = async <T>(work: () => T | Promise<T>): Promise<T | null> => {
    try {
      return await work();
    } catch (error) {
      if (!(error instanceof TordialError)) throw error;
      notes.push({ code: error.code, message: error.message });
      return null;
    }
  };
  // a second fragment wanders on a surface too flat for its minima to be told apart, and a rate of rotation means nothing beside it
  const provable = !flags.rigid && !flags.engine && !isOpen(scanned) && scanned.molecule.fragments === 1;
  const shown = progress(`${label} proof`);
  const prove = (): Promise<ProfileDocument> =>
    interruptible((signal) => provedPoints(scanned, { signal, onProgress: (done, total) => shown.update(done, total) }));
  const proved = flags.prove && provable ? await attempt(prove).finally(() => shown.stop()) : null;
  const document = proved ?? scanned;
  // populations and rates need the full turn
  const analysis = isOpen(document) ? null : await attempt(() => analyseDocument(document));
  return { document: { ...document, notes: [...document.notes, ...notes], ...(analysis ? { analysis: { ...analysis } } : {}) }, analysis };
}

async function scan(
  record: MolecularRecord,
  torsion: Torsion,
  flags: ProfileFlags,
  config: EngineConfig | undefined,
  label: string,
): Promise<ProfileDocument> {
  const { molecule } = record;
  const { overrides, notes } = overridesOf(molecule, flags);
  const given = record.coordinates ? [record.coordinates] : [];
  const shown = progress(label);
  return interruptible(async (signal) => {
    const profile = await torsionProfile(molecule, torsion, {
      forceField: variantOf(flags),
      dielectric: flags.dielectric,
      step: flags.step,
      startAngle: flags.startAngle,
      range: flags.range,
      periodic: flags.periodic,
      conformers: flags.conformers,
      starts: flags.geometry ? geometriesFor(molecule, readFrames(flags.geometry)) : given,
      seed: flags.seed,
      tolerance: flags.tolerance,
      rigid: flags.rigid,
      unit: flags.unit,
      notes: [...record.notes, ...notes],
      torsionOverrides: overrides,
      onProgress: ({ done, total }) => shown.update(done, total),
      signal,
    });
    if (!config) return profile;
    const engine = openEngine(molecule, config, signal);
    return await engineProfile(profile, engine, config, {
      singlePoints: flags.singlePoints,
      onProgress: ({ done, total }) => shown.update(done, total),
      signal,
    });
  }).finally(() => shown.stop());
}

function torsionsOf(molecule: Molecule, flags: ProfileFlags): Torsion[] {
  if (flags.torsion) return [checkTorsion(molecule, flags.torsion, { rings: flags.range !== undefined })];
  if (flags.rotor) return [torsionOfAxis(molecule, ...flags.rotor)];
  const rotors = findRotors(molecule);
  if (rotors.length === 0) throw new TordialError('torsion/none', 'the molecule has no bond that turns');
  const first = rotors.filter(({ equivalenceClass }, n) => rotors.findIndex((rotor) => rotor.equivalenceClass === equivalenceClass) === n);
  return first.map(({ torsion }) => torsion);
}

/** A folder name from the molecule's own name, plain and used once. */
function folderName(molecule: Molecule, index: number, used: Set<string>): string {
  const plain = molecule.name.replace(/[^A-Za-z0-9._-]+/g, '-').replace(/^[-.]+|[-.]+$/g, '');
  const name = plain === '' || used.has(plain) ? `${plain === '' ? 'record' : plain}-${index + 1}` : plain;
  used.add(name);
  return name;
}
