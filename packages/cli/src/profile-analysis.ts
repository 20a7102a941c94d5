/** What follows from a profile document, with the saddles and free energies of its proved points where it has them. */
import {
  type AnalysisOptions,
  analyseProfile,
  kcalPer,
  type ProfileAnalysis,
  type ProfileRotorResult,
  provedEnergies,
  rotorResultOfProfile,
  type WellThermodynamics,
  wellThermodynamics,
} from '@tordial/analysis';
import { type Note, TordialError } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { hessiansOfWells } from './proved-points.js';

export interface DocumentAnalysis {
  /** Of every energy in the analysis, whatever the unit of the profile. */
  readonly unit: 'kcal/mol';
  /** From electronic energies: of the proved saddles where they are known, of the profile elsewhere. */
  readonly electronic: ProfileAnalysis;
  /** From free energies (rigid rotor, harmonic oscillators, 1 bar) with Wigner tunnelling; null where a well was not proved. */
  readonly freeEnergy: ProfileAnalysis | null;
  /** Each well as an ideal gas (rigid rotor, harmonic oscillators), in the order of the rotamers; null without proved points. */
  readonly wells: readonly (WellThermodynamics | null)[] | null;
  /** The torsion as a hindered rotor; null where the profile cannot be one or is too heavy to be one unasked, with the reason. */
  readonly hinderedRotor: ProfileRotorResult | null;
  readonly noHinderedRotor: Note | null;
  /** Points that could not be used. */
  readonly notes: readonly Note[];
}

export interface DocumentAnalysisOptions extends Pick<AnalysisOptions, 'temperatures' | 'barrierError' | 'coalescence' | 'couplings'> {
  /** In the free energies, the hindered rotor in place of the torsional vibration of each well. Needs proved points and a potential that the document names. */
  readonly hinderedTorsion?: boolean;
  /** Calculate the levels of a heavy rotor too, which may take minutes; when left out, of those that take no more than a second or two. */
  readonly hinderedRotor?: boolean;
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
    return { unit: 'kcal/mol', electronic, freeEnergy: null, wells: null, ...rotorOf(document, options), notes: [] };
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
  return {
    unit: 'kcal/mol',
    electronic,
    freeEnergy: freeEnergies ? analyseProfile(document, { ...options, saddles, saddleCounts, freeEnergies, transmission }) : null,
    wells: wellThermodynamics(document, options.temperatures ?? [298.15]),
    ...rotorOf(document, options),
    notes,
  };
}

/** Largest rotor that is calculated unasked. */
const LIGHT = 300;

function rotorOf(
  document: ProfileDocument,
  { temperatures = [298.15], hinderedRotor: asked }: DocumentAnalysisOptions,
): Pick<DocumentAnalysis, 'hinderedRotor' | 'noHinderedRotor'> {
  try {
    return { hinderedRotor: rotorResultOfProfile(document, temperatures, { largest: asked ? undefined : LIGHT }), noHinderedRotor: null };
  } catch (error) {
    if (!(error instanceof TordialError)) throw error;
    return { hinderedRotor: null, noHinderedRotor: { code: error.code, message: `no hindered rotor: ${error.message}` } };
  }
}
