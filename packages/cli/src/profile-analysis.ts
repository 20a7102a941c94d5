/** What follows from a profile document, with the saddles and free energies of its proved points where it has them. */
import { type AnalysisOptions, analyseProfile, kcalPer, type ProfileAnalysis, provedEnergies } from '@tordial/analysis';
import type { Note } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';

export interface DocumentAnalysis {
  /** From electronic energies: of the proved saddles where they are known, of the profile elsewhere. */
  readonly electronic: ProfileAnalysis;
  /** From free energies (rigid rotor, harmonic oscillators, 1 bar) with Wigner tunnelling; null where a well was not proved. */
  readonly freeEnergy: ProfileAnalysis | null;
  /** Points that could not be used. */
  readonly notes: readonly Note[];
}

export type DocumentAnalysisOptions = Pick<AnalysisOptions, 'temperatures' | 'barrierError' | 'coalescence' | 'couplings'>;

/** Analyses a document, electronically and by free energies. Throws as `analyseProfile` does. */
export function analyseDocument(document: ProfileDocument, options: DocumentAnalysisOptions = {}): DocumentAnalysis {
  if (!document.proved) return { electronic: analyseProfile(document, options), freeEnergy: null, notes: [] };
  const factor = kcalPer(document.unit);
  const { saddles, saddleCounts, freeEnergies, transmission, notes } = provedEnergies(
    document,
    document.proved.map(({ of, verdict, energy, coordinates, frequencies }) => ({
      of,
      verdict,
      energy: energy * factor,
      coordinates: Float64Array.from(coordinates),
      frequencies,
    })),
  );
  return {
    electronic: analyseProfile(document, { ...options, saddles, saddleCounts }),
    freeEnergy: freeEnergies ? analyseProfile(document, { ...options, saddles, saddleCounts, freeEnergies, transmission }) : null,
    notes,
  };
}
