/** `tordial fit`: torsion series from profiles and references, and the files that show them. */
import { moleculeOfDocument, type Reference, referenceOfFrames, referenceOfProfile, referenceOfTable } from '@tordial/analysis';
import { openEngine } from '@tordial/engines';
import { TordialError } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import type { FitFlags } from '../commands/fit.js';
import { engineProfile } from '../engine-profile.js';
import { readProfile } from '../profile-reader.js';
import { torsionFit } from '../torsion-fit.js';
import { readFrom } from './document-file.js';
import { tell } from './each-record.js';
import { readEngineConfig } from './engine-file.js';
import { fitFiles, fitSummary } from './fit-files.js';
import { prepareFolder, writeFiles } from './output.js';
import { progress } from './progress.js';

export async function fitTorsions(paths: readonly string[], flags: FitFlags): Promise<number> {
  if (!flags.output && !flags.json)
    throw new TordialError('usage/output', 'say where the fit goes: -o FOLDER for files with the figure, --json for standard output');
  if (flags.reference.length > 0 && flags.reference.length !== paths.length)
    throw new TordialError(
      'usage/reference',
      `${paths.length} profiles and ${flags.reference.length} references; give --reference once for each profile, in the same order`,
    );
  if (flags.output) prepareFolder(flags.output);
  const profiles = paths.map((path) => readFrom(path, readProfile));
  const references = flags.engine
    ? await engineReferences(profiles, flags.engine)
    : profiles.map((profile, n) => fileReference(flags.reference[n], profile, flags));
  const document = torsionFit(
    profiles.map((profile, n) => ({ profile, reference: references[n] })),
    {
      scope: flags.terms,
      order: flags.order,
      folds: flags.folds,
      phases: flags.phases,
      weights: flags.weights,
      restraint: flags.restraint,
      toward: flags.toward,
      geometries: flags.geometries ?? (flags.engine ? 'given' : 'relaxed'),
      unit: flags.unit,
      forceField: flags.forceField && (flags.forceField === 'mmff94' ? 'MMFF94' : 'MMFF94s'),
    },
  );
  tell(document.notes);
  if (flags.json) process.stdout.write(`${JSON.stringify(document)}\n`);
  if (flags.output) {
    writeFiles(flags.output, fitFiles(document));
    process.stderr.write(`${fitSummary(document)}written to ${flags.output}\n`);
  }
  return 0;
}

function fileReference(path: string | undefined, profile: ProfileDocument, { referenceUnit }: FitFlags): Reference | undefined {
  if (path === undefined) return undefined;
  const target = { molecule: moleculeOfDocument(profile.molecule), torsion: profile.rotor.torsion };
  return readFrom(path, (text) => {
    if (/\.xyz$/i.test(path)) return referenceOfFrames(text, target, referenceUnit);
    if (/\.json$/i.test(path)) return referenceOfProfile(readProfile(text), target);
    if (/\.(csv|tsv|txt)$/i.test(path)) return referenceOfTable(text, referenceUnit);
    throw new TordialError('file/format', 'a reference ends in .csv, .tsv, .txt (table), .json (profile) or .xyz (frames)');
  });
}

async function engineReferences(profiles: readonly ProfileDocument[], path: string): Promise<Reference[]> {
  const config = readEngineConfig(path);
  const references: Reference[] = [];
  for (const profile of profiles) {
    const molecule = moleculeOfDocument(profile.molecule);
    const shown = progress(profile.molecule.name || profile.molecule.smiles);
    const stop = new AbortController();
    try {
      const engine = openEngine(molecule, config, stop.signal);
      const document = await engineProfile(profile, engine, config, {
        singlePoints: true,
        onProgress: ({ done, total }) => shown.update(done, total),
        signal: stop.signal,
      });
      references.push(referenceOfProfile(document, { molecule, torsion: profile.rotor.torsion }));
    } finally {
      stop.abort();
      shown.stop();
    }
  }
  return references;
}
