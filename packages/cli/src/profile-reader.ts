/** Documents at the border: what comes from a file is checked before anything computes with it. */
import { TordialError } from '@tordial/geometry';
import { PROFILE_SCHEMA, type ProfileDocument } from '@tordial/scan';
import { z } from 'zod';
import { documentMolecule, index, note, readDocument, torsion } from './document-parts.js';

const branchEnd = z.object({ energy: z.number(), torque: z.number() }).nullable();

const pathEnd = z.object({ well: index.nullable(), angle: z.number(), energy: z.number() });
const provedPoint = z.object({
  of: index.describe('index among stationaryPoints'),
  kind: z.enum(['well', 'barrier', 'crossing']),
  verdict: z
    .enum(['minimum', 'merged', 'saddle', 'other saddle', 'higher order', 'not found'])
    .describe('what the point is; minimum and saddle are what a well and a barrier should be'),
  order: z.int().min(0).describe('negative eigenvalues of the projected Hessian'),
  angle: z.number(),
  energy: z.number(),
  relativeEnergy: z.number().describe('above the lowest proved point'),
  gradientMax: z.number().describe('kcal/mol/angstrom'),
  converged: z.boolean(),
  moved: z.number().describe("root mean square distance from the profile's geometry, angstrom"),
  overlap: z.number().nullable().describe('of the negative mode with the turn of the rotor, 0 to 1'),
  motion: z.object({ kind: z.enum(['rotor', 'other rotor', 'inversion', 'other']), atoms: z.array(index), overlap: z.number() }).nullable(),
  ends: z.tuple([pathEnd, pathEnd]).nullable().describe('where both paths down end'),
  inverts: z.array(index).describe('nitrogens that turn inside out between the ends'),
  links: z.int().min(0).describe('saddles on the way between the wells, this one the highest; 0 where they are not joined'),
  sameAs: index.nullable().describe('first well that is the same minimum with equivalent atoms exchanged'),
  frequencies: z.array(z.number()).describe('cm-1, imaginary ones negative'),
  coordinates: z.array(z.number()),
});

/** The shape of `tordial/profile/1`; docs/schemas/profile-1.json is made from it. */
export const profileSchema = z.object({
  schema: z.literal(PROFILE_SCHEMA),
  molecule: documentMolecule,
  rotor: z.object({
    torsion: torsion.describe('the four atoms whose torsion angle is driven, 0-based'),
    axis: z.tuple([index, index]),
    kind: z.string(),
    sides: z.tuple([z.array(index), z.array(index)]).describe('atoms that turn with either axis atom'),
    serves: z
      .array(z.object({ torsion, mirrored: z.boolean() }))
      .optional()
      .describe('torsions of equivalent rotors, whose profile this is too (at -phi where mirrored)'),
    parameters: z.array(
      z.object({
        atoms: torsion,
        types: torsion,
        class: z.int(),
        v: z.array(z.number()).describe('V1, V2, V3 ..., kcal/mol'),
        phases: z.array(z.number()).optional().describe('degree, where they are not 0, 180, 0, 180 ...'),
        source: z.enum(['specific', 'wildcard', 'empirical rule', 'series']),
      }),
    ),
  }),
  unit: z.enum(['kcal/mol', 'kJ/mol']),
  points: z
    .array(
      z.object({
        angle: z.number().min(-360).max(360).describe('degree, ascending; in [-180, 180) for the full turn'),
        energy: z.number().describe('absolute'),
        relativeEnergy: z.number().describe('above the lowest well'),
        torque: z.number().describe('dE/dphi, unit per radian'),
        converged: z.boolean(),
        residual: z
          .number()
          .nullable()
          .describe('largest gradient component tangent to the constraint, kcal/mol/angstrom; null for a rigid scan'),
        breakAfter: z.boolean().describe('the next point lies on another branch'),
        beyond: branchEnd.describe("this point's branch at the next angle"),
        before: branchEnd.describe("this point's branch at the previous angle"),
        torqueAfter: z
          .number()
          .optional()
          .describe('slope of the branch that leads on, where two branches of one energy meet at this very angle'),
        copyOf: z.number().optional().describe('angle of the point that this one is copied from, where one period was scanned'),
        coordinates: z.array(z.number()).describe('angstrom, x0 y0 z0 x1 ...'),
      }),
    )
    .min(3),
  stationaryPoints: z.array(
    z.object({
      kind: z.enum(['well', 'barrier', 'crossing']),
      angle: z.number(),
      energy: z.number(),
      relativeEnergy: z.number(),
      torque: z.number(),
      converged: z.boolean(),
      coordinates: z.array(z.number()),
    }),
  ),
  proved: z.array(provedPoint).optional(),
  analysis: z
    .record(z.string(), z.unknown())
    .optional()
    .describe('what followed from the profile when it was written; energies in its own unit, kcal/mol'),
  settings: z.looseObject({
    kind: z.enum(['relaxed', 'rigid']),
    step: z.number().positive(),
    startAngle: z.number(),
    range: z.tuple([z.number(), z.number()]).optional().describe('first and last angle asked for, of an open profile'),
    period: z.number().positive().optional().describe('degrees that were scanned, the rest copied from them'),
    conformers: z.int().min(0),
    seed: z.int().min(0),
    tolerance: z.number().positive(),
  }),
  notes: z.array(note),
  provenance: z.looseObject({ program: z.string(), version: z.string(), potential: z.string() }),
});

/**
 * Reads a profile document from JSON text or from a value. Throws `document/json` for text that is no JSON, `document/schema` for another
 * kind of document, `document/version` for a newer major version, `document/field` naming the first field that is wrong.
 */
export function readProfile(input: unknown): ProfileDocument {
  const document: ProfileDocument = readDocument(input, 'profile', profileSchema);
  checkSizes(document);
  return document;
}

/** What a schema cannot say: every list of the document speaks of the same atoms. */
function checkSizes({ molecule, rotor, points, stationaryPoints, proved = [], settings }: ProfileDocument): void {
  const atoms = molecule.elements.length;
  const wrong = (what: string): TordialError =>
    new TordialError('document/field', `the profile document is wrong at ${what}: it does not fit ${atoms} atoms`);
  if (molecule.formalCharges.length !== atoms) throw wrong('molecule.formalCharges');
  if (molecule.bonds.some(([a, b]) => a >= atoms || b >= atoms)) throw wrong('molecule.bonds');
  if ([...rotor.torsion, ...rotor.axis, ...rotor.sides.flat()].some((atom) => atom >= atoms)) throw wrong('rotor');
  for (const [name, list] of [
    ['points', points],
    ['stationaryPoints', stationaryPoints],
    ['proved', proved],
  ] as const)
    for (const [n, { coordinates }] of list.entries()) if (coordinates.length !== 3 * atoms) throw wrong(`${name}.${n}.coordinates`);
  const outside = points.findIndex(({ angle }) => settings.range === undefined && !(angle >= -180 && angle < 180));
  if (outside >= 0)
    throw new TordialError(
      'document/field',
      `the profile document is wrong at points.${outside}.angle: a full turn counts angles from -180 up to 180, without it`,
    );
  for (const [n, { of }] of proved.entries())
    if (!stationaryPoints[of])
      throw new TordialError('document/field', `the profile document is wrong at proved.${n}.of: there is no stationary point ${of}`);
}
