/** Fit documents at the border. */
import { FIT_SCHEMA, type FitDocument } from '@tordial/analysis';
import { TordialError } from '@tordial/geometry';
import { z } from 'zod';
import { documentMolecule, index, note, readDocument, torsion } from './document-parts.js';

const unit = z.enum(['kcal/mol', 'kJ/mol']);
const term = z.object({ n: z.int().min(1).max(6), v: z.number(), phase: z.number() });
const curveErrors = z.object({
  rmsd: z.number(),
  largest: z.number(),
  largestAt: z.number().describe('degree'),
  meanWellError: z.number().nullable(),
  meanBarrierError: z.number().nullable(),
  extrema: z.array(
    z.object({
      kind: z.enum(['well', 'barrier']),
      angle: z.number(),
      energy: z.number().describe("above the reference's lowest well"),
      found: z.object({ angle: z.number(), energy: z.number() }).nullable().describe('the like of it on this curve, within 45 degrees'),
    }),
  ),
});

/** The shape of `tordial/fit/1`; docs/schemas/fit-1.json is made from it. */
export const fitSchema = z.object({
  schema: z.literal(FIT_SCHEMA),
  unit: unit.describe('of the energies in sets and quality'),
  forceField: z.enum(['MMFF94', 'MMFF94s']),
  series: z.array(
    z.object({
      torsions: z.array(torsion).describe('atom indices in the first molecule, 0-based'),
      terms: z
        .array(
          term.extend({
            standardError: z.number().nullable().describe('of v, kcal/mol'),
            phaseStandardError: z.number().nullable().describe('degree'),
            determined: z.boolean(),
          }),
        )
        .describe('0.5 v (1 + cos(n phi - phase)); v in kcal/mol, phase in degree'),
      types: torsion.nullable().describe('MMFF94 atom types'),
      class: z.int().nullable().describe('MMFF94 torsion class'),
      before: z.array(term).describe("the force field's own terms"),
      smarts: z.object({
        patterns: z.array(z.object({ smarts: z.string(), matches: z.int(), fitted: z.int() })),
        statement: z.string(),
      }),
      forms: z.array(
        z.object({
          unit,
          fourier: z.object({ terms: z.array(term) }),
          cosinePowers: z.object({ convention: z.string(), c: z.array(z.number()).length(7) }).nullable(),
          kNPhase: z.object({
            terms: z.array(z.object({ k: z.number().min(0), n: z.int(), phase: z.number() })),
            constant: z.number(),
          }),
        }),
      ),
    }),
  ),
  sets: z
    .array(
      z.object({
        molecule: documentMolecule,
        torsion,
        reference: z.string(),
        torsions: z.array(z.array(torsion)).describe("for each series, in this molecule's atom indices"),
        points: z.array(z.object({ angle: z.number(), reference: z.number(), before: z.number(), after: z.number(), weight: z.number() })),
        before: curveErrors,
        after: curveErrors,
      }),
    )
    .min(1),
  quality: z.object({
    rmsdBefore: z.number(),
    rmsdAfter: z.number(),
    largestAfter: z.number(),
    residualStandardDeviation: z.number().nullable(),
    points: index,
    independentPoints: index,
    parameters: index,
    degreesOfFreedom: z.int(),
    crossValidation: z.object({ folds: z.int(), errors: z.array(z.object({ order: z.int(), error: z.number().nullable() })) }).nullable(),
    correlations: z.object({ labels: z.array(z.string()), rows: z.array(z.array(z.number())) }).nullable(),
    selfConsistency: z.object({ iterations: z.int(), change: z.number(), converged: z.boolean() }).nullable(),
  }),
  settings: z.looseObject({
    target: z.enum(['profile', 'difference']),
    geometries: z.enum(['given', 'relaxed']),
    scope: z.enum(['rotor', 'type', 'axis']),
    order: z.int().min(0).max(6),
    phases: z.enum(['fixed', 'free']),
    weights: z.discriminatedUnion('kind', [
      z.object({ kind: z.literal('uniform') }),
      z.object({ kind: z.literal('boltzmann'), temperature: z.number().positive() }),
      z.object({ kind: z.literal('given') }),
    ]),
    restraint: z.object({ kind: z.enum(['none', 'ridge', 'lasso']), strength: z.number(), toward: z.enum(['zero', 'existing']) }),
  }),
  notes: z.array(note),
  provenance: z.looseObject({ program: z.string(), version: z.string() }),
});

/** Reads a fit document from JSON text or from a value. Throws `document/json`, `document/schema`, `document/version` and `document/field` as `readProfile` does. */
export function readFit(input: unknown): FitDocument {
  const document: FitDocument = readDocument(input, 'fit', fitSchema);
  document.series.forEach((_series, g) => {
    for (const [n, { molecule, torsions }] of document.sets.entries()) {
      if (torsions.length !== document.series.length) throw wrong(`sets.${n}.torsions`, 'it does not have one list a series');
      if (torsions[g].flat().some((atom) => atom >= molecule.elements.length))
        throw wrong(`sets.${n}.torsions.${g}`, 'it names atoms that are not there');
    }
  });
  return document;
}

function wrong(place: string, what: string): TordialError {
  return new TordialError('document/field', `the fit document is wrong at ${place}: ${what}`);
}
