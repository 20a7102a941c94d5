/** Documents at the border: what comes from a file is checked before anything computes with it. */
import { TordialError } from '@tordial/geometry';
import { PROFILE_SCHEMA, type ProfileDocument } from '@tordial/scan';
import { z } from 'zod';

const index = z.int().min(0);
const torsion = z.tuple([index, index, index, index]);
const note = z.object({
  code: z.string(),
  message: z.string(),
  place: z
    .object({
      file: z.string().optional(),
      record: z.int().optional(),
      line: z.int().optional(),
      position: z.int().optional(),
      atom: index.optional(),
      bond: index.optional(),
    })
    .optional(),
});
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
  molecule: z.object({
    name: z.string(),
    smiles: z.string().describe('canonical SMILES of what was scanned'),
    elements: z.array(z.string()).min(4).describe('element symbols in the order of the input, added hydrogens last'),
    formalCharges: z.array(z.int()),
    bonds: z.array(z.tuple([index, index, z.int().min(1).max(3)])).describe('rows of atom, atom, order'),
    fragments: z.int().min(1),
  }),
  rotor: z.object({
    torsion: torsion.describe('the four atoms whose torsion angle is driven, 0-based'),
    axis: z.tuple([index, index]),
    kind: z.string(),
    sides: z.tuple([z.array(index), z.array(index)]).describe('atoms that turn with either axis atom'),
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
        angle: z.number().min(-180).lt(180).describe('degree'),
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
  analysis: z.record(z.string(), z.unknown()).optional().describe('what followed from the profile when it was written'),
  settings: z.looseObject({
    kind: z.enum(['relaxed', 'rigid']),
    step: z.number().positive(),
    startAngle: z.number(),
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
  const value = typeof input === 'string' ? parseJson(input) : input;
  const schema = typeof value === 'object' && value !== null && 'schema' in value ? String(value.schema) : '';
  const match = /^tordial\/profile\/(\d+)$/.exec(schema);
  if (!match)
    throw new TordialError(
      'document/schema',
      `this is no profile document: its "schema" is ${JSON.stringify(schema)}, not "${PROFILE_SCHEMA}"`,
    );
  if (match[1] !== '1')
    throw new TordialError(
      'document/version',
      `the document is of version ${match[1]} and this version of tordial reads version 1; use a newer tordial`,
    );
  const result = profileSchema.safeParse(value);
  if (!result.success) {
    const [{ path, message }] = result.error.issues;
    throw new TordialError('document/field', `the profile document is wrong at ${path.join('.') || 'its top'}: ${message}`);
  }
  const document: ProfileDocument = result.data;
  checkSizes(document);
  return document;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch (cause) {
    throw new TordialError(
      'document/json',
      `the document is not JSON: ${cause instanceof Error ? cause.message : String(cause)}`,
      {},
      { cause },
    );
  }
}

/** What a schema cannot say: every list of the document speaks of the same atoms. */
function checkSizes({ molecule, rotor, points, stationaryPoints, proved = [] }: ProfileDocument): void {
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
  for (const [n, { of }] of proved.entries())
    if (!stationaryPoints[of])
      throw new TordialError('document/field', `the profile document is wrong at proved.${n}.of: there is no stationary point ${of}`);
}
