/** `tordial analyse`: what follows from a profile that was scanned before. */
import { existsSync, readFileSync } from 'node:fs';
import { TordialError } from '@tordial/geometry';
import type { AnalyseFlags } from '../commands/analyse.js';
import { analyseDocument } from '../profile-analysis.js';
import { readProfile } from '../profile-reader.js';
import { provedPoints } from '../proved-points.js';
import { analysisTables } from './analysis-tables.js';

/** 25, 37, 40, 60 and 80 C. */
const USUAL_TEMPERATURES = [298.15, 310.15, 313.15, 333.15, 353.15];

export async function analyseFile(path: string, flags: AnalyseFlags): Promise<number> {
  const { shift, field } = flags;
  if ((shift === undefined) !== (field === undefined))
    throw new TordialError(
      'usage/coalescence',
      'a coalescence temperature needs both --shift and --field, such as --shift 0.35ppm --field 400MHz',
    );
  const scanned = readProfile(textOf(path));
  const document = flags.prove && !scanned.proved ? await provedPoints(scanned) : scanned;
  const result = analyseDocument(document, {
    temperatures: flags.temperature ?? USUAL_TEMPERATURES,
    barrierError: flags.barrierError,
    couplings: flags.couplings,
    hinderedTorsion: flags.hinderedTorsion,
    hinderedRotor: flags.hinderedRotor,
    coalescence: shift !== undefined && field !== undefined ? { shiftDifference: shift, spectrometerFrequency: field } : undefined,
  });
  if (flags.json) {
    const { molecule, rotor, provenance } = document;
    process.stdout.write(`${JSON.stringify({ molecule: molecule.smiles, rotor: rotor.torsion, ...result, provenance })}\n`);
    return 0;
  }
  const { molecule, rotor, provenance } = document;
  process.stdout.write(
    `${molecule.name || molecule.smiles}  torsion ${rotor.torsion.join('-')}  ${rotor.kind}  ${provenance.potential}\n\n${analysisTables(document, result, flags.unit)}`,
  );
  return 0;
}

function textOf(path: string): string {
  if (path === '-') return readFileSync(0, 'utf8');
  if (!existsSync(path))
    throw new TordialError('file/missing', `there is no file ${path}; tordial profile -o FOLDER writes one`, { file: path });
  return readFileSync(path, 'utf8');
}
