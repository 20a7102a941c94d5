/** What all documents have in common: their parts as schemas, and how one is opened. */
import { TordialError } from '@tordial/geometry';
import { z } from 'zod';

export const index = z.int().min(0);
export const torsion = z.tuple([index, index, index, index]);
export const note = z.object({
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
export const documentMolecule = z.object({
  name: z.string(),
  smiles: z.string().describe('canonical SMILES of what was scanned'),
  elements: z.array(z.string()).min(4).describe('element symbols in the order of the input, added hydrogens last'),
  formalCharges: z.array(z.int()),
  bonds: z.array(z.tuple([index, index, z.int().min(1).max(3)])).describe('rows of atom, atom, order'),
  fragments: z.int().min(1),
});

/**
 * Opens a document of the kind `tordial/KIND/1` from JSON text or from a value. Throws `document/json` for text that is no JSON,
 * `document/schema` for another kind, `document/version` for a newer major version, `document/field` naming the first field that is wrong.
 */
export function readDocument<T>(input: unknown, kind: string, schema: z.ZodType<T>): T {
  const value = typeof input === 'string' ? parseJson(input) : input;
  const named = typeof value === 'object' && value !== null && 'schema' in value ? String(value.schema) : '';
  const match = new RegExp(`^tordial/${kind}/(\\d+)$`).exec(named);
  if (!match)
    throw new TordialError(
      'document/schema',
      `this is no ${kind} document: its "schema" is ${JSON.stringify(named)}, not "tordial/${kind}/1"`,
    );
  if (match[1] !== '1')
    throw new TordialError(
      'document/version',
      `the document is of version ${match[1]} and this version of tordial reads version 1; use a newer tordial`,
    );
  const result = schema.safeParse(value);
  if (!result.success) {
    const [{ path, message }] = result.error.issues;
    throw new TordialError('document/field', `the ${kind} document is wrong at ${path.join('.') || 'its top'}: ${message}`);
  }
  return result.data;
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
