/** What follows from a profile document, with the saddles and free energies of its proved points where it has them. */
import {
  type AnalysisOptions,
  analyseProfile,
  kcalPer,
  type ProfileAnalysis,
  type ProfileRotorResult,
  provedEnergies,
  rotorResultOfProfile,
} from '@tordial/analysis';
import { type Note, TordialError } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { hessiansOfWells } from './proved-points.js';

export interface DocumentAnalysis {
  /** From electronic energies: of the proved saddles where they are known, of the profile elsewhere. */
  readonly electronic: ProfileAnalysis;
  /** From free energies (rigid rotor, harmonic oscillators, 1 bar) with Wigner tunnelling; null where a well was not proved. */
  readonly freeEnergy: ProfileAnalysis | null;
  /** The torsion as a hindered rotor; null where the profile cannot be one, with the reason in the notes. */
  readonly hinderedRotor: ProfileRotorResult | null;
  /** Points that could not be used. */
  readonly notes: readonly Note[];
}

export interface DocumentAnalysisOptions extends Pick<AnalysisOptions, 'temperatures' | 'barrierError' | 'coalescence' | 'couplings'> {
  /** In the free energies, the hindered rotor in place of the torsional vibration of each well. Needs proved points and a potential that the document names. */
  readonly hinderedTorsion?: boolean;
}

/**
 * Analyses a document: electronically, by free energies, and its torsion as a hindered rotor. Throws as `analyseProfile` does, `proof/points` for a
 * hindered torsion in a document without proved points, and as `hessiansOfWells` does.
 */
export function analyseDocument(document: ProfileDocument, options: DocumentAnalysisOptions = {}): DocumentAnalysis {
  const { proved } = document;
  if (!proved) {
    if (options.hinderedTorsion)
      throw new TordialError('proof/points', 'a hindered torsion in the free energies needs proved points: add --prove');
    const electronic = analyseProfile(document, options);
    const { hinderedRotor, refused } = rotorOf(document, options.temperatures);
    return { electronic, freeEnergy: null, hinderedRotor, notes: refused };
  }
  const factor = kcalPer(document.unit);
  const hessians = options.hinderedTorsion ? hessiansOfWells(document) : null;
  const { saddles, saddleCounts, freeEnergies, transmission, notes } = provedEnergies(
    document,
    proved.map(({ of, verdict, energy, coordinates, frequencies }) => ({
      of,
      verdict,
      energy: energy * factor,
      coordinates: Float64Array.from(coordinates),
      frequencies,
      hessian: hessians?.get(of),
    })),
    undefined,
    options.hinderedTorsion,
  );
  const electronic = analyseProfile(document, { ...options, saddles, saddleCounts });
  const { hinderedRotor, refused } = rotorOf(document, options.temperatures);
  return {
    electronic,
    freeEnergy: freeEnergies ? analyseProfile(document, { ...options, saddles, saddleCounts, freeEnergies, transmission }) : null,
    hinderedRotor,
    notes: [...notes, ...refused],
  };
}

function rotorOf(
  document: ProfileDocument,
  temperatures: readonly number[] = [298.15],
): { hinderedRotor: ProfileRotorResult | null; refused: Note[] } {
  try {
    return { hinderedRotor: rotorResultOfProfile(document, temperatures), refused: [] };
  } catch (error) {
    if (!(error instanceof TordialError)) throw error;
    return { hinderedRotor: null, refused: [{ code: error.code, message: `no hindered rotor: ${error.message}` }] };
  }
}
