/**
 * Requests and answers of an engine in QCSchema, the open standard of the Molecular Sciences Software Institute for quantum-chemistry
 * JSON (AtomicInput and AtomicResult, schema version 1): geometry in bohr, energy in hartree, gradient in hartree/bohr.
 */
import { type Coordinates, elementSymbol, type Molecule, TordialError } from '@tordial/geometry';

/** Angstrom in one bohr and kcal/mol in one hartree: CODATA 2018 (E. Tiesinga et al., Rev. Mod. Phys. 93, 025010 (2021)). */
export const ANGSTROM_PER_BOHR = 0.529177210903;
export const KCAL_PER_HARTREE = 627.5094740631;

/** What the engine is asked to compute: its model and whatever keywords it knows. */
export interface EngineModel {
  readonly method: string;
  readonly basis?: string | null;
  readonly keywords?: Readonly<Record<string, unknown>>;
  /** 2S + 1; 1 when left out. */
  readonly multiplicity?: number;
}

export interface AtomicInput {
  readonly schema_name: 'qcschema_input';
  readonly schema_version: 1;
  readonly molecule: {
    readonly schema_name: 'qcschema_molecule';
    readonly schema_version: 2;
    readonly symbols: readonly string[];
    /** Bohr, flat. */
    readonly geometry: readonly number[];
    readonly molecular_charge: number;
    readonly molecular_multiplicity: number;
    /** The answer's gradient must be in the frame of the question. */
    readonly fix_com: true;
    readonly fix_orientation: true;
  };
  readonly driver: 'energy' | 'gradient';
  readonly model: { readonly method: string; readonly basis: string | null };
  readonly keywords: Readonly<Record<string, unknown>>;
}

/** The request for one geometry (angstrom). Coordinates are rounded to 1e-8 bohr, so that a repeated geometry is the same request. */
export function atomicInput(molecule: Molecule, x: Coordinates, model: EngineModel, driver: 'energy' | 'gradient'): AtomicInput {
  return {
    schema_name: 'qcschema_input',
    schema_version: 1,
    molecule: {
      schema_name: 'qcschema_molecule',
      schema_version: 2,
      symbols: Array.from(molecule.atomicNumbers, elementSymbol),
      geometry: Array.from(x, (value) => Math.round((value / ANGSTROM_PER_BOHR) * 1e8) / 1e8),
      molecular_charge: molecule.formalCharges.reduce((sum, charge) => sum + charge, 0),
      molecular_multiplicity: model.multiplicity ?? 1,
      fix_com: true,
      fix_orientation: true,
    },
    driver,
    model: { method: model.method, basis: model.basis ?? null },
    keywords: model.keywords ?? {},
  };
}

export interface EngineAnswer {
  /** kcal/mol. */
  readonly energy: number;
  /** kcal/mol/angstrom, 3 values an atom; absent when only the energy was asked for. */
  readonly gradient?: Float64Array;
}

/**
 * Reads an AtomicResult. Throws `engine/failed` with the engine's own error text when it reports one, `engine/answer` when the text is
 * no AtomicResult or holds values that are not finite.
 */
export function readAtomicResult(text: string, atomCount: number, driver: 'energy' | 'gradient'): EngineAnswer {
  const result = parseObject(text);
  if (result.success !== true) {
    const error = isObject(result.error) ? result.error : {};
    throw new TordialError(
      'engine/failed',
      `the engine reports a failure: ${String(error.error_type ?? 'unknown')}: ${String(error.error_message ?? text.slice(0, 2000)).trim()}`,
    );
  }
  const properties = isObject(result.properties) ? result.properties : {};
  const hartree = driver === 'energy' ? (result.return_result ?? properties.return_energy) : properties.return_energy;
  if (typeof hartree !== 'number' || !Number.isFinite(hartree))
    throw new TordialError('engine/answer', `the engine's answer holds no finite energy (return_energy is ${JSON.stringify(hartree)})`);
  const energy = hartree * KCAL_PER_HARTREE;
  if (driver === 'energy') return { energy };
  const gradient = Array.isArray(result.return_result) ? result.return_result.flat() : [];
  if (gradient.length !== 3 * atomCount || !gradient.every((value) => typeof value === 'number' && Number.isFinite(value)))
    throw new TordialError('engine/answer', `the engine's answer holds no finite gradient of ${3 * atomCount} values`);
  return { energy, gradient: Float64Array.from(gradient, (value: number) => (value * KCAL_PER_HARTREE) / ANGSTROM_PER_BOHR) };
}

function parseObject(text: string): Record<string, unknown> {
  // an engine may print lines of its own before the answer
  const start = text.indexOf('{');
  try {
    const value: unknown = JSON.parse(text.slice(Math.max(start, 0)));
    if (isObject(value)) return value;
  } catch {
    // falls through to the error below, which shows what came instead
  }
  throw new TordialError(
    'engine/answer',
    `the engine's answer is not a JSON object: ${text.trim().slice(0, 500) || 'nothing was printed'}`,
  );
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}
